package smiles

import (
	"slices"
	"strconv"
	"strings"

	"tarn/molecule"
)

// atomText returns the symbol of an atom, in brackets where OpenSMILES needs them.
func (w *writer) atomText(i int) string {
	a := w.m.Atoms[i]
	symbol := a.Element.String()
	if w.aromaticAtoms[i] {
		symbol = strings.ToLower(symbol)
	}
	mark := w.chiralMark(i)
	if mark == "" && a.Isotope == 0 && a.Charge == 0 && a.Class == 0 && w.impliesHydrogens(i) {
		return symbol
	}
	text := "["
	if a.Isotope != 0 {
		text += strconv.Itoa(a.Isotope)
	}
	text += symbol + mark
	switch h := w.hydrogens[i]; {
	case h > 1:
		text += "H" + strconv.Itoa(h)
	case h == 1:
		text += "H"
	}
	switch {
	case a.Charge == 1:
		text += "+"
	case a.Charge == -1:
		text += "-"
	case a.Charge > 1:
		text += "+" + strconv.Itoa(a.Charge)
	case a.Charge < -1:
		text += strconv.Itoa(a.Charge)
	}
	if a.Class != 0 {
		text += ":" + strconv.Itoa(a.Class)
	}
	return text + "]"
}

// impliesHydrogens tells whether the bare symbol of an atom stands for the hydrogens that it has (OpenSMILES 3.1.5).
func (w *writer) impliesHydrogens(i int) bool {
	a := w.m.Atoms[i]
	switch a.Element.String() {
	case "B", "C", "N", "O", "P", "S", "F", "Cl", "Br", "I":
	default:
		return false
	}
	sum := 0
	for _, n := range w.m.Neighbors(i) {
		switch {
		case w.folded[n.Atom]:
		case w.aromaticBonds[n.Bond]:
			sum++
		default:
			sum += w.m.Bonds[n.Bond].Order
		}
	}
	if w.aromaticAtoms[i] {
		if a.Element.String() != "C" && w.hydrogens[i] > 0 {
			return false // [nH]
		}
		if w.doubleInRing(i) {
			sum++
		}
	}
	return w.hydrogens[i] == molecule.ImpliedHydrogens(a.Element, sum)
}

// doubleInRing tells whether an aromatic atom has one of the double bonds of the Kekulé structure.
func (w *writer) doubleInRing(i int) bool {
	return slices.ContainsFunc(w.m.Neighbors(i), func(n molecule.Neighbor) bool {
		return w.aromaticBonds[n.Bond] && w.m.Bonds[n.Bond].Order == 2
	})
}

// chiralMark returns "@", "@@" or "".
func (w *writer) chiralMark(i int) string {
	c, ok := w.centers[i]
	if !ok {
		return ""
	}
	around := w.neighborsInText(i)
	if len(w.m.Neighbors(i)) == 2 { // an allene is described by the substituents of its ends
		around = w.alleneNeighborsInText(i, around)
	} else if slices.Contains(c.Neighbors[:], molecule.LonePair) {
		place := 0
		if w.parents[i] >= 0 {
			place = 1
		}
		place += w.hydrogens[i]
		around = slices.Insert(around, place, molecule.LonePair)
	}
	clockwise := c.Clockwise
	for k, n := range around {
		for _, before := range around[:k] {
			if slices.Index(c.Neighbors[:], before) > slices.Index(c.Neighbors[:], n) {
				clockwise = !clockwise
			}
		}
	}
	if clockwise {
		return "@@"
	}
	return "@"
}

// neighborsInText returns the neighbours of an atom in the order in which a reader meets them: the atom before, implied
// hydrogens, ring closures, branches.
func (w *writer) neighborsInText(i int) []int {
	var around []int
	if w.parents[i] >= 0 {
		around = append(around, w.parents[i])
	}
	for _, n := range w.m.Neighbors(i) {
		if w.folded[n.Atom] {
			around = append(around, n.Atom)
		}
	}
	around = append(around, w.closures[i]...)
	return append(around, w.children[i]...)
}

func (w *writer) alleneNeighborsInText(middle int, axis []int) []int {
	var around []int
	for _, next := range axis {
		before, end := middle, next
		for len(w.m.Neighbors(end)) == 2 && w.m.Bonds[w.m.BondBetween(before, end)].Order == 2 && w.cumulated(end) {
			onward := w.m.Neighbors(end)[0].Atom
			if onward == before {
				onward = w.m.Neighbors(end)[1].Atom
			}
			before, end = end, onward
		}
		for _, n := range w.neighborsInText(end) {
			if n != before {
				around = append(around, n)
			}
		}
	}
	return around
}

func (w *writer) cumulated(i int) bool {
	around := w.m.Neighbors(i)
	return len(around) == 2 && w.m.Bonds[around[0].Bond].Order == 2 && w.m.Bonds[around[1].Bond].Order == 2
}
