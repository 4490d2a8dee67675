package embed

import "tarn/molecule"

// bondi holds van der Waals radii in Å. Source: A. Bondi, J. Phys. Chem. 68, 441 (1964), table I (H: 1.20).
var bondi = map[molecule.Element]float64{
	1: 1.20, 2: 1.40, 6: 1.70, 7: 1.55, 8: 1.52, 9: 1.47, 10: 1.54, 14: 2.10, 15: 1.80, 16: 1.80, 17: 1.75, 18: 1.88,
	33: 1.85, 34: 1.90, 35: 1.85, 36: 2.02, 52: 2.06, 53: 1.98, 54: 2.16,
}

// vanDerWaalsRadius returns Bondi's radius in Å, and 2 Å for elements that he does not list.
func vanDerWaalsRadius(e molecule.Element) float64 {
	if r, ok := bondi[e]; ok {
		return r
	}
	return 2
}
