package forcefield

import "math"

// vector is a point or direction in space. A struct, unlike an array, is kept in registers by the compiler.
type vector struct{ x, y, z float64 }

// place returns the position of the atom whose coordinates start at offset.
func place(x []float64, offset int32) vector {
	p := (*[3]float64)(x[offset:])
	return vector{p[0], p[1], p[2]}
}

// add adds v to the gradient of the atom whose coordinates start at offset.
func add(grad []float64, offset int32, v vector) {
	g := (*[3]float64)(grad[offset:])
	g[0] += v.x
	g[1] += v.y
	g[2] += v.z
}

func (a vector) minus(b vector) vector  { return vector{a.x - b.x, a.y - b.y, a.z - b.z} }
func (a vector) plus(b vector) vector   { return vector{a.x + b.x, a.y + b.y, a.z + b.z} }
func (a vector) times(s float64) vector { return vector{a.x * s, a.y * s, a.z * s} }
func (a vector) dot(b vector) float64   { return a.x*b.x + a.y*b.y + a.z*b.z }
func (a vector) combine(s float64, b vector, t float64) vector {
	return vector{a.x*s + b.x*t, a.y*s + b.y*t, a.z*s + b.z*t}
}

func (a vector) cross(b vector) vector {
	return vector{a.y*b.z - a.z*b.y, a.z*b.x - a.x*b.z, a.x*b.y - a.y*b.x}
}

// direction returns the unit vector along a, the length of a and its inverse; all are 0 for a vector of length 0.
func (a vector) direction() (unit vector, length, inverse float64) {
	length = math.Sqrt(a.dot(a))
	if length > 0 {
		inverse = 1 / length
	} else if length == 0 {
		return vector{}, 0, 0
	}
	return a.times(inverse), length, inverse
}
