package parameters

import (
	"math"

	"tarn/molecule"
)

// twisting holds, by element of a middle atom, U of double-bond barriers, V of threefold barriers and W of the twofold
// barrier between O and S. The V of S is printed as 0.49, but the listed rule-made rows and the validation suite need 0.48.
var twisting = map[molecule.Element]struct{ u, v, w float64 }{
	6: {2.0, 2.12, 0}, 7: {2.0, 1.5, 0}, 8: {2.0, 0.2, 2.0}, 14: {1.25, 1.22, 0}, 15: {1.25, 2.40, 0}, 16: {1.25, 0.48, 8.0},
}

// RuleTorsion estimates the barriers about the bond j–k from the properties of its two atoms.
// Source: J. Comput. Chem. 17, 616 (1996), equations 21 and 22 and rules a to h.
func (t *Tables) RuleTorsion(j, k, order int, aromatic bool) (Torsion, error) {
	a, b := t.atoms[j], t.atoms[k]
	if a.Linear || b.Linear { // rule a
		return Torsion{}, nil
	}
	ta, knownA := twisting[a.Element]
	tb, knownB := twisting[b.Element]
	if !knownA || !knownB {
		return Torsion{}, ErrNoRule
	}
	twofold := func(strength, conjugation float64) (Torsion, error) {
		return Torsion{V2: strength * conjugation * math.Sqrt(ta.u*tb.u)}, nil
	}
	threefold := Torsion{V3: math.Sqrt(ta.v*tb.v) / float64((a.Bonds-1)*(b.Bonds-1))}
	switch {
	case aromatic: // rule b
		strength, conjugation := 6.0, 0.3
		if mixedValence(a, b) {
			strength = 3
		}
		if !a.LonePair && !b.LonePair {
			conjugation = 0.5
		}
		return twofold(strength, conjugation)
	case order == 2: // rule c
		if a.Multiple == 2 && b.Multiple == 2 {
			return twofold(6, 1)
		}
		return twofold(6, 0.4)
	case a.Bonds == 4 && b.Bonds == 4: // rule d
		return threefold, nil
	case a.Bonds == 4 && flat(b), b.Bonds == 4 && flat(a): // rules e and f
		return Torsion{}, nil
	case a.Bonds == 4 || b.Bonds == 4:
		return threefold, nil
	}
	if conjugation, ok := conjugation(a, b, order); ok { // rule g
		return twofold(6, conjugation)
	}
	if ta.w > 0 && tb.w > 0 { // rule h
		return Torsion{V2: -math.Sqrt(ta.w * tb.w)}, nil
	}
	return threefold, nil
}

// mixedValence says whether one atom is three-valent and the other four-valent.
func mixedValence(a, b Atom) bool {
	return min(a.MaxValence, b.MaxValence) == 3 && max(a.MaxValence, b.MaxValence) == 4
}

// flat says that rotation about the bond from a saturated atom to an atom like a has no barrier of its own.
func flat(a Atom) bool {
	switch a.Bonds {
	case 3:
		return a.MaxValence == 4 || a.Multiple != 0
	case 2:
		return a.MaxValence == 3 || a.Multiple != 0
	}
	return false
}

// conjugation returns the π-bond order of a bond between atoms that conjugate, and whether they do.
func conjugation(a, b Atom, order int) (float64, bool) {
	if !(order == 1 && a.Multiple != 0 && b.Multiple != 0 || a.Multiple != 0 && b.LonePair || a.LonePair && b.Multiple != 0) {
		return 0, false
	}
	if a.LonePair && b.LonePair {
		return 0, true
	}
	if b.LonePair {
		a, b = b, a
	}
	switch {
	case a.LonePair && a.Multiple == 1:
		return 0.5, true
	case a.LonePair && b.Multiple != 0:
		if firstRow(a) && firstRow(b) {
			return 0.3, true
		}
		return 0.15, true
	case (a.Multiple == 1 || b.Multiple == 1) && !(a.Element == 6 && b.Element == 6):
		return 0.4, true
	}
	return 0.15, true
}

func firstRow(a Atom) bool { return a.Element >= 3 && a.Element <= 10 }
