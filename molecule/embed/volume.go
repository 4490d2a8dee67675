package embed

import (
	"math"

	"tarn/molecule"
)

// volume asks that six times the signed volume of the tetrahedron of four atoms, in Å³, lies between low and high.
type volume struct {
	atoms     [4]int
	low, high float64
	scale     float64 // what counts as a violation of one unit
	plane     bool    // a planar group, not a stereocentre
}

const (
	planarSlack  = 0.2 // Å³, about 5° of twist at a double bond
	twistedSlack = 1.7 // Å³, about 50°
	planarScale  = 3.0 // Å³, about six times the volume at a tetrahedral carbon bearing one hydrogen
	// centerShare of the volume of the reference tetrahedron is asked of a stereocentre. Strained centres are flatter than
	// the reference, never inverted.
	centerShare = 0.4
)

func planarVolume(a, b, c, d int, slack float64) volume {
	return volume{atoms: [4]int{a, b, c, d}, low: -slack, high: slack, scale: planarScale, plane: true}
}

// fixCenters asks for the right sign of the volume at every specified stereocentre. Seen from the first neighbour the others
// run clockwise exactly if the volume is positive; the atom itself stands for a lone pair, which lies on the same side. At
// four neighbours the atom has to lie inside their tetrahedron: put in the place of any of them it keeps the sign.
func (c *constraints) fixCenters() {
	for _, center := range c.Centers {
		atoms := center.Neighbors
		inside := len(c.Neighbors(center.Atom)) == 4
		for i, a := range atoms {
			if a == molecule.LonePair {
				atoms[i] = center.Atom
			}
		}
		c.fixCenter(atoms, center.Clockwise)
		for i := range atoms {
			if inside {
				part := atoms
				part[i] = center.Atom
				c.fixCenter(part, center.Clockwise)
			}
		}
	}
}

func (c *constraints) fixCenter(atoms [4]int, positive bool) {
	reference := c.referenceVolume(atoms)
	v := volume{atoms: atoms, low: centerShare * reference, high: math.Inf(1), scale: math.Max(reference, planarScale)}
	if !positive {
		v.low, v.high = math.Inf(-1), -centerShare*reference
	}
	c.volumes = append(c.volumes, v)
}

// referenceVolume returns six times the volume of the tetrahedron whose edges lie in the middle of the bounds.
func (c *constraints) referenceVolume(atoms [4]int) float64 {
	squared := func(i, j int) float64 {
		at := atoms[i]*c.n + atoms[j]
		d := (c.lower[at] + c.upper[at]) / 2
		return d * d
	}
	// Gram determinant of the edges that leave the last atom.
	product := func(i, j int) float64 {
		if i == j {
			return squared(i, 3)
		}
		return (squared(i, 3) + squared(j, 3) - squared(i, j)) / 2
	}
	det := product(0, 0)*(product(1, 1)*product(2, 2)-product(1, 2)*product(1, 2)) -
		product(0, 1)*(product(0, 1)*product(2, 2)-product(1, 2)*product(0, 2)) +
		product(0, 2)*(product(0, 1)*product(1, 2)-product(1, 1)*product(0, 2))
	return math.Max(math.Sqrt(math.Max(0, det)), smallestVolume)
}

const smallestVolume = 1.0 // Å³, keeps centres apart from planar ones

// signedVolume returns six times the signed volume of the tetrahedron in Å³.
func signedVolume(g molecule.Geometry, atoms [4]int) float64 {
	o := g.At(atoms[0])
	var e [3][3]float64
	for i, a := range atoms[1:] {
		p := g.At(a)
		for x := range 3 {
			e[i][x] = p[x] - o[x]
		}
	}
	return e[0][0]*(e[1][1]*e[2][2]-e[1][2]*e[2][1]) + e[0][1]*(e[1][2]*e[2][0]-e[1][0]*e[2][2]) + e[0][2]*(e[1][0]*e[2][1]-e[1][1]*e[2][0])
}
