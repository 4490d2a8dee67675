package dedupe

import (
	"errors"
	"math"
)

// ErrLength says that two geometries differ in length or hold no whole number of points.
var ErrLength = errors.New("two geometries to be superposed must hold the same whole number of points")

// Rotation carries the second geometry onto the first: row-major, with determinant +1, or −1 for a rotation with reflection.
type Rotation [9]float64

// Superpose returns the rotation that best carries b onto a after both are centred, and the RMSD in Å.
// a and b hold 3N coordinates in Å, atom-major, same order. With reflect set, improper rotations are allowed.
// It returns [ErrLength] if the lengths differ or are not a multiple of three. The optimum is that of W. Kabsch, Acta
// Cryst. A32, 922 (1976) and A34, 827 (1978); it is found as the largest eigenvalue of the quaternion matrix of B. K. P.
// Horn, J. Opt. Soc. Am. A 4, 629 (1987), whose rotation is proper also for planar, collinear and coincident points.
func Superpose(a, b []float64, reflect bool) (Rotation, float64, error) {
	return superpose(a, b, nil, reflect)
}

// SuperposeWeighted is [Superpose] with a weight for each point, such as its mass; weights must not be negative.
func SuperposeWeighted(a, b, weights []float64, reflect bool) (Rotation, float64, error) {
	if 3*len(weights) != len(a) {
		return Rotation{}, 0, ErrLength
	}
	return superpose(a, b, weights, reflect)
}

func superpose(a, b, weights []float64, reflect bool) (Rotation, float64, error) {
	if len(a) != len(b) || len(a)%3 != 0 || len(a) == 0 {
		return Rotation{}, 0, ErrLength
	}
	ca, cb := centroid(a, weights), centroid(b, weights)
	var c [3][3]float64 // correlation of b with a
	for i := range len(a) / 3 {
		w := weightOf(weights, i)
		for p := range 3 {
			for q := range 3 {
				c[p][q] += w * (b[3*i+p] - cb[p]) * (a[3*i+q] - ca[q])
			}
		}
	}
	r := bestRotation(c)
	rmsd := residual(a, b, weights, ca, cb, r)
	if !reflect {
		return r, rmsd, nil
	}
	for p := range 3 {
		for q := range 3 {
			c[p][q] = -c[p][q]
		}
	}
	improper := bestRotation(c)
	for k := range improper {
		improper[k] = -improper[k]
	}
	if d := residual(a, b, weights, ca, cb, improper); d < rmsd {
		return improper, d, nil
	}
	return r, rmsd, nil
}

func weightOf(weights []float64, i int) float64 {
	if weights == nil {
		return 1
	}
	return weights[i]
}

func centroid(x, weights []float64) (c [3]float64) {
	total := 0.0
	for i := range len(x) / 3 {
		w := weightOf(weights, i)
		total += w
		for p := range 3 {
			c[p] += w * x[3*i+p]
		}
	}
	for p := range 3 {
		c[p] /= total
	}
	return c
}

// bestRotation returns the proper rotation R that maximises Σ a·R b for the correlation c = Σ b aᵀ.
func bestRotation(c [3][3]float64) Rotation {
	n := [4][4]float64{
		{c[0][0] + c[1][1] + c[2][2], c[1][2] - c[2][1], c[2][0] - c[0][2], c[0][1] - c[1][0]},
		{0, c[0][0] - c[1][1] - c[2][2], c[0][1] + c[1][0], c[2][0] + c[0][2]},
		{0, 0, -c[0][0] + c[1][1] - c[2][2], c[1][2] + c[2][1]},
		{0, 0, 0, -c[0][0] - c[1][1] + c[2][2]},
	}
	for p := range 4 {
		for q := range p {
			n[p][q] = n[q][p]
		}
	}
	q := topEigenvector(n)
	w, x, y, z := q[0], q[1], q[2], q[3]
	return Rotation{
		w*w + x*x - y*y - z*z, 2 * (x*y - w*z), 2 * (x*z + w*y),
		2 * (x*y + w*z), w*w - x*x + y*y - z*z, 2 * (y*z - w*x),
		2 * (x*z - w*y), 2 * (y*z + w*x), w*w - x*x - y*y + z*z,
	}
}

// topEigenvector returns the unit eigenvector of the largest eigenvalue of a symmetric matrix, by cyclic Jacobi rotations.
func topEigenvector(n [4][4]float64) (top [4]float64) {
	v := [4][4]float64{{1, 0, 0, 0}, {0, 1, 0, 0}, {0, 0, 1, 0}, {0, 0, 0, 1}}
	for range 50 {
		off, size := 0.0, 0.0
		for p := range 4 {
			size += n[p][p] * n[p][p]
			for q := range p {
				off += n[p][q] * n[p][q]
			}
		}
		if off <= 1e-32*size {
			break
		}
		for p := range 3 {
			for q := p + 1; q < 4; q++ {
				jacobi(&n, &v, p, q)
			}
		}
	}
	best := 0
	for p := 1; p < 4; p++ {
		if n[p][p] > n[best][best] {
			best = p
		}
	}
	length := 0.0
	for p := range 4 {
		top[p] = v[p][best]
		length += top[p] * top[p]
	}
	for p := range 4 {
		top[p] /= math.Sqrt(length)
	}
	return top
}

func jacobi(n, v *[4][4]float64, p, q int) {
	if n[p][q] == 0 {
		return
	}
	theta := (n[q][q] - n[p][p]) / (2 * n[p][q])
	t := 1 / (math.Abs(theta) + math.Hypot(theta, 1))
	if theta < 0 {
		t = -t
	}
	c := 1 / math.Hypot(t, 1)
	s := t * c
	for k := range 4 {
		n[k][p], n[k][q] = c*n[k][p]-s*n[k][q], s*n[k][p]+c*n[k][q]
	}
	for k := range 4 {
		n[p][k], n[q][k] = c*n[p][k]-s*n[q][k], s*n[p][k]+c*n[q][k]
		v[k][p], v[k][q] = c*v[k][p]-s*v[k][q], s*v[k][p]+c*v[k][q]
	}
}

// residual returns the RMSD of a and the rotated b, from the coordinates: the eigenvalue would lose half the digits.
func residual(a, b, weights []float64, ca, cb [3]float64, r Rotation) float64 {
	sum, total := 0.0, 0.0
	for i := range len(a) / 3 {
		w := weightOf(weights, i)
		u, v, t := b[3*i]-cb[0], b[3*i+1]-cb[1], b[3*i+2]-cb[2]
		for p := range 3 {
			d := a[3*i+p] - ca[p] - (r[3*p]*u + r[3*p+1]*v + r[3*p+2]*t)
			sum += w * d * d
		}
		total += w
	}
	return math.Sqrt(sum / total)
}
