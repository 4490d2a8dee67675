package xyz

import (
	"cmp"
	"fmt"
	"slices"

	"tarn/molecule"
)

// tolerance is how much longer than the sum of two covalent radii a bond may be, Å. Common practice, no source: 0.4 to 0.45
// keeps stretched bonds and stays below the shortest contacts between atoms that are not bonded.
const tolerance = 0.4

// tooClose is the distance below which two atoms cannot both be there, Å; the shortest bond, H–H, has 0.74 Å.
const tooClose = 0.5

// contact is a bond found from a distance.
type contact struct {
	a, b     int
	distance float64
	excess   float64 // distance less the sum of the radii, Å
}

// contacts finds the bonds of a geometry. Metals are bare ions; an atom with more bonds than it can have loses the longest.
func contacts(elements []molecule.Element, g molecule.Geometry) ([]contact, error) {
	byX := make([]int, len(elements))
	widest := 0.0
	for i, e := range elements {
		byX[i] = i
		widest = max(widest, e.CovalentRadius())
	}
	slices.SortFunc(byX, func(i, j int) int { return cmp.Or(cmp.Compare(g[3*i], g[3*j]), i-j) })
	var found []contact
	for k, i := range byX {
		reach := elements[i].CovalentRadius() + widest + tolerance
		for _, j := range byX[k+1:] {
			if g[3*j]-g[3*i] > reach {
				break
			}
			d := g.Distance(i, j)
			if d < tooClose {
				return nil, &PerceptionError{Atoms: []int{min(i, j), max(i, j)}, Reason: fmt.Sprintf(
					"atoms %d (%s) and %d (%s) are only %.2f Å apart; are the coordinates in ångström?",
					min(i, j)+1, elements[min(i, j)], max(i, j)+1, elements[max(i, j)], d)}
			}
			if isMetal(elements[i]) || isMetal(elements[j]) {
				continue
			}
			excess := d - elements[i].CovalentRadius() - elements[j].CovalentRadius()
			if excess <= tolerance {
				found = append(found, contact{min(i, j), max(i, j), d, excess})
			}
		}
	}
	slices.SortFunc(found, func(p, q contact) int { return cmp.Or(cmp.Compare(p.excess, q.excess), p.a-q.a, p.b-q.b) })
	bonded := make([]int, len(elements))
	kept := found[:0]
	for _, c := range found {
		if bonded[c.a] < mostBonds(elements[c.a], elements[c.b]) && bonded[c.b] < mostBonds(elements[c.b], elements[c.a]) {
			bonded[c.a]++
			bonded[c.b]++
			kept = append(kept, c)
		}
	}
	slices.SortFunc(kept, func(p, q contact) int { return cmp.Or(p.a-q.a, p.b-q.b) })
	return kept, nil
}

// mostBonds returns how many neighbours an element can have when one more of them is to be other.
func mostBonds(e, other molecule.Element) int {
	switch e {
	case 1, 9:
		return 1
	case 8:
		return 3
	case 5, 6, 7:
		return 4
	case 17, 35, 53:
		if other == 1 {
			return 1
		}
		return 6
	case 13, 14, 15, 16, 31, 32, 33, 34, 50, 51, 52:
		return 6
	case 36, 54:
		return 6
	}
	return 0
}

// isMetal tells whether an element is read as a bare ion: all metals but Al, Ga, Ge, Sn, Sb, which form molecules.
func isMetal(e molecule.Element) bool {
	switch {
	case e == 3 || e == 4 || e == 11 || e == 12:
		return true
	case e >= 19 && e <= 30, e >= 37 && e <= 49, e >= 55 && e <= 84, e >= 87:
		return true
	}
	return false
}
