package embed

import "math"

const degree = math.Pi / 180

// angleRange returns the angles in radians that i–j–k may take. slack widens the range; 1 is the usual width. The widths are
// common practice for ring systems (no source); they need to hold the true geometry, the quench finds it.
func (g *graph) angleRange(ref Field, i, j, k int, slack float64) (low, high float64) {
	ring := g.ringThrough(i, j, k)
	if g.linear[j] {
		if ring == 0 {
			return 178 * degree, math.Pi
		}
		return (180 - 12*slack - 120/float64(ring)) * degree, math.Pi
	}
	if len(g.Neighbors(j)) > 4 {
		return 70 * degree, math.Pi
	}
	theta := ref.ReferenceAngle(i, j, k) / degree
	below, above := 4.0, 7.0 // crowded chains are wider than their reference, hardly ever narrower
	switch smallest := g.smallestRingAt(j); {
	case g.planar[j]:
		theta = g.planarAngle(ref, i, j, k)
		below, above = 5, 8
	case ring == 3:
		theta = 60
	case ring == 4:
		theta, below, above = 89, 8, 8
	case ring == 5:
		theta, below, above = math.Min(theta, 108), 13, 5
	case ring == 6:
		theta, below, above = math.Min(theta, 118), 8, 7
	case ring > 6:
		below, above = 5, 11
	case smallest > 0 && smallest <= 4:
		theta, below, above = math.Max(theta, 114), 10, 14
	case smallest > 0:
		below, above = 7, 7
	}
	return math.Max(theta-below*slack, 50) * degree, math.Min(theta+above*slack, 180) * degree
}

// planarAngle returns the angle in degrees at a planar atom: the inner angle of a regular polygon in a ring of up to seven,
// the rest of the full turn shared in the ratio of the reference angles by the others.
func (g *graph) planarAngle(ref Field, i, j, k int) float64 {
	neighbors := g.Neighbors(j)
	rest, shares := 360.0, 0.0
	for a := range neighbors {
		for b := range a {
			p, q := neighbors[a].Atom, neighbors[b].Atom
			if inner := g.polygonAngle(p, j, q); inner > 0 {
				if (p == i && q == k) || (p == k && q == i) {
					return inner
				}
				rest -= inner
			} else {
				shares += ref.ReferenceAngle(p, j, q)
			}
		}
	}
	return rest * ref.ReferenceAngle(i, j, k) / shares
}

func (g *graph) polygonAngle(i, j, k int) float64 {
	if ring := g.ringThrough(i, j, k); ring > 0 && ring <= 7 {
		return 180 - 360/float64(ring)
	}
	return 0
}

func (g *graph) smallestRingAt(j int) int {
	smallest := 0
	for _, n := range g.Neighbors(j) {
		if size := g.bondRing[n.Bond]; size > 0 && (smallest == 0 || size < smallest) {
			smallest = size
		}
	}
	return smallest
}

// opposite returns the third side of a triangle in Å: the distance i–k when i–j–k is the given angle.
func opposite(ij, jk, angle float64) float64 {
	return math.Sqrt(math.Max(0, ij*ij+jk*jk-2*ij*jk*math.Cos(angle)))
}
