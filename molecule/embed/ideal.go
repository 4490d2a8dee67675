package embed

import "math"

// ideal is the Field used when there is no force field: covalent radii shortened by bond order, and the angles of linear,
// trigonal and tetrahedral atoms. The factors are those of carbon: 1.34, 1.20 and 1.40 Å over 1.54 Å (common handbook values).
type ideal struct{ *graph }

func (f ideal) ReferenceBond(i, j int) float64 {
	b := f.BondBetween(i, j)
	single := f.Atoms[i].Element.CovalentRadius() + f.Atoms[j].Element.CovalentRadius()
	switch order := f.Bonds[b].Order; {
	case f.aromaticBond[b]:
		return 0.91 * single
	case order == 2:
		return 0.87 * single
	case order >= 3:
		return 0.78 * single
	}
	return single
}

func (f ideal) ReferenceAngle(i, j, k int) float64 {
	neighbors := f.Neighbors(j)
	switch {
	case f.linear[j]:
		return math.Pi
	case f.planar[j] || (f.flatEnd(j) && f.unsaturated(j)):
		return 120 * degree
	case len(neighbors) == 2 && f.Atoms[j].Element >= sulfur:
		return 98 * degree
	}
	return 109.5 * degree
}

func (f ideal) unsaturated(j int) bool {
	for _, n := range f.Neighbors(j) {
		if f.Bonds[n.Bond].Order >= 2 || f.aromaticBond[n.Bond] {
			return true
		}
	}
	return false
}
