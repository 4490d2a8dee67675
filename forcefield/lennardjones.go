package forcefield

import "fmt"

// LennardJones is a cluster of equal atoms in reduced units: every pair contributes 4(r⁻¹² − r⁻⁶), so that the well depth
// is 1 at r = 2^(1/6). Source: J. E. Jones, Proc. R. Soc. Lond. A 106, 463 (1924).
//
// Below a distance of 0.25, where the energy of a pair is above 6·10⁷, the potential goes on as the parabola in r² that
// has the same value, slope and curvature. Coincident atoms thus have a large but finite energy and a finite gradient.
type LennardJones struct {
	atoms int
}

// NewLennardJones returns the potential of n atoms; n must be at least 2.
func NewLennardJones(n int) (*LennardJones, error) {
	if n < 2 {
		return nil, fmt.Errorf("a Lennard-Jones cluster needs at least 2 atoms, not %d", n)
	}
	return &LennardJones{atoms: n}, nil
}

// Atoms returns the number of atoms.
func (f *LennardJones) Atoms() int { return f.atoms }

// innerSquare is the square of the distance below which the parabola takes over.
const innerSquare = 0.0625

// pairOfSquare returns the energy of a pair and its first two derivatives with respect to s = r².
func pairOfSquare(s float64) (e, e1, e2 float64) {
	t := s
	if s < innerSquare {
		t = innerSquare
	}
	inv := 1 / t
	inv3 := inv * inv * inv
	e = 4 * inv3 * (inv3 - 1)
	e1 = -12 * inv3 * inv * (2*inv3 - 1)
	e2 = 24 * inv3 * inv * inv * (7*inv3 - 2)
	if d := s - t; d < 0 {
		e += d * (e1 + d/2*e2)
		e1 += d * e2
	}
	return e, e1, e2
}

// Energy returns the energy in units of the well depth. x holds 3N coordinates in units of σ, atom-major; grad, if not nil,
// receives dE/dx.
func (f *LennardJones) Energy(x, grad []float64) float64 {
	total := 0.0
	clear(grad)
	for i := range f.atoms {
		xi, yi, zi := x[3*i], x[3*i+1], x[3*i+2]
		var gx, gy, gz float64
		for j := i + 1; j < f.atoms; j++ {
			dx, dy, dz := xi-x[3*j], yi-x[3*j+1], zi-x[3*j+2]
			e, e1, _ := pairOfSquare(dx*dx + dy*dy + dz*dz)
			total += e
			if grad != nil {
				dx, dy, dz = 2*e1*dx, 2*e1*dy, 2*e1*dz
				gx, gy, gz = gx+dx, gy+dy, gz+dz
				grad[3*j] -= dx
				grad[3*j+1] -= dy
				grad[3*j+2] -= dz
			}
		}
		if grad != nil {
			grad[3*i] += gx
			grad[3*i+1] += gy
			grad[3*i+2] += gz
		}
	}
	return total
}

// Hessian writes the second derivatives, in units of the well depth over σ², to h, 3N×3N, row-major.
func (f *LennardJones) Hessian(x, h []float64) {
	clear(h)
	end := int32(3 * f.atoms)
	for i := int32(0); i < end; i += 3 {
		for j := i + 3; j < end; j += 3 {
			d := place(x, i).minus(place(x, j))
			_, e1, e2 := pairOfSquare(d.dot(d))
			addPairBlocks(h, int(end), i, j, d, 2*e1, 4*e2)
		}
	}
}
