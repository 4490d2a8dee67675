package smiles

import "slices"

// opening is the first half of a ring closure.
type opening struct {
	atom, place int // place in the neighbours of the atom
	mark        bondMark
	column      int
}

// closurePlace marks a neighbour that is still unknown; the ring number is subtracted.
const closurePlace = -1000

func (p *parser) ringClosure() error {
	start := p.pos
	if p.previous < 0 {
		return p.fault(start, "a ring closure must follow an atom")
	}
	number := int(p.input[p.pos] - '0')
	p.pos++
	if p.input[start] == '%' {
		if len(p.input)-p.pos < 2 || !isDigit(p.input[p.pos]) || !isDigit(p.input[p.pos+1]) {
			return p.fault(start, "%% must be followed by two digits")
		}
		number = 10*int(p.input[p.pos]-'0') + int(p.input[p.pos+1]-'0')
		p.pos += 2
	}
	first, open := p.openings[number]
	here := &p.written[p.previous]
	mark := p.bond
	p.bond = bondMark{}
	if !open {
		p.openings[number] = opening{p.previous, len(here.neighbors), mark, p.column(start)}
		here.neighbors = append(here.neighbors, closurePlace-number)
		return nil
	}
	delete(p.openings, number)
	if first.atom == p.previous {
		return p.fault(start, "ring closure %d joins an atom to itself", number)
	}
	if slices.Contains(here.neighbors, first.atom) {
		return p.fault(start, "ring closure %d joins two atoms that are bonded already", number)
	}
	here.neighbors = append(here.neighbors, first.atom)
	p.written[first.atom].neighbors[first.place] = p.previous
	joined, agree := joinMarks(first.mark, mark)
	if !agree {
		return p.fault(start, "ring closure %d has bond %q here and %q where it was opened (column %d)",
			number, mark.symbol, first.mark.symbol, first.column)
	}
	return p.addBond(first.atom, p.previous, joined)
}

// joinMarks combines the bond symbols at both ends of a ring closure into one seen from the first end.
func joinMarks(first, second bondMark) (bondMark, bool) {
	switch second.symbol {
	case '/':
		second.symbol = '\\'
	case '\\':
		second.symbol = '/'
	}
	switch {
	case first.symbol == 0:
		return second, true
	case second.symbol == 0 || first.symbol == second.symbol:
		return first, true
	case first.symbol == '-' && isDirection(second.symbol):
		return second, true
	case second.symbol == '-' && isDirection(first.symbol):
		return first, true
	}
	return first, false
}

func (p *parser) checkClosures() error {
	column, number := 0, -1
	for n, o := range p.openings {
		if number < 0 || o.column < column {
			column, number = o.column, n
		}
	}
	if number >= 0 {
		return p.faultColumn(column, "ring closure %d is never closed", number)
	}
	return nil
}

func isDigit(c byte) bool     { return c >= '0' && c <= '9' }
func isDirection(c byte) bool { return c == '/' || c == '\\' }
