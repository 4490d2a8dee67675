package smiles

import (
	"unicode/utf8"

	"tarn/molecule"
)

// chirality is the mark of a bracket atom.
type chirality struct {
	written   bool
	allene    bool // @AL
	clockwise bool
}

// maxCharge is the highest charge that OpenSMILES asks a reader to take (3.1.4).
const maxCharge = 15

// organicAtom reads an atom outside brackets: its hydrogens fill its valence.
func (p *parser) organicAtom() error {
	start := p.pos
	rest := p.input[p.pos:]
	width := 1
	if len(rest) > 1 && (rest[:2] == "Cl" || rest[:2] == "Br") {
		width = 2
	}
	a := molecule.DraftAtom{Hydrogens: molecule.FillValence}
	switch symbol := rest[:width]; symbol {
	case "B", "C", "N", "O", "P", "S", "F", "Cl", "Br", "I":
		a.Element = molecule.ElementBySymbol(symbol)
	case "b", "c", "n", "o", "p", "s":
		a.Element = molecule.ElementBySymbol(string(symbol[0] - 'a' + 'A'))
		a.Aromatic = true
	case "*":
		return p.fault(start, "the wildcard atom * is no element")
	case " ", "\t", "\n", "\r":
		return p.fault(start, "a SMILES contains no white space; a name after it must be given separately")
	default:
		r, _ := utf8.DecodeRuneInString(rest)
		if r >= 'A' && r <= 'Z' {
			return p.fault(start, "%q stands for no atom outside square brackets", r)
		}
		return p.fault(start, "%q has no meaning here", r)
	}
	p.pos += width
	return p.addAtom(start, a, chirality{})
}

// bracketAtom reads [isotope symbol chirality hydrogens charge class].
func (p *parser) bracketAtom() error {
	start := p.pos
	p.pos++
	var a molecule.DraftAtom
	var ok bool
	if a.Isotope, ok = p.number(3); !ok {
		return p.fault(p.pos, "an isotope has at most three digits")
	}
	a.Isotope = max(0, a.Isotope)
	if err := p.symbol(&a); err != nil {
		return err
	}
	mark, err := p.chirality()
	if err != nil {
		return err
	}
	if p.accept('H') {
		if a.Element == 1 {
			return p.fault(p.pos-1, "a hydrogen atom carries no hydrogens; molecular hydrogen is [H][H]")
		}
		if a.Hydrogens, ok = p.number(1); !ok {
			return p.fault(p.pos, "at most 9 hydrogens can be stated")
		}
		if a.Hydrogens < 0 {
			a.Hydrogens = 1
		}
	}
	if err := p.charge(&a); err != nil {
		return err
	}
	if p.accept(':') {
		a.Class, ok = p.number(4)
		if !ok || a.Class < 0 {
			return p.fault(p.pos, "an atom class is a number of at most four digits")
		}
	}
	if !p.accept(']') {
		if p.pos == len(p.input) {
			return p.fault(start, "the bracket is not closed")
		}
		r, _ := utf8.DecodeRuneInString(p.input[p.pos:])
		return p.fault(p.pos, "%q has no meaning at this place in a bracket (isotope, symbol, chirality, hydrogens, charge, class)", r)
	}
	return p.addAtom(start, a, mark)
}

func (p *parser) symbol(a *molecule.DraftAtom) error {
	rest := p.input[p.pos:]
	if len(rest) >= 2 {
		if e := molecule.ElementBySymbol(rest[:2]); e != 0 {
			a.Element = e
			p.pos += 2
			return nil
		}
		if rest[:2] == "se" || rest[:2] == "as" {
			a.Element = molecule.ElementBySymbol(string(rest[0]-'a'+'A') + rest[1:2])
			a.Aromatic = true
			p.pos += 2
			return nil
		}
	}
	if len(rest) >= 1 {
		if e := molecule.ElementBySymbol(rest[:1]); e != 0 {
			a.Element = e
			p.pos++
			return nil
		}
		switch rest[0] {
		case 'b', 'c', 'n', 'o', 'p', 's':
			a.Element = molecule.ElementBySymbol(string(rest[0] - 'a' + 'A'))
			a.Aromatic = true
			p.pos++
			return nil
		case '*':
			return p.fault(p.pos, "the wildcard atom * is no element")
		}
	}
	return p.fault(p.pos, "the bracket names no element")
}

func (p *parser) chirality() (chirality, error) {
	start := p.pos
	if !p.accept('@') {
		return chirality{}, nil
	}
	if p.accept('@') {
		return chirality{written: true, clockwise: true}, nil
	}
	if len(p.input)-p.pos < 2 {
		return chirality{written: true}, nil
	}
	class := p.input[p.pos : p.pos+2]
	switch class {
	case "TH", "AL":
		p.pos += 2
		number, ok := p.number(1)
		if !ok || number != 1 && number != 2 {
			return chirality{}, p.fault(start, "@%s must be followed by 1 or 2", class)
		}
		return chirality{written: true, allene: class == "AL", clockwise: number == 2}, nil
	case "SP", "TB", "OH":
		geometry := map[string]string{"SP": "square planar", "TB": "trigonal bipyramidal", "OH": "octahedral"}[class]
		return chirality{}, p.fault(start, "%s centres (@%s) are not supported, only tetrahedral and allene centres", geometry, class)
	}
	return chirality{written: true}, nil
}

func (p *parser) charge(a *molecule.DraftAtom) error {
	start := p.pos
	if p.pos == len(p.input) {
		return nil
	}
	sign := p.input[p.pos]
	if sign != '+' && sign != '-' {
		return nil
	}
	size := 0
	for p.accept(sign) {
		size++
	}
	if size == 1 {
		number, ok := p.number(2)
		if !ok || number > maxCharge {
			return p.fault(start, "a charge is at most %d", maxCharge)
		}
		if number >= 0 {
			size = number
		}
	}
	if size > maxCharge {
		return p.fault(start, "a charge is at most %d", maxCharge)
	}
	a.Charge = size
	if sign == '-' {
		a.Charge = -size
	}
	return nil
}

func (p *parser) accept(c byte) bool {
	if p.pos < len(p.input) && p.input[p.pos] == c {
		p.pos++
		return true
	}
	return false
}

// number reads up to digits decimal digits; -1 if there is none, not ok if there are more.
func (p *parser) number(digits int) (value int, ok bool) {
	start := p.pos
	for p.pos < len(p.input) && p.input[p.pos] >= '0' && p.input[p.pos] <= '9' {
		if p.pos-start == digits {
			return 0, false
		}
		value = 10*value + int(p.input[p.pos]-'0')
		p.pos++
	}
	if p.pos == start {
		return -1, true
	}
	return value, true
}
