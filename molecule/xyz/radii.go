package xyz

import "tarn/molecule"

// bondRadii are additive covalent radii for single, double and triple bonds, Å; two of them give the usual length of a bond.
// Source: Pyykkö and Atsumi, Chem. Eur. J. 15, 12770 (2009), table 2.
var bondRadii = map[molecule.Element][3]float64{
	5:  {0.85, 0.78, 0.73},
	6:  {0.75, 0.67, 0.60},
	7:  {0.71, 0.60, 0.54},
	8:  {0.63, 0.57, 0.53},
	9:  {0.64, 0.59, 0.53},
	13: {1.26, 1.13, 1.11},
	14: {1.16, 1.07, 1.02},
	15: {1.11, 1.02, 0.94},
	16: {1.03, 0.94, 0.95},
	17: {0.99, 0.95, 0.93},
	31: {1.24, 1.17, 1.21},
	32: {1.21, 1.11, 1.14},
	33: {1.21, 1.14, 1.06},
	34: {1.16, 1.07, 1.07},
	35: {1.14, 1.09, 1.10},
	50: {1.40, 1.30, 1.32},
	51: {1.40, 1.33, 1.27},
	52: {1.36, 1.28, 1.21},
	53: {1.33, 1.29, 1.25},
}

// usualLength returns the length of a bond with 0, 1 or 2 bonds beyond the first, Å.
func usualLength(a, b molecule.Element, extra int) (float64, bool) {
	p, okA := bondRadii[a]
	q, okB := bondRadii[b]
	return p[extra] + q[extra], okA && okB
}
