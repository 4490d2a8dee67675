package moves

import "math"

type vector [3]float64

func at(x []float64, atom int) vector { return vector{x[3*atom], x[3*atom+1], x[3*atom+2]} }

func (v vector) plus(w vector) vector  { return vector{v[0] + w[0], v[1] + w[1], v[2] + w[2]} }
func (v vector) minus(w vector) vector { return vector{v[0] - w[0], v[1] - w[1], v[2] - w[2]} }

func (v vector) times(s float64) vector { return vector{s * v[0], s * v[1], s * v[2]} }

func (v vector) dot(w vector) float64 { return v[0]*w[0] + v[1]*w[1] + v[2]*w[2] }

func (v vector) cross(w vector) vector {
	return vector{v[1]*w[2] - v[2]*w[1], v[2]*w[0] - v[0]*w[2], v[0]*w[1] - v[1]*w[0]}
}

func (v vector) norm() float64 { return math.Sqrt(v.dot(v)) }

// unit returns the direction of v, and false if v is too short to have one.
func (v vector) unit() (vector, bool) {
	length := v.norm()
	if !(length > 1e-9) {
		return vector{}, false
	}
	return v.times(1 / length), true
}

// rotation is a proper rotation, rows first.
type rotation [3]vector

// aboutAxis is the rotation by an angle in radians about a unit vector (Rodrigues' formula).
func aboutAxis(axis vector, angle float64) rotation {
	s, c := math.Sincos(angle)
	t := 1 - c
	x, y, z := axis[0], axis[1], axis[2]
	return rotation{
		{t*x*x + c, t*x*y - s*z, t*x*z + s*y},
		{t*x*y + s*z, t*y*y + c, t*y*z - s*x},
		{t*x*z - s*y, t*y*z + s*x, t*z*z + c},
	}
}

func (r *rotation) apply(v vector) vector { return vector{r[0].dot(v), r[1].dot(v), r[2].dot(v)} }

// turn rotates atoms about a point.
func (r *rotation) turn(x []float64, atoms []int, about vector) {
	for _, i := range atoms {
		v := r.apply(at(x, i).minus(about)).plus(about)
		x[3*i], x[3*i+1], x[3*i+2] = v[0], v[1], v[2]
	}
}

// frame is an orthonormal basis fixed to two directions; carry returns the rotation from one frame to another.
type frame [3]vector

// frameOf puts the first axis between u and v and the last along u × v. It returns false if they are parallel.
func frameOf(u, v vector) (frame, bool) {
	u, okU := u.unit()
	v, okV := v.unit()
	normal := u.cross(v)
	if !okU || !okV || normal.norm() < 1e-3 {
		return frame{}, false
	}
	normal, _ = normal.unit()
	between, ok := u.plus(v).unit()
	return frame{between, normal.cross(between), normal}, ok
}

func (from frame) carry(to frame) rotation {
	var r rotation
	for i := range 3 {
		for j := range 3 {
			for k := range 3 {
				r[i][j] += to[k][i] * from[k][j]
			}
		}
	}
	return r
}
