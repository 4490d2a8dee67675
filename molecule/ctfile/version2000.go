package ctfile

import (
	"strconv"
	"strings"
)

// columns returns the integers in fields of width three, if every field is right-aligned as the description asks.
func columns(line string, fields int) ([]int, bool) {
	if len(line) < 3*fields {
		return nil, false
	}
	numbers := make([]int, fields)
	for i := range numbers {
		n, err := strconv.Atoi(strings.TrimLeft(line[3*i:3*i+3], " "))
		if err != nil {
			return nil, false
		}
		numbers[i] = n
	}
	return numbers, true
}

// integers returns the first integers of a line: in fixed columns, or else separated by blanks.
func integers(line string, fields int) ([]int, bool) {
	if numbers, ok := columns(line, fields); ok {
		return numbers, true
	}
	words := strings.Fields(line)
	if len(words) < fields {
		return nil, false
	}
	numbers := make([]int, fields)
	for i := range numbers {
		n, err := strconv.Atoi(words[i])
		if err != nil {
			return nil, false
		}
		numbers[i] = n
	}
	return numbers, true
}

// blockLine returns the next line of a block that must not end yet.
func (r *Reader) blockLine(what string) (string, error) {
	line, err := r.source.next()
	if err == errRecordEnds {
		return "", faultf(r.source.number, "the record ends in the %s; the file was cut off or the counts are too high", what)
	}
	if err == nil && strings.HasPrefix(line, "M  END") {
		return "", faultf(r.source.number, "M  END stands in the %s; the counts line announces more lines", what)
	}
	return line, err
}

func (r *Reader) readV2000(t *table, counts string) error {
	n, ok := integers(counts, 2)
	if !ok || n[0] < 0 || n[1] < 0 {
		return faultf(r.source.number, "the counts line must begin with the numbers of atoms and bonds, it is %q", shortened(counts))
	}
	for i := range n[0] {
		line, err := r.blockLine("atom block")
		if err != nil {
			return err
		}
		atom, err := atomLine(line, r.source.number, i+1)
		if err != nil {
			return err
		}
		t.atoms = append(t.atoms, atom)
	}
	for i := range n[1] {
		line, err := r.blockLine("bond block")
		if err != nil {
			return err
		}
		if err := t.bondLine(line, r.source.number, i+1); err != nil {
			return err
		}
	}
	return r.propertyBlock(t)
}

// atomLine reads xxxxx.xxxxyyyyy.yyyyzzzzz.zzzz aaaddcccssshhhbbbvvv…, or the same separated by blanks.
func atomLine(line string, number, atom int) (tableAtom, error) {
	var words [3]string
	symbol, rest := "", []int{0, 0, 0, 0, 0, 0} // mass difference, charge code, parity, hydrogens, care, valence
	if len(line) >= 32 {
		for k := range words {
			words[k] = strings.TrimLeft(line[10*k:10*k+10], " ")
		}
		symbol = strings.TrimSpace(line[31:min(34, len(line))])
	}
	fixed := symbol != "" && line[30] == ' ' && !strings.ContainsAny(symbol, " .") && words[0] != ""
	for _, w := range words {
		fixed = fixed && w != "" && !strings.Contains(w, " ")
	}
	if fixed {
		for k, from := 0, 34; k < len(rest) && from < len(line); k++ {
			to := from + 3
			if k == 0 {
				to = 36
			}
			field := strings.TrimSpace(line[from:min(to, len(line))])
			from = to
			if field == "" {
				continue
			}
			v, err := strconv.Atoi(field)
			if err != nil {
				return tableAtom{}, faultf(number, "atom %d has %q where a whole number belongs (column %d)", atom, field, from-2)
			}
			rest[k] = v
		}
	} else {
		fields := strings.Fields(line)
		if len(fields) < 4 {
			return tableAtom{}, faultf(number, "atom %d needs three coordinates and a symbol, the line is %q", atom, shortened(line))
		}
		copy(words[:], fields)
		symbol = fields[3]
		for k, field := range fields[4:min(4+len(rest), len(fields))] {
			v, err := strconv.Atoi(field)
			if err != nil {
				return tableAtom{}, faultf(number, "atom %d has %q where a whole number belongs", atom, field)
			}
			rest[k] = v
		}
	}
	a := tableAtom{line: number, valence: unstated}
	for k, w := range words {
		v, ok := coordinate(w)
		if !ok {
			return a, coordinateFault(number, atom, w)
		}
		a.position[k] = v
	}
	var ok bool
	if a.element, a.named, ok = symbolAtom(symbol); !ok {
		return a, symbolFault(number, atom, symbol)
	}
	a.isotope = a.named
	return a, a.setCodes(rest, number, atom)
}

// setCodes takes over the coded fields of an atom line.
func (a *tableAtom) setCodes(codes []int, line, atom int) error {
	if difference := codes[0]; difference != 0 {
		if a.isotope = massFromDifference(a.element, difference); a.isotope <= 0 {
			return faultf(line, "atom %d has the mass difference %d, which leaves no mass", atom, difference)
		}
	}
	switch charge := codes[1]; charge {
	case 0:
	case 1, 2, 3, 5, 6, 7:
		a.charge = 4 - charge
	case 4:
		a.radical = 2
	default:
		return faultf(line, "atom %d has the charge code %d; codes go from 0 to 7, other charges need an M  CHG line", atom, charge)
	}
	if a.parity = codes[2]; a.parity < 0 || a.parity > 3 {
		return faultf(line, "atom %d has the parity %d; it can be 0, 1, 2 or 3", atom, a.parity)
	}
	switch valence := codes[5]; {
	case valence == 15:
		a.valence = 0
	case valence < 0 || valence > 15:
		return faultf(line, "atom %d has the valence %d; it can be 0 (usual), 1 to 14, or 15 (none)", atom, valence)
	case valence > 0:
		a.valence = valence
	}
	return nil
}

// bondLine reads 111222tttsss….
func (t *table) bondLine(line string, number, bond int) error {
	n, ok := integers(line, 4)
	if !ok {
		if n, ok = integers(line, 3); ok {
			n = append(n, 0)
		}
	}
	if !ok {
		return faultf(number, "bond %d needs two atom numbers and a type, the line is %q", bond, shortened(line))
	}
	b, err := t.bond(number, n[0], n[1], n[2])
	if err != nil {
		return err
	}
	switch stereo := n[3]; {
	case stereo == 0:
	case b.kind == 1 && stereo == 1:
		b.direction = wedge
	case b.kind == 1 && stereo == 6:
		b.direction = hash
	case b.kind == 1 && stereo == 4, b.kind == 2 && stereo == 3:
		b.direction = either
	default:
		return faultf(number, "bond %d of type %d has the stereo mark %d; single bonds can have 0, 1, 4 or 6, double bonds 0 or 3",
			bond, b.kind, stereo)
	}
	t.bonds = append(t.bonds, b)
	return nil
}

// propertyBlock reads the lines up to M  END.
func (r *Reader) propertyBlock(t *table) error {
	superseded := map[string]bool{}
	for {
		line, err := r.source.next()
		if err == errRecordEnds {
			return faultf(r.source.number, "the record ends without M  END; the file was cut off or the counts are wrong")
		}
		if err != nil {
			return err
		}
		words := strings.Fields(line)
		switch {
		case len(words) == 0:
		case words[0] == "M" && len(words) > 1:
			if words[1] == "END" {
				return nil
			}
			if err := t.property(words[1], words[2:], r.source.number, superseded); err != nil {
				return err
			}
		case (words[0] == "A" || words[0] == "G") && len(words) > 1:
			t.note("atom labels (A and G lines) were left aside")
			if _, err := r.blockLine("atom label"); err != nil {
				return err
			}
		case words[0] == "V":
		case words[0] == "S" && len(words) == 3 && words[1] == "SKP":
			skip, err := strconv.Atoi(words[2])
			if err != nil {
				return faultf(r.source.number, "S  SKP needs a number of lines to skip")
			}
			for range skip {
				if _, err := r.blockLine("skipped lines"); err != nil {
					return err
				}
			}
		default:
			return faultf(r.source.number, "expected a property line or M  END, found %q; are the counts of atoms and bonds right?", shortened(line))
		}
	}
}

// property reads one M line. The first M  CHG or M  RAD clears the charges and radicals of the atom block, the first
// M  ISO its isotopes.
func (t *table) property(name string, words []string, line int, superseded map[string]bool) error {
	switch name {
	case "CHG", "RAD", "ISO":
	case "ALS", "APO", "RGP", "SUB", "UNS", "RBC", "LIN", "LOG":
		return faultf(line, "M  %s describes a query or an R group; give a definite molecule", name)
	case "STY":
		t.note("S-groups (brackets, polymers, attached data) were left aside; all atoms count as drawn")
		return nil
	default:
		return nil
	}
	if name == "ISO" && !superseded[name] {
		for i := range t.atoms {
			t.atoms[i].isotope = t.atoms[i].named
		}
	}
	if name != "ISO" && !superseded["CHG"] && !superseded["RAD"] {
		for i := range t.atoms {
			t.atoms[i].charge, t.atoms[i].radical = 0, 0
		}
	}
	superseded[name] = true
	numbers := make([]int, len(words))
	for i, w := range words {
		n, err := strconv.Atoi(w)
		if err != nil {
			return faultf(line, "M  %s has %q where a whole number belongs", name, w)
		}
		numbers[i] = n
	}
	if len(numbers) == 0 || len(numbers) != 1+2*numbers[0] {
		return faultf(line, "M  %s must give the number of entries and then an atom and a value for each", name)
	}
	for k := 1; k < len(numbers); k += 2 {
		atom, value := numbers[k], numbers[k+1]
		if atom < 1 || atom > len(t.atoms) {
			return faultf(line, "M  %s names atom %d, but there are %d atoms", name, atom, len(t.atoms))
		}
		if err := t.atoms[atom-1].set(name, value); err != "" {
			return faultf(line, "M  %s gives atom %d %s", name, atom, err)
		}
	}
	return nil
}
