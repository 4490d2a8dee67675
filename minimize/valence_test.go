package minimize

import (
	"math"

	"gonum.org/v1/gonum/floats"
)

// valence is a field of bonds, angles and torsions whose minima are known by construction. It has no exact Hessian.
type valence struct {
	atoms    int
	bonds    []stretch
	angles   []bend
	torsions []twist
}

// stretch is stiffness/2·(r-length)².
type stretch struct {
	i, j              int
	stiffness, length float64
}

// bend is any function of the cosine of the angle i-j-k; it returns energy and slope.
type bend struct {
	i, j, k int
	energy  func(cosine float64) (float64, float64)
}

// twist is any function of the torsion; it returns energy and slope.
type twist struct {
	atoms  [4]int
	energy func(angle float64) (float64, float64)
}

func harmonicBend(stiffness, angle float64) func(float64) (float64, float64) {
	return func(cosine float64) (float64, float64) {
		now := math.Acos(cosine)
		return stiffness / 2 * (now - angle) * (now - angle), -stiffness * (now - angle) / math.Sin(now)
	}
}

// cosineBend is stiffness/2·(cos θ - cos θ₀)², smooth at linear arrangements.
func cosineBend(stiffness, angle float64) func(float64) (float64, float64) {
	return func(cosine float64) (float64, float64) {
		d := cosine - math.Cos(angle)
		return stiffness / 2 * d * d, stiffness * d
	}
}

// straight is stiffness·(1+cos θ), which is stiffness/2·(π-θ)² near a linear arrangement.
func straight(stiffness float64) func(float64) (float64, float64) {
	return func(cosine float64) (float64, float64) { return stiffness * (1 + cosine), stiffness }
}

// flatStraight is stiffness·(1+cos θ)², without curvature where the arrangement is linear.
func flatStraight(stiffness float64) func(float64) (float64, float64) {
	return func(cosine float64) (float64, float64) {
		return stiffness * (1 + cosine) * (1 + cosine), 2 * stiffness * (1 + cosine)
	}
}

// cosineTwist is barrier/2·(1+cos(fold·φ)).
func cosineTwist(barrier, fold float64) func(float64) (float64, float64) {
	return func(angle float64) (float64, float64) {
		return barrier / 2 * (1 + math.Cos(fold*angle)), -barrier / 2 * fold * math.Sin(fold*angle)
	}
}

func (v *valence) Atoms() int { return v.atoms }

func (v *valence) Energy(x, grad []float64) float64 {
	g := make([]float64, len(x))
	total := 0.0
	at := func(i int) vector { return vector(x[3*i : 3*i+3]) }
	add := func(i int, factor float64, d vector) { floats.AddScaled(g[3*i:3*i+3], factor, d[:]) }
	for _, b := range v.bonds {
		d := at(b.i).minus(at(b.j))
		r := math.Sqrt(d.dot(d))
		total += b.stiffness / 2 * (r - b.length) * (r - b.length)
		add(b.i, b.stiffness*(r-b.length)/r, d)
		add(b.j, -b.stiffness*(r-b.length)/r, d)
	}
	for _, b := range v.angles {
		p, q := at(b.i).minus(at(b.j)), at(b.k).minus(at(b.j))
		lp, lq := math.Sqrt(p.dot(p)), math.Sqrt(q.dot(q))
		cosine := p.dot(q) / (lp * lq)
		e, slope := b.energy(cosine)
		total += e
		for _, end := range []struct {
			atom   int
			d, o   vector
			ld, lo float64
		}{{b.i, p, q, lp, lq}, {b.k, q, p, lq, lp}} {
			for _, part := range []struct {
				factor float64
				along  vector
			}{{slope / (end.ld * end.lo), end.o}, {-slope * cosine / (end.ld * end.ld), end.d}} {
				add(end.atom, part.factor, part.along)
				add(b.j, -part.factor, part.along)
			}
		}
	}
	for _, t := range v.torsions {
		e, slope := t.energy(torsionAngle(x, t.atoms))
		total += e
		slopes := torsionGradient(x, t.atoms)
		for a, atom := range t.atoms {
			floats.AddScaled(g[3*atom:3*atom+3], slope, slopes[3*a:3*a+3])
		}
	}
	if grad != nil {
		copy(grad, g)
	}
	return total
}

// bentTriatomic is Y-X-Y with X first: bonds of 1 Å and an angle.
func bentTriatomic(bond, stiffness, angle float64) *valence {
	return &valence{
		atoms:  3,
		bonds:  []stretch{{0, 1, bond, 1}, {0, 2, bond, 1}},
		angles: []bend{{1, 0, 2, harmonicBend(stiffness, angle)}},
	}
}

// chain is Y-X-X-Y with bonds of 1 Å, angles of 100° and a torsional potential.
func chain(torsion func(float64) (float64, float64)) *valence {
	v := &valence{
		atoms: 4,
		bonds: []stretch{{0, 1, 700, 1}, {1, 2, 600, 1}, {2, 3, 700, 1}},
		angles: []bend{
			{0, 1, 2, harmonicBend(100, 100*degree)},
			{1, 2, 3, harmonicBend(100, 100*degree)},
		},
	}
	if torsion != nil {
		v.torsions = []twist{{[4]int{0, 1, 2, 3}, torsion}}
	}
	return v
}

// chainGeometry is a chain with the given torsion, bonds and angles slightly off.
func chainGeometry(torsion float64) []float64 {
	s, c := math.Sincos(95 * degree)
	y, z := math.Sincos(torsion)
	return []float64{1.02 * c, 1.02 * s, 0, 0, 0, 0, 1.01, 0, 0, 1.01 - c, z * s, y * s}
}

const degree = math.Pi / 180
