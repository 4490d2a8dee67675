package molecule

import (
	"fmt"
	"slices"
	"strings"
)

// Formula returns the molecular formula in Hill order (Hill, J. Am. Chem. Soc. 22, 478 (1900)): carbon, hydrogen, then the
// other elements by symbol; without carbon all by symbol. A charge follows as +, -, +2 and so on. Isotopes are not told apart.
func (m *Molecule) Formula() string {
	count := map[string]int{}
	for _, a := range m.Atoms {
		count[a.Element.String()]++
	}
	symbols := make([]string, 0, len(count))
	for symbol := range count {
		symbols = append(symbols, symbol)
	}
	hill := func(symbol string) string {
		switch {
		case count["C"] == 0:
			return symbol
		case symbol == "C":
			return "\x00"
		case symbol == "H":
			return "\x01"
		}
		return symbol
	}
	slices.SortFunc(symbols, func(a, b string) int { return strings.Compare(hill(a), hill(b)) })
	var text strings.Builder
	for _, symbol := range symbols {
		text.WriteString(symbol)
		if n := count[symbol]; n > 1 {
			fmt.Fprint(&text, n)
		}
	}
	switch charge := m.Charge(); charge {
	case 0:
	case 1:
		text.WriteByte('+')
	case -1:
		text.WriteByte('-')
	default:
		fmt.Fprintf(&text, "%+d", charge)
	}
	return text.String()
}

// RotatableBonds returns the indices of the rotatable bonds: single bonds outside rings both ends of which have at least
// one other neighbour that is no hydrogen, and neither end of which is linear (two neighbours, a triple bond or two double
// bonds). Methyl and hydroxyl rotors are thus not counted; amide and biaryl bonds are. Definitions differ; this one is
// common practice without the exclusions that some add.
func (m *Molecule) RotatableBonds() []int {
	inRing := ringBonds(m.neighbors, len(m.Bonds))
	var bonds []int
	for i, b := range m.Bonds {
		if b.Order == 1 && !inRing[i] && m.turns(b.A, b.B) && m.turns(b.B, b.A) {
			bonds = append(bonds, i)
		}
	}
	return bonds
}

// turns tells whether atom i has, apart from other, a neighbour that moves when the bond between them turns.
func (m *Molecule) turns(i, other int) bool {
	heavy, unsaturation := false, 0
	for _, n := range m.neighbors[i] {
		unsaturation += m.Bonds[n.Bond].Order - 1
		heavy = heavy || n.Atom != other && m.Atoms[n.Atom].Element != 1
	}
	linear := len(m.neighbors[i]) == 2 && unsaturation >= 2
	return heavy && !linear
}
