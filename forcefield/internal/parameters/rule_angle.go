package parameters

import (
	"math"

	"tarn/molecule"
)

// bending holds Z (outer atoms) and C (middle atom) of the rule for angle stiffness; 0 where none is published.
var bending = map[molecule.Element]struct{ outer, middle float64 }{
	1: {1.395, 0}, 6: {2.494, 1.016}, 7: {2.711, 1.113}, 8: {3.045, 1.337}, 9: {2.847, 0}, 14: {2.350, 0.811},
	15: {2.350, 1.068}, 16: {2.980, 1.249}, 17: {2.909, 1.078}, 35: {3.017, 0}, 53: {3.086, 0},
}

// RuleReferenceAngle estimates the reference angle in degrees at a middle atom of type j where no table lists one.
// Source: J. Comput. Chem. 17, 616 (1996).
func (t *Tables) RuleReferenceAngle(angleClass, j int) float64 {
	switch angleClass {
	case 3, 5, 6:
		return 60
	case 4, 7, 8:
		return 90
	}
	a := t.atoms[j]
	switch {
	case a.Bonds == 4:
		return 109.45
	case a.Bonds == 2 && a.Linear:
		return 180
	case a.Bonds == 2 && a.Element == 8:
		return 105
	case a.Bonds == 2 && a.Element > 10:
		return 95
	case a.Bonds == 3 && a.MaxValence == 3 && a.Multiple == 0 && a.Element == 7:
		return 107
	case a.Bonds == 3 && a.MaxValence == 3 && a.Multiple == 0:
		return 92
	}
	return 120
}

// RuleAngleStiffness estimates the force constant in md·Å/rad² of the angle i–j–k with the given reference angle and
// reference lengths of its bonds. Source: J. Comput. Chem. 17, 616 (1996), after the rule of T. A. Halgren, J. Am.
// Chem. Soc. 112, 4710 (1990).
func (t *Tables) RuleAngleStiffness(angleClass, i, j, k int, degrees, first, second float64) (float64, error) {
	zi, cj, zk := bending[t.atoms[i].Element].outer, bending[t.atoms[j].Element].middle, bending[t.atoms[k].Element].outer
	if zi == 0 || cj == 0 || zk == 0 {
		return 0, ErrNoRule
	}
	strength := 1.75
	switch angleClass {
	case 3, 5, 6:
		strength *= 0.05
	case 4, 7, 8:
		strength *= 0.85
	}
	theta := degrees * math.Pi / 180
	sum, difference := first+second, first-second
	return strength * zi * cj * zk / (sum * theta * theta) * math.Exp(-2*difference*difference/(sum*sum)), nil
}
