package ctfile

import (
	"fmt"

	"tarn/molecule"
)

// alleneEnds returns the end atoms of the allene in whose middle a centre lies, the bearer of Neighbors[0] and [1] first.
func (v *view) alleneEnds(c molecule.Center) (ends [2]int, ok bool) {
	around := v.m.Neighbors(c.Atom)
	if len(around) != 2 {
		return ends, false
	}
	for k, n := range around {
		before, at := c.Atom, n.Atom
		for onward := v.m.Neighbors(at); len(onward) == 2 && v.m.Bonds[onward[0].Bond].Order == 2 && v.m.Bonds[onward[1].Bond].Order == 2; onward = v.m.Neighbors(at) {
			next := onward[0].Atom
			if next == before {
				next = onward[1].Atom
			}
			if before, at = at, next; at == c.Atom {
				return ends, false
			}
		}
		ends[k] = at
	}
	for _, n := range c.Neighbors[:2] {
		if n >= 0 && v.m.BondBetween(ends[1], n) >= 0 {
			ends[0], ends[1] = ends[1], ends[0]
			break
		}
	}
	return ends, v.placed(ends[0]) && v.placed(ends[1])
}

// allene reads an allene, a tetrahedron stretched along its axis.
func (v *view) allene(c molecule.Center, ends [2]int) {
	if v.layout == flat && (v.undecided(ends[0]) || v.undecided(ends[1])) {
		return
	}
	axis := unit(minus(v.atoms[ends[1]].position, v.atoms[ends[0]].position))
	var points [4][3]float64
	marked := false
	for k, n := range c.Neighbors {
		end, partner := ends[k/2], c.Neighbors[k^1]
		switch {
		case v.placed(n):
			points[k] = v.arrow(end, n)
			marked = marked || v.mark(end, n) != 0
		case v.placed(partner):
			// The unseen neighbour is its partner after half a turn about the axis.
			w := v.arrow(end, partner)
			points[k] = minus(times(2*dot(w, axis), axis), w)
		default:
			return
		}
		points[k] = plus(points[k], times(float64(2*(k/2)-1), axis))
	}
	if v.layout == flat && !marked {
		return
	}
	v.decide(c, points)
}

// doubleBond reads cis or trans from the sides of the axis on which the neighbours lie.
func (v *view) doubleBond(d molecule.DoubleBond) {
	if !v.placed(d.A) || !v.placed(d.B) || v.layout == flat && v.wavy(d) {
		return
	}
	refA, flipA, okA := v.reference(d.A, d.RefA)
	refB, flipB, okB := v.reference(d.B, d.RefB)
	if !okA || !okB {
		return
	}
	axis := unit(minus(v.atoms[d.B].position, v.atoms[d.A].position))
	across := func(end, ref int) [3]float64 {
		w := unit(minus(v.atoms[ref].position, v.atoms[end].position))
		return minus(w, times(dot(w, axis), axis))
	}
	a, b := across(d.A, refA), across(d.B, refB)
	if norm(a) < 0.1 || norm(b) < 0.1 {
		v.note(fmt.Sprintf("the bonds at the double bond of atoms %d and %d lie on a line; cis or trans is left unspecified", d.A+1, d.B+1))
		return
	}
	d.Cis = (dot(a, b) > 0) == (flipA == flipB)
	v.doubles = append(v.doubles, d)
}

// reference returns a neighbour with a position to stand for ref; flipped says that it is the other one at this end.
func (v *view) reference(end, ref int) (atom int, flipped, ok bool) {
	if v.placed(ref) {
		return ref, false, true
	}
	for _, n := range v.m.Neighbors(end) {
		if v.m.Bonds[n.Bond].Order == 1 && v.placed(n.Atom) {
			return n.Atom, true, true
		}
	}
	return 0, false, false
}

// wavy tells whether the drawing leaves a double bond open: a crossed bond, or a wavy bond at one of its ends.
func (v *view) wavy(d molecule.DoubleBond) bool {
	for _, b := range v.bonds {
		if b.direction != either {
			continue
		}
		if b.kind == 1 && (b.a == d.A || b.b == d.A || b.a == d.B || b.b == d.B) ||
			b.kind == 2 && (b.a == d.A || b.b == d.A) && v.onAxis(b, d) {
			return true
		}
	}
	return false
}

// onAxis tells whether a double bond is that of d or one of its cumulene: both lie between its ends.
func (v *view) onAxis(b tableBond, d molecule.DoubleBond) bool {
	return b.a == d.A && b.b == d.B || b.a == d.B && b.b == d.A || v.m.BondBetween(d.A, d.B) < 0
}
