package typing

import "slices"

// place is the position of an atom in its aromatic five-rings.
type place int

const (
	donorPlace place = iota + 1 // gives the lone pair
	alpha                       // next to the donor
	beta                        // two bonds from the donor
	unlabelled                  // delocalised cation or anion, or labels that disagree
)

// refineRings replaces the provisional symbols of aromatic atoms. Six-rings come first; a five-ring overrules them.
func (t *typer) refineRings() {
	provisional := slices.Clone(t.symbols)
	for atom, rings := range t.rings.ofAtom {
		if len(rings) == 0 {
			continue
		}
		var places []place
		anion := false
		for _, r := range rings {
			if ring := &t.rings.rings[r]; ring.donor >= 0 {
				ionic := t.isAnion(ring)
				anion = anion || ionic
				places = append(places, placeIn(ring, atom, ionic || t.isImidazolium(ring, provisional)))
			}
		}
		if len(places) == 0 {
			t.symbols[atom] = t.sixRingSymbol(atom, provisional[atom])
		} else {
			t.symbols[atom] = t.fiveRingSymbol(atom, provisional, merge(places), anion)
		}
	}
}

func (t *typer) sixRingSymbol(atom int, provisional string) string {
	switch {
	case t.element[atom] == 6:
		return "CB"
	case provisional == "N2OX":
		return "NPOX"
	case t.degree(atom) == 3:
		return "NPD+"
	}
	return "NPYD"
}

func (t *typer) fiveRingSymbol(atom int, provisional []string, at place, anion bool) string {
	old := provisional[atom]
	switch e := t.element[atom]; {
	case e == 8:
		return "OFUR"
	case e == 16:
		return "STHI"
	case e == 6 && isCationCarbon(old):
		return "CIM+"
	case e == 6:
		return [...]string{alpha: "C5A", beta: "C5B", unlabelled: "C5"}[at]
	case anion && t.degree(atom) == 2:
		return "N5M"
	case (old == "NCN+" || old == "NGD+") && t.sharesRingWithCation(atom, provisional):
		return "NIM+"
	case old == "N2OX":
		return [...]string{alpha: "N5AX", beta: "N5BX", unlabelled: "N5OX"}[at]
	case t.degree(atom) == 3 && t.valence(atom) == 4:
		return [...]string{alpha: "N5A+", beta: "N5B+", unlabelled: "N5+"}[at]
	}
	return [...]string{donorPlace: "NPYL", alpha: "N5A", beta: "N5B", unlabelled: "N5"}[at]
}

// sharesRingWithCation says whether an amidinium or guanidinium carbon next to the atom lies in an aromatic ring with it.
func (t *typer) sharesRingWithCation(atom int, provisional []string) bool {
	for _, n := range t.neighbors(atom) {
		if isCationCarbon(provisional[n.Atom]) && t.rings.bonds[n.Bond] {
			return true
		}
	}
	return false
}

// isAnion says whether the donor of a five-ring is N⁻.
func (t *typer) isAnion(ring *aromaticRing) bool {
	return t.element[ring.donor] == 7 && t.degree(ring.donor) == 2
}

// isImidazolium says whether a five-ring holds an amidinium or guanidinium carbon between two nitrogens that share its
// charge.
func (t *typer) isImidazolium(ring *aromaticRing, symbols []string) bool {
	shares := func(atom int) bool { return symbols[atom] == "NCN+" || symbols[atom] == "NGD+" }
	n := len(ring.atoms)
	for i, atom := range ring.atoms {
		if isCationCarbon(symbols[atom]) && shares(ring.atoms[(i+1)%n]) && shares(ring.atoms[(i+n-1)%n]) {
			return true
		}
	}
	return false
}

// placeIn returns the position of an atom relative to the donor of a five-ring.
func placeIn(ring *aromaticRing, atom int, ionic bool) place {
	if ionic {
		return unlabelled
	}
	steps := slices.Index(ring.atoms, atom) - slices.Index(ring.atoms, ring.donor)
	switch steps {
	case 0:
		return donorPlace
	case 1, -1, 4, -4:
		return alpha
	}
	return beta
}

// merge combines the positions of an atom in several five-rings.
func merge(places []place) place {
	merged := places[0]
	for _, p := range places {
		switch {
		case p == donorPlace:
			return donorPlace
		case p != merged:
			merged = unlabelled
		}
	}
	return merged
}
