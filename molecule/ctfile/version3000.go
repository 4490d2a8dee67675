package ctfile

import (
	"strconv"
	"strings"
)

const v30 = "M  V30 "

// v30Line returns the next line of a V3000 table without its prefix. A line that ends in "-" goes on in the next one.
func (r *Reader) v30Line() (string, error) {
	var whole strings.Builder
	for {
		line, err := r.source.next()
		if err == errRecordEnds {
			return "", faultf(r.source.number, "the record ends inside the V3000 table; the file was cut off")
		}
		if err != nil {
			return "", err
		}
		if !strings.HasPrefix(line, strings.TrimRight(v30, " ")) {
			return "", faultf(r.source.number, "expected a line that begins with %q, found %q", strings.TrimSpace(v30), shortened(line))
		}
		line = strings.TrimRight(strings.TrimPrefix(line[len(v30)-1:], " "), " \t")
		if part, goesOn := strings.CutSuffix(line, "-"); goesOn {
			whole.WriteString(part)
			if whole.Len() > maxLine {
				return "", faultf(r.source.number, "the continued line is longer than %d bytes", maxLine)
			}
			continue
		}
		whole.WriteString(line)
		return whole.String(), nil
	}
}

// v30Words splits a line at blanks outside of parentheses and quotes.
func v30Words(line string) []string {
	var words []string
	depth, quoted, from := 0, false, -1
	for i := range len(line) {
		switch c := line[i]; {
		case c == '"':
			quoted = !quoted
		case quoted:
		case c == '(':
			depth++
		case c == ')':
			depth--
		case (c == ' ' || c == '\t') && depth <= 0:
			if from >= 0 {
				words, from = append(words, line[from:i]), -1
			}
			continue
		}
		if from < 0 {
			from = i
		}
	}
	if from >= 0 {
		words = append(words, line[from:])
	}
	return words
}

// readV3000 reads the connection table and the M  END after it.
func (r *Reader) readV3000(t *table) error {
	index := map[int]int{} // atom number of the file → index
	counts := []int(nil)
	for {
		line, err := r.v30Line()
		if err != nil {
			return err
		}
		number := r.source.number
		words := v30Words(line)
		switch {
		case len(words) == 0:
		case words[0] == "COUNTS":
			if counts = wholeNumbers(words[1:]); len(counts) < 2 {
				return faultf(number, "COUNTS needs the numbers of atoms and bonds, the line is %q", shortened(line))
			}
		case words[0] == "BEGIN" && len(words) > 1:
			if err := r.v30Block(t, words[1], index); err != nil {
				return err
			}
		case words[0] == "END" && len(words) > 1 && words[1] == "CTAB":
			if counts == nil {
				return faultf(number, "the V3000 table has no COUNTS line")
			}
			if counts[0] != len(t.atoms) || counts[1] != len(t.bonds) {
				return faultf(number, "COUNTS announces %d atoms and %d bonds, the table has %d and %d",
					counts[0], counts[1], len(t.atoms), len(t.bonds))
			}
			return r.v30End()
		case words[0] == "LINKNODE":
			return faultf(number, "LINKNODE describes a query; give a definite molecule")
		default:
			return faultf(number, "expected COUNTS, BEGIN or END CTAB, found %q", shortened(line))
		}
	}
}

func (r *Reader) v30End() error {
	for {
		line, err := r.source.next()
		if err == errRecordEnds {
			return faultf(r.source.number, "the record ends without M  END; the file was cut off")
		}
		if err != nil {
			return err
		}
		switch {
		case strings.HasPrefix(line, "M  END"):
			return nil
		case strings.HasPrefix(line, "M  V30 BEGIN"), strings.TrimSpace(line) != "" && !strings.HasPrefix(line, "M  "):
			return faultf(r.source.number, "expected M  END after the table, found %q; R groups and templates are not read", shortened(line))
		}
	}
}

// v30Block reads a block up to its END.
func (r *Reader) v30Block(t *table, block string, index map[int]int) error {
	if block == "CTAB" {
		return nil
	}
	for depth := 0; ; {
		line, err := r.v30Line()
		if err != nil {
			return err
		}
		number := r.source.number
		words := v30Words(line)
		switch {
		case len(words) > 0 && words[0] == "BEGIN":
			depth++
			continue
		case len(words) > 0 && words[0] == "END":
			if depth == 0 {
				return nil
			}
			depth--
			continue
		case len(words) == 0 || depth > 0:
			continue
		}
		switch block {
		case "ATOM":
			err = t.v30Atom(words, number, index)
		case "BOND":
			err = t.v30Bond(words, number, index)
		case "SGROUP":
			t.note("S-groups (brackets, polymers, attached data) were left aside; all atoms count as drawn")
		case "COLLECTION":
			if strings.Contains(line, "/STERAC") || strings.Contains(line, "/STEREL") {
				t.note("the file says that some stereocentres are racemic or known only relative to each other; they were read as drawn")
			}
		}
		if err != nil {
			return err
		}
	}
}

// v30Atom reads: number symbol x y z map [KEY=value]….
func (t *table) v30Atom(words []string, line int, index map[int]int) error {
	atom := len(t.atoms) + 1
	if len(words) < 6 {
		return faultf(line, "atom %d needs a number, a symbol, three coordinates and a mapping number", atom)
	}
	number, err := strconv.Atoi(words[0])
	if err != nil || number < 1 {
		return faultf(line, "atom %d has the number %q; write a whole number from 1", atom, words[0])
	}
	if _, twice := index[number]; twice {
		return faultf(line, "the atom number %d is used twice", number)
	}
	index[number] = len(t.atoms)
	a := tableAtom{line: line, valence: unstated}
	var ok bool
	if a.element, a.named, ok = symbolAtom(words[1]); !ok {
		return symbolFault(line, atom, words[1])
	}
	a.isotope = a.named
	for k := range a.position {
		if a.position[k], ok = coordinate(words[2+k]); !ok {
			return coordinateFault(line, atom, words[2+k])
		}
	}
	for _, w := range words[6:] {
		key, text, _ := strings.Cut(w, "=")
		name, known := v30Properties[key]
		if !known {
			switch key {
			case "HCOUNT", "SUBST", "UNSAT", "RBCNT", "RGROUPS":
				return faultf(line, "atom %d carries %s, a query; give a definite molecule", atom, key)
			}
			continue
		}
		value, err := strconv.Atoi(text)
		if err != nil {
			return faultf(line, "atom %d has %s where a whole number belongs", atom, w)
		}
		if wrong := a.set(name, value); wrong != "" {
			return faultf(line, "%s gives atom %d %s", key, atom, wrong)
		}
	}
	t.atoms = append(t.atoms, a)
	return nil
}

// v30Properties names the atom properties that are read, as (*tableAtom).set knows them.
var v30Properties = map[string]string{"CHG": "CHG", "RAD": "RAD", "MASS": "ISO", "VAL": "VAL", "CFG": "CFG"}

// v30Bond reads: number type atom atom [CFG=mark]….
func (t *table) v30Bond(words []string, line int, index map[int]int) error {
	bond := len(t.bonds) + 1
	n := wholeNumbers(words[:min(4, len(words))])
	if len(n) < 4 {
		return faultf(line, "bond %d needs a number, a type and two atom numbers", bond)
	}
	var ends [2]int
	for k, number := range n[2:4] {
		at, ok := index[number]
		if !ok {
			return faultf(line, "bond %d names atom %d, which the atom block does not have", bond, number)
		}
		ends[k] = at + 1
	}
	b, err := t.bond(line, ends[0], ends[1], n[1])
	if err != nil {
		return err
	}
	for _, w := range words[4:] {
		switch w {
		case "CFG=1":
			b.direction = wedge
		case "CFG=2":
			b.direction = either
		case "CFG=3":
			b.direction = hash
		}
		if key, _, _ := strings.Cut(w, "="); key == "TOPO" || key == "ENDPTS" {
			return faultf(line, "bond %d carries %s (a query or a bond to several atoms); give a definite molecule", bond, key)
		}
	}
	t.bonds = append(t.bonds, b)
	return nil
}

// wholeNumbers returns the integers that a list begins with.
func wholeNumbers(words []string) []int {
	var numbers []int
	for _, w := range words {
		n, err := strconv.Atoi(w)
		if err != nil {
			break
		}
		numbers = append(numbers, n)
	}
	return numbers
}
