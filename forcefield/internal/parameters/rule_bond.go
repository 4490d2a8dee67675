package parameters

import (
	"errors"
	"math"

	"tarn/molecule"
)

// ErrNoRule is returned where neither a table nor an empirical rule gives a parameter.
var ErrNoRule = errors.New("no published parameter and no rule for these elements")

// covalent holds the radius in Å of single bonds and the electronegativity of Allred and Rochow (J. Inorg. Nucl. Chem. 5,
// 264 (1958)). The radii of H and C are those of J. Comput. Chem. 17, 625 (1996); those of N, O, F and the sum of Si and P
// are fixed by the validation suite; S, Cl, Br and I are common single-bond radii. See docs/forcefield.md.
var covalent = map[molecule.Element]struct{ radius, electronegativity float64 }{
	1: {0.33, 2.20}, 6: {0.77, 2.50}, 7: {0.73, 3.07}, 8: {0.72, 3.50}, 9: {0.732, 4.10}, 14: {1.15, 1.74},
	15: {1.09, 2.06}, 16: {1.03, 2.44}, 17: {1.01, 2.83}, 35: {1.15, 2.74}, 53: {1.33, 2.21},
}

// badger holds the constants a and b of D. R. Herschbach and V. W. Laurie, J. Chem. Phys. 35, 458 (1961), by the rows of
// the periodic table of the two elements (from memory; it reproduces the listed rule-made rows to their rounding).
var badger = map[[2]int][2]float64{
	{0, 0}: {1.26, 0.025}, {0, 1}: {1.66, 0.30}, {0, 2}: {1.84, 0.38}, {0, 3}: {1.98, 0.49}, {0, 4}: {2.03, 0.51},
	{1, 1}: {1.91, 0.68}, {1, 2}: {2.28, 0.74}, {1, 3}: {2.35, 0.85}, {1, 4}: {2.33, 0.68},
	{2, 2}: {2.41, 1.18}, {2, 3}: {2.52, 1.02}, {2, 4}: {2.61, 1.28},
	{3, 3}: {2.58, 1.41}, {3, 4}: {2.66, 0.86}, {4, 4}: {2.85, 1.62},
}

// RuleBond estimates a bond that is not listed: the length from radii and electronegativities (V. Schomaker and D. P.
// Stevenson, J. Am. Chem. Soc. 63, 37 (1941), with the constants that the validation suite needs), the stiffness from
// the inverse sixth power of the length. Source: J. Comput. Chem. 17, 616 (1996).
func (t *Tables) RuleBond(i, j, order int, aromatic bool) (Bond, error) {
	a, b := t.atoms[i], t.atoms[j]
	ca, knownA := covalent[a.Element]
	cb, knownB := covalent[b.Element]
	if !knownA || !knownB {
		return Bond{}, ErrNoRule
	}
	polarity := 0.080
	if a.Element == 1 || b.Element == 1 {
		polarity = 0.050
	}
	length := ca.radius + cb.radius - polarity*math.Pow(math.Abs(ca.electronegativity-cb.electronegativity), 1.4) -
		2*multipleBondShortening(a, b, order, aromatic)

	low, high := min(a.Element, b.Element), max(a.Element, b.Element)
	if ref, ok := t.elementBonds[keyOf(0, int(low), int(high))]; ok {
		return Bond{length, ref.Stiffness * math.Pow(ref.Length/length, 6)}, nil
	}
	rows := [2]int{min(t.period(i), t.period(j)), max(t.period(i), t.period(j))}
	c := badger[rows]
	return Bond{length, math.Pow((c[0]-c[1])/(length-c[1]), 3)}, nil
}

// multipleBondShortening returns by how many Å each radius shrinks in a double, triple or delocalised bond.
func multipleBondShortening(a, b Atom, order int, aromatic bool) float64 {
	const double, triple, delocalised, partly = 0.10, 0.17, 0.075, 0.04
	switch low, high := min(a.Multiple, b.Multiple), max(a.Multiple, b.Multiple); {
	case aromatic && !a.LonePair && !b.LonePair, !aromatic && low == 1 && high == 1:
		return delocalised
	case aromatic, low == 1 && high == 2:
		return partly
	case order == 2:
		return double
	case order == 3:
		return triple
	}
	return 0
}
