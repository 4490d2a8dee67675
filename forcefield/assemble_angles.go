package forcefield

import (
	"fmt"
	"math"

	"tarn/forcefield/internal/parameters"
)

// ringOfAngle says in which small ring the atoms of an angle lie.
type ringOfAngle int

const (
	noSmallRing ringOfAngle = iota
	threeRing
	fourRing
)

func (a *assembly) ringOfAngle(i, j, k int) ringOfAngle {
	if a.molecule.BondBetween(i, k) >= 0 {
		return threeRing
	}
	if a.shareNeighbor(i, k, j, j) {
		return fourRing
	}
	return noSmallRing
}

// shareNeighbor says whether i and k are both bonded to an atom other than the two that are left out.
func (a *assembly) shareNeighbor(i, k, out1, out2 int) bool {
	for _, n := range a.molecule.Neighbors(i) {
		if n.Atom != out1 && n.Atom != out2 && a.molecule.BondBetween(n.Atom, k) >= 0 {
			return true
		}
	}
	return false
}

// angleClasses numbers the angles by small ring and by how many of the two bonds are of class 1.
var angleClasses = [...][3]int{noSmallRing: {0, 1, 2}, threeRing: {3, 5, 6}, fourRing: {4, 7, 8}}

func (a *assembly) addAngles() error {
	for j := range a.molecule.Atoms {
		around := a.molecule.Neighbors(j)
		for n, first := range around {
			for _, second := range around[n+1:] {
				if err := a.addAngle(first.Atom, j, second.Atom, first.Bond, second.Bond); err != nil {
					return err
				}
			}
		}
	}
	return nil
}

func (a *assembly) addAngle(i, j, k, ij, jk int) error {
	ti, tj, tk := a.types[i], a.types[j], a.types[k]
	class := angleClasses[a.ringOfAngle(i, j, k)][a.classes[ij]+a.classes[jk]]
	p, err := a.angleParameters(class, i, j, k, ij, jk)
	if err != nil {
		return err
	}
	if a.tables.Atom(tj).Linear {
		a.linearAngles = append(a.linearAngles, linearAngle{offset(i), offset(j), offset(k), millidyne * p.Stiffness})
		a.refer(i, j, k, math.Pi)
		return nil
	}
	coupling, ok := a.tables.StretchBend(class, ti, tj, tk, a.classes[ij], a.classes[jk])
	if !ok {
		return a.missing("stretch-bend", parameters.ErrNoRule, i, j, k)
	}
	a.refer(i, j, k, radians(p.Degrees))
	term := angle{
		i: offset(i), j: offset(j), k: offset(k), stiffness: millidyne * p.Stiffness,
		first: millidyne * coupling.First, second: millidyne * coupling.Second,
		firstLength: a.lengths[ij], secondLength: a.lengths[jk],
	}
	a.angles = append(a.angles, term.withReference(radians(p.Degrees)))
	return nil
}

// angleParameters looks an angle up, or takes its reference, its stiffness or both from the empirical rules.
func (a *assembly) angleParameters(class, i, j, k, ij, jk int) (parameters.Angle, error) {
	p, listed := a.tables.Angle(class, a.types[i], a.types[j], a.types[k])
	if listed && p.Stiffness != 0 {
		return p, nil
	}
	source := "listed"
	if !listed {
		p.Degrees, source = a.tables.RuleReferenceAngle(class, a.types[j]), "from the rule"
	}
	var err error
	p.Stiffness, err = a.tables.RuleAngleStiffness(class, a.types[i], a.types[j], a.types[k], p.Degrees, a.lengths[ij], a.lengths[jk])
	if err != nil {
		return p, a.missing("angle", err, i, j, k)
	}
	a.report("angle", fmt.Sprintf("reference %.1f° (%s), stiffness %.3f md·Å/rad²", p.Degrees, source, p.Stiffness), i, j, k)
	return p, nil
}

// refer keeps the reference angle in radians under both directions of the angle.
func (a *assembly) refer(i, j, k int, angle float64) {
	a.angleReference[[3]int{min(i, k), j, max(i, k)}] = angle
}
