package ctfile

import "math"

func plus(a, b [3]float64) [3]float64  { return [3]float64{a[0] + b[0], a[1] + b[1], a[2] + b[2]} }
func minus(a, b [3]float64) [3]float64 { return [3]float64{a[0] - b[0], a[1] - b[1], a[2] - b[2]} }

func times(s float64, a [3]float64) [3]float64 { return [3]float64{s * a[0], s * a[1], s * a[2]} }

func dot(a, b [3]float64) float64 { return a[0]*b[0] + a[1]*b[1] + a[2]*b[2] }

func cross(a, b [3]float64) [3]float64 {
	return [3]float64{a[1]*b[2] - a[2]*b[1], a[2]*b[0] - a[0]*b[2], a[0]*b[1] - a[1]*b[0]}
}

func norm(a [3]float64) float64 { return math.Sqrt(dot(a, a)) }

// unit returns a at unit length, or zero for two atoms at one place.
func unit(a [3]float64) [3]float64 {
	if n := norm(a); n > 0 {
		return times(1/n, a)
	}
	return a
}
