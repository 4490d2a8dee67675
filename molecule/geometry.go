package molecule

import "math"

// Geometry is one set of Cartesian coordinates in Å, atom-major: x, y and z of atom i stand at 3i, 3i+1 and 3i+2.
type Geometry []float64

// Atoms returns the number of atoms.
func (g Geometry) Atoms() int { return len(g) / 3 }

// At returns the position of an atom.
func (g Geometry) At(atom int) [3]float64 { return [3]float64{g[3*atom], g[3*atom+1], g[3*atom+2]} }

// Distance returns the distance of two atoms in Å.
func (g Geometry) Distance(i, j int) float64 {
	a, b := g.At(i), g.At(j)
	return math.Sqrt((a[0]-b[0])*(a[0]-b[0]) + (a[1]-b[1])*(a[1]-b[1]) + (a[2]-b[2])*(a[2]-b[2]))
}

// Angle returns the angle i–j–k at atom j, in radians between 0 and π.
func (g Geometry) Angle(i, j, k int) float64 {
	u, v := sub(g.At(i), g.At(j)), sub(g.At(k), g.At(j))
	return math.Atan2(norm(cross(u, v)), dot(u, v))
}

// Torsion returns the torsion angle i–j–k–l in radians between -π and π, positive clockwise from i to l seen along j→k
// (IUPAC 1974, rule E-2). It is 0 if three of the atoms in a row are collinear.
func (g Geometry) Torsion(i, j, k, l int) float64 {
	b1, b2, b3 := sub(g.At(j), g.At(i)), sub(g.At(k), g.At(j)), sub(g.At(l), g.At(k))
	m, n := cross(b1, b2), cross(b2, b3)
	return math.Atan2(norm(b2)*dot(b1, n), dot(m, n))
}

// Clone returns an independent copy.
func (g Geometry) Clone() Geometry { return append(Geometry(nil), g...) }

func sub(a, b [3]float64) [3]float64 { return [3]float64{a[0] - b[0], a[1] - b[1], a[2] - b[2]} }

func dot(a, b [3]float64) float64 { return a[0]*b[0] + a[1]*b[1] + a[2]*b[2] }

func cross(a, b [3]float64) [3]float64 {
	return [3]float64{a[1]*b[2] - a[2]*b[1], a[2]*b[0] - a[0]*b[2], a[0]*b[1] - a[1]*b[0]}
}

func norm(a [3]float64) float64 { return math.Sqrt(dot(a, a)) }
