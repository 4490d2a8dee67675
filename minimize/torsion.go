package minimize

import (
	"math"

	"tarn/molecule"
)

func torsionAngle(x []float64, atoms [4]int) float64 {
	return molecule.Geometry(x).Torsion(atoms[0], atoms[1], atoms[2], atoms[3])
}

// torsionGradient returns the derivatives of a torsion angle with respect to the coordinates of its four atoms, radians/Å. Source:
// A. Blondel, M. Karplus, J. Comput. Chem. 17, 1132 (1996), with the sign of IUPAC.
func torsionGradient(x []float64, atoms [4]int) [12]float64 {
	at := func(k int) vector { return vector(x[3*atoms[k] : 3*atoms[k]+3]) }
	f, g, h := at(0).minus(at(1)), at(1).minus(at(2)), at(3).minus(at(2))
	a, b := f.cross(g), h.cross(g)
	length, a2, b2 := math.Sqrt(g.dot(g)), a.dot(a), b.dot(b)
	var slopes [12]float64
	for k := range 3 {
		first, last := -length/a2*a[k], length/b2*b[k]
		lever := f.dot(g)/(a2*length)*a[k] - h.dot(g)/(b2*length)*b[k]
		slopes[k], slopes[3+k], slopes[6+k], slopes[9+k] = first, lever-first, -lever-last, last
	}
	return slopes
}

type vector [3]float64

func (a vector) minus(b vector) vector { return vector{a[0] - b[0], a[1] - b[1], a[2] - b[2]} }

func (a vector) dot(b vector) float64 { return a[0]*b[0] + a[1]*b[1] + a[2]*b[2] }

func (a vector) cross(b vector) vector {
	return vector{a[1]*b[2] - a[2]*b[1], a[2]*b[0] - a[0]*b[2], a[0]*b[1] - a[1]*b[0]}
}
