package forcefield

import (
	"math"
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"
)

// surface is a function of coordinates with derivatives.
type surface interface {
	Atoms() int
	Energy(x, grad []float64) float64
	Hessian(x, h []float64)
}

var (
	_ surface = (*MMFF94)(nil)
	_ surface = (*LennardJones)(nil)
)

// stepped returns the sixth-order central difference of a vector function along coordinate n.
func stepped(f func(x []float64) []float64, x []float64, n int, step float64) []float64 {
	at := func(d float64) []float64 {
		y := append([]float64(nil), x...)
		y[n] += d
		return f(y)
	}
	p1, m1, p2, m2, p3, m3 := at(step), at(-step), at(2*step), at(-2*step), at(3*step), at(-3*step)
	d := make([]float64, len(p1))
	for i := range d {
		d[i] = (45*(p1[i]-m1[i]) - 9*(p2[i]-m2[i]) + (p3[i] - m3[i])) / (60 * step)
	}
	return d
}

func norm(v []float64) float64 {
	s := 0.0
	for _, a := range v {
		s += a * a
	}
	return math.Sqrt(s)
}

func difference(a, b []float64) []float64 {
	d := make([]float64, len(a))
	for i := range a {
		d[i] = a[i] - b[i]
	}
	return d
}

// requireDerivatives compares gradient and Hessian with central differences; step suits the curvature of the surface.
func requireDerivatives(t require.TestingT, f surface, x []float64, step float64) {
	n := len(x)
	grad, numeric := make([]float64, n), make([]float64, n)
	energy := f.Energy(x, grad)
	require.InDelta(t, energy, f.Energy(x, nil), 1e-10*(1+math.Abs(energy)), "both paths give one energy")
	for i := range n {
		numeric[i] = stepped(func(y []float64) []float64 { return []float64{f.Energy(y, nil)} }, x, i, step)[0]
	}
	require.Less(t, norm(difference(grad, numeric)), 1e-6*norm(grad), "gradient against differences of the energy")
	h, numericHessian := hessians(f, x, step)
	require.Less(t, norm(difference(h, numericHessian)), 1e-6*norm(h), "Hessian against differences of the gradient")
	for i := range n {
		for j := range i {
			require.InDelta(t, h[i*n+j], h[j*n+i], 1e-10*norm(h), "the Hessian is symmetric")
		}
	}
}

// TestDerivativesOfEachTerm takes each term alone, so that a small one cannot hide behind a large one, in ordinary and in
// awkward arrangements.
func TestDerivativesOfEachTerm(t *testing.T) {
	bend := &MMFF94{atoms: 3, angles: []angle{
		angle{i: 0, j: 3, k: 6, stiffness: 110, first: 25, second: 40, firstLength: 1.2, secondLength: 0.9}.withReference(1.9),
	}}
	line := &MMFF94{atoms: 3, linearAngles: []linearAngle{{0, 3, 6, 60}}}
	wilson := &MMFF94{atoms: 4, outOfPlanes: []outOfPlane{{0, [3]int32{3, 6, 9}, 5}}}
	twist := &MMFF94{atoms: 4, torsions: []torsion{{0, 3, 6, 9, 1.3, -2.1, 0.7}}}
	pairs := nonbonded{pairs: []pair{{1 / 3.6, 0.08, -15, 3}}, end: []int32{1, 1}}
	growing := pairs
	growing.distanceDependent = true
	trans := []float64{1.0, 1.2, 0, 0, 0.7, 0, 0, -0.7, 0, -1.0, -1.2, 0}
	cases := []struct {
		name string
		f    *MMFF94
		x    []float64
		step float64
	}{
		{"bond", &MMFF94{atoms: 2, bonds: []bond{{0, 3, 1.4, 600}}}, []float64{0.1, 0.2, 0.3, 1.2, -0.3, 0.9}, 1e-3},
		{"angle", bend, []float64{1.1, 0.1, 0.2, 0, 0, 0, -0.4, 1.0, 0.3}, 1e-3},
		{"angle, 179.4°", bend, []float64{1.1, 0, 0, 0, 0, 0, -1.2, 0.01, 0.005}, 1e-4},
		{"angle, 179.99°", bend, []float64{1.1, 0, 0, 0, 0, 0, -1.2, 0.0002, 0.0001}, 2e-6},
		{"linear angle, bent", line, []float64{1.1, 0.1, 0.2, 0, 0, 0, -0.4, 1.0, 0.3}, 1e-3},
		{"linear angle, almost straight", line, []float64{1.1, 0, 0, 0, 0, 0, -1.2, 1e-3, 0}, 1e-3},
		{"out of plane, pyramid", wilson, []float64{0, 0, 0.3, 1.0, 0.1, 0, -0.5, 0.9, 0.05, -0.6, -0.8, -0.1}, 1e-3},
		{"out of plane, almost planar", wilson, []float64{0, 0, 1e-4, 1.3, 0, 0, -0.6, 1.1, 0, -0.5, -1.2, 0}, 1e-3},
		{"out of plane, two neighbours in line", wilson, []float64{0, 0, 0, 1.3, 0, 0, -1.2, 0.01, 0.005, -0.5, -1.2, 0.1}, 1e-4},
		{"torsion, gauche", twist, []float64{1.2, 0.9, 0.1, 0, 0.8, 0, 0, -0.7, 0.1, -0.5, -1.1, 1.2}, 1e-3},
		{"torsion, trans", twist, trans, 1e-3},
		{"torsion, arm at 179.4°", twist, []float64{0.02, 2.1, 0.015, 0, 0.7, 0, 0, -0.7, 0, -1.0, -1.2, 0.4}, 1e-4},
		{"torsion, arm at 179.99°", twist, []float64{0.0002, 2.1, 0.0001, 0, 0.7, 0, 0, -0.7, 0, -1.0, -1.2, 0.4}, 2e-6},
		{"pair", &MMFF94{atoms: 2, nonbonded: pairs}, []float64{0, 0, 0, 1.5, 2, 0.5}, 1e-3},
		{"pair, overlapping", &MMFF94{atoms: 2, nonbonded: pairs}, []float64{0, 0, 0, 0.3, 0.2, 0.1}, 1e-4},
		{"pair, distance-dependent dielectric", &MMFF94{atoms: 2, nonbonded: growing}, []float64{0, 0, 0, 1.5, 2, 0.5}, 1e-3},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			random := rand.New(rand.NewPCG(1, 2))
			for range 20 {
				x := append([]float64(nil), c.x...)
				for i := range x {
					x[i] += c.step * random.NormFloat64()
				}
				requireDerivatives(t, c.f, x, c.step)
			}
		})
	}

	t.Run("planar and straight exactly", func(t *testing.T) {
		for name, c := range map[string]struct {
			f *MMFF94
			x []float64
		}{
			"out of plane": {wilson, []float64{0, 0, 0, 1.3, 0, 0, -0.6, 1.1, 0, -0.5, -1.2, 0}},
			"line":         {line, []float64{1.1, 0, 0, 0, 0, 0, -1.2, 0, 0}},
		} {
			grad := make([]float64, len(c.x))
			c.f.Energy(c.x, grad)
			require.Less(t, norm(grad), 1e-12, "%s: at rest by symmetry", name)
			h, numeric := hessians(c.f, c.x, 1e-3)
			require.Less(t, norm(difference(h, numeric)), 1e-6*norm(h), name)
		}
	})
}

// hessians returns the Hessian and the central differences of the gradient.
func hessians(f surface, x []float64, step float64) (h, numeric []float64) {
	n := len(x)
	h, numeric = make([]float64, n*n), make([]float64, 0, n*n)
	f.Hessian(x, h)
	for i := range n {
		numeric = append(numeric, stepped(func(y []float64) []float64 {
			g := make([]float64, n)
			f.Energy(y, g)
			return g
		}, x, i, step)...)
	}
	return h, numeric
}

// disturbed returns coordinates moved at random by up to about the given length.
func disturbed(x []float64, by float64, seed uint64) []float64 {
	random := rand.New(rand.NewPCG(seed, 7))
	y := append([]float64(nil), x...)
	for i := range y {
		y[i] += by * random.NormFloat64()
	}
	return y
}

// TestDerivativesOfMolecules covers all terms together, away from the published minima.
func TestDerivativesOfMolecules(t *testing.T) {
	for _, r := range publishedChecks(t) {
		if len(r.elements) > 18 {
			continue
		}
		for _, o := range []Options{{}, {Static: true, Dielectric: 4, DistanceDependent: true}} {
			f, err := NewMMFF94(r.molecule(t), o)
			require.NoError(t, err, r.name)
			t.Run(r.name, func(t *testing.T) { requireDerivatives(t, f, disturbed(r.coordinates, 0.05, 3), 2e-4) })
		}
	}
}

func TestDerivativesOfLennardJones(t *testing.T) {
	f, err := NewLennardJones(6)
	require.NoError(t, err)
	octahedron := []float64{0.8, 0, 0, -0.8, 0, 0, 0, 0.8, 0, 0, -0.8, 0, 0, 0, 0.8, 0, 0, -0.8}
	for seed := range uint64(5) {
		requireDerivatives(t, f, disturbed(octahedron, 0.05, seed), 1e-4)
	}
	// Inside the distance where the parabola takes over, and across it.
	pair, err := NewLennardJones(2)
	require.NoError(t, err)
	requireDerivatives(t, pair, []float64{0, 0, 0, 0.1, 0.05, 0.12}, 1e-3)
	below, above := pair.Energy([]float64{0, 0, 0, 0.25 - 1e-9, 0, 0}, nil), pair.Energy([]float64{0, 0, 0, 0.25 + 1e-9, 0, 0}, nil)
	require.InEpsilon(t, below, above, 1e-6)
}

// moved returns x after a rotation about the axis (a, b, c) of unit quaternion (a, b, c, d) and a shift.
func moved(x []float64, quaternion [4]float64, shift [3]float64, reflect bool) []float64 {
	a, b, c, d := quaternion[0], quaternion[1], quaternion[2], quaternion[3]
	length := math.Sqrt(a*a + b*b + c*c + d*d)
	a, b, c, d = a/length, b/length, c/length, d/length
	rotation := [3]vector{
		{1 - 2*(b*b+c*c), 2 * (a*b - c*d), 2 * (a*c + b*d)},
		{2 * (a*b + c*d), 1 - 2*(a*a+c*c), 2 * (b*c - a*d)},
		{2 * (a*c - b*d), 2 * (b*c + a*d), 1 - 2*(a*a+b*b)},
	}
	y := make([]float64, len(x))
	for i := 0; i < len(x); i += 3 {
		v := place(x, int32(i))
		if reflect {
			v.z = -v.z
		}
		for n, row := range rotation {
			y[i+n] = row.dot(v) + shift[n]
		}
	}
	return y
}

// TestInvariance rotates, shifts and reflects: the energy must stay, the gradient must turn along and must exert neither
// force nor torque on the whole.
func TestInvariance(t *testing.T) {
	check := publishedCheck(t, "AGLYSL01")
	mm, err := NewMMFF94(check.molecule(t), Options{})
	require.NoError(t, err)
	lj, err := NewLennardJones(len(check.elements))
	require.NoError(t, err)
	for name, f := range map[string]surface{"MMFF94": mm, "Lennard-Jones": lj} {
		t.Run(name, func(t *testing.T) {
			rapid.Check(t, func(t *rapid.T) {
				unit := rapid.Float64Range(-1, 1)
				q := [4]float64{unit.Draw(t, "a"), unit.Draw(t, "b"), unit.Draw(t, "c"), unit.Draw(t, "d") + 2}
				shift := [3]float64{10 * unit.Draw(t, "x"), 10 * unit.Draw(t, "y"), 10 * unit.Draw(t, "z")}
				reflect := rapid.Bool().Draw(t, "reflect")
				x := disturbed(check.coordinates, 0.02, 5)
				y := moved(x, q, shift, reflect)
				gx, gy := make([]float64, len(x)), make([]float64, len(x))
				ex, ey := f.Energy(x, gx), f.Energy(y, gy)
				require.InDelta(t, ex, ey, 1e-10*(1+math.Abs(ex)))
				require.Less(t, norm(difference(moved(gx, q, [3]float64{}, reflect), gy)), 1e-10*norm(gx))
				var force, torque vector
				for i := 0; i < len(x); i += 3 {
					g := place(gy, int32(i))
					force, torque = force.plus(g), torque.plus(place(y, int32(i)).cross(g))
				}
				require.Less(t, math.Sqrt(force.dot(force)), 1e-10*norm(gx))
				require.Less(t, math.Sqrt(torque.dot(torque)), 1e-10*norm(gx)*(1+norm(y)))
			})
		})
	}
}
