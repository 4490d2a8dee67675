package minimize

import (
	"context"
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"github.com/stretchr/testify/require"
	"gonum.org/v1/gonum/floats"
	"gonum.org/v1/gonum/mat"
	"pgregory.net/rapid"

	"tarn/forcefield"
	"tarn/molecule"
)

// counted counts what is really evaluated.
type counted struct {
	Field
	energies int
}

func (c *counted) Energy(x, grad []float64) float64 {
	c.energies++
	return c.Field.Energy(x, grad)
}

// countedExactly does so for a field with a Hessian.
type countedExactly struct {
	counted
	hessians int
}

func (c *countedExactly) Hessian(x, h []float64) {
	c.hessians++
	c.Field.(Hessian).Hessian(x, h)
}

func lennardJones(t testing.TB, n int) *forcefield.LennardJones {
	f, err := forcefield.NewLennardJones(n)
	require.NoError(t, err)
	return f
}

// scattered returns n atoms at random in a cube that is dense enough for a cluster to form.
func scattered(n int, rng *rand.Rand) []float64 {
	x, side := make([]float64, 3*n), 1.8*math.Cbrt(float64(n))
	for i := range x {
		x[i] = side * (rng.Float64() - 0.5)
	}
	return x
}

// requireMinimum checks a result without the code that made it: the gradient, and the Hessian's eigenvalues with nothing projected
// out, of which as many are zero as there are rigid motions.
func requireMinimum(t *testing.T, f Field, r Result, rigid int) {
	t.Helper()
	grad := make([]float64, len(r.X))
	require.Equal(t, r.Energy, f.Energy(r.X, grad))
	require.LessOrEqual(t, floats.Norm(grad, 2), 1e-6*math.Sqrt(float64(len(grad))))
	var eigen mat.EigenSym
	require.True(t, eigen.Factorize(mat.NewSymDense(len(r.X), HessianAt(f, r.X)), false))
	values := eigen.Values(nil)
	for k := range rigid {
		require.InDelta(t, 0, values[k], 2e-5)
	}
	if len(values) > rigid {
		require.InDelta(t, r.LowestEigenvalue, values[rigid], 2e-5*(1+values[rigid]))
	}
}

// Global minima of Lennard-Jones clusters: D. J. Wales, J. P. K. Doye, J. Phys. Chem. A 101, 5111 (1997). That of n atoms is found
// from few random starts and nothing below it ever.
func TestQuenchFindsLennardJonesGlobalMinima(t *testing.T) {
	for n, energy := range map[int]float64{
		2: -1, 3: -3, 4: -6, 5: -9.103852, 6: -12.712062, 7: -16.505384, 8: -19.821489, 9: -24.113360, 10: -28.422532, 13: -44.326801,
	} {
		f := lennardJones(t, n)
		q := NewQuencher(f, Settings{})
		lowest := math.Inf(1)
		rng := rand.New(rand.NewPCG(1, uint64(n)))
		for start := 0; start < 200 && lowest > energy+1e-3; start++ {
			r, err := q.Quench(context.Background(), scattered(n, rng))
			require.NoError(t, err)
			lowest = min(lowest, r.Energy)
			if start < 5 {
				requireMinimum(t, f, r, min(6, 3*n-1))
			}
		}
		require.InDelta(t, energy, lowest, 1e-6, "%d atoms", n)
	}
}

// LJ7 has four minima and LJ8 eight: C. J. Tsai, K. D. Jordan, J. Phys. Chem. 97, 11227 (1993), as minima of different energy here. A
// saddle taken for a minimum or a quench that stops early shows as one more.
func TestQuenchFindsEveryLennardJonesMinimum(t *testing.T) {
	for n, want := range map[int]int{6: 2, 7: 4, 8: 8} {
		q := NewQuencher(lennardJones(t, n), Settings{})
		rng := rand.New(rand.NewPCG(2, uint64(n)))
		var energies []float64
		for range 1500 {
			r, err := q.Quench(context.Background(), scattered(n, rng))
			require.NoError(t, err)
			require.Greater(t, r.LowestEigenvalue, 1e-3)
			if !slices.ContainsFunc(energies, func(e float64) bool { return math.Abs(e-r.Energy) < 1e-6 }) {
				energies = append(energies, r.Energy)
			}
		}
		require.Len(t, energies, want, "%d atoms", n)
	}
}

func TestQuenchLeavesSaddles(t *testing.T) {
	contact := math.Pow(2, 1.0/6)
	pyramid := &valence{atoms: 4, angles: []bend{
		{1, 0, 2, harmonicBend(120, 107*degree)}, {2, 0, 3, harmonicBend(120, 107*degree)}, {3, 0, 1, harmonicBend(120, 107*degree)},
	}, bonds: []stretch{{0, 1, 900, 1}, {0, 2, 900, 1}, {0, 3, 900, 1}}}
	bent := &valence{atoms: 3, bonds: []stretch{{0, 1, 900, 1}, {0, 2, 900, 1}}, angles: []bend{{1, 0, 2, cosineBend(100, 105*degree)}}}
	s, c := math.Sincos(120 * degree)
	for _, saddle := range []struct {
		name   string
		field  Field
		x      []float64
		energy float64
	}{
		{"three Lennard-Jones atoms in a row", lennardJones(t, 3), []float64{-contact, 0, 0, 0, 0, 0, contact, 0, 0}, -3},
		{
			"four in a square", lennardJones(t, 4),
			[]float64{contact / 2, contact / 2, 0, -contact / 2, contact / 2, 0, -contact / 2, -contact / 2, 0, contact / 2, -contact / 2, 0},
			-6,
		},
		{"planar pyramid", pyramid, []float64{0, 0, 0, 1, 0, 0, c, s, 0, c, -s, 0}, 0},
		{"linear arrangement of a bent molecule", bent, []float64{0, 0, 0, 1, 0, 0, -1, 0, 0}, 0},
		{"eclipsed chain", chain(cosineTwist(3, 3)), chainGeometry(0), 0},
		{"low barrier", chain(cosineTwist(1e-3, 6)), chainGeometry(0), 0},
	} {
		r, err := Quench(context.Background(), saddle.field, saddle.x, Settings{})
		require.NoError(t, err, saddle.name)
		require.InDelta(t, saddle.energy, r.Energy, 1e-6, saddle.name)
		require.Positive(t, r.Saddles, saddle.name)
		require.Positive(t, r.LowestEigenvalue, saddle.name)
		requireMinimum(t, saddle.field, r, 6)
	}
}

// From a saddle between two different minima the quench goes to the lower one, whichever way the mode points.
func TestQuenchLeavesSaddleToTheLowerSide(t *testing.T) {
	for _, tilt := range []float64{0.3, -0.3} {
		uneven := func(angle float64) (float64, float64) {
			return 2*math.Cos(2*angle) + tilt*math.Sin(angle), -4*math.Sin(2*angle) + tilt*math.Cos(angle)
		}
		f := chain(uneven)
		top := tilt / 8 // where the slope -4 sin 2φ + tilt cos φ vanishes, to first order
		for range 20 {
			_, slope := uneven(top)
			top += slope / 8
		}
		saddle, err := Hold(context.Background(), f, chainGeometry(top), Torsion{[4]int{0, 1, 2, 3}, top}, Settings{})
		require.NoError(t, err)
		r, err := Quench(context.Background(), f, saddle.X, Settings{})
		require.NoError(t, err)
		require.Equal(t, 1, r.Saddles)
		require.InDelta(t, -2.3, r.Energy, 1e-9)
		again, err := Quench(context.Background(), f, saddle.X, Settings{})
		require.NoError(t, err)
		require.Equal(t, r, again)
	}
}

// Where the potential is flat to second order a quench ends, without being taken for a saddle.
func TestQuenchOnFlatPotentials(t *testing.T) {
	quartic := &valence{
		atoms: 3, bonds: []stretch{{0, 1, 900, 1}, {0, 2, 900, 1}}, angles: []bend{{1, 0, 2, flatStraight(50)}},
	}
	dimers := &valence{atoms: 4, bonds: []stretch{{0, 1, 500, 1}, {2, 3, 500, 1}}}
	for _, flatness := range []struct {
		name  string
		field Field
		x     []float64
	}{
		{"free rotor", chain(nil), chainGeometry(1)},
		{"hindered by 1e-6 kcal/mol", chain(cosineTwist(1e-6, 3)), chainGeometry(0.1)},
		{"quartic bending", quartic, []float64{0, 0, 0, 1, 0.2, 0, -1.1, 0.1, 0.05}},
		{"two diatomics that do not meet", dimers, []float64{0, 0, 0, 1.1, 0, 0, 5, 5, 5, 5, 6.2, 5}},
	} {
		r, err := Quench(context.Background(), flatness.field, flatness.x, Settings{})
		require.NoError(t, err, flatness.name)
		require.InDelta(t, 0, r.Energy, 1e-5, flatness.name)
		require.LessOrEqual(t, r.GradientRMS, 1e-6, flatness.name)
		require.Less(t, r.Evaluations, 1000, flatness.name)
		require.Less(t, math.Abs(r.LowestEigenvalue), 0.1, flatness.name)
	}
}

// However soft the torsion is, it takes few Hessians to come to its minimum.
func TestQuenchOfSoftModes(t *testing.T) {
	for _, barrier := range []float64{1e-1, 1e-2, 1e-3, 1e-4, 3e-5} {
		for _, start := range []float64{0.1, 0.5, 1} {
			f := exactly{chain(cosineTwist(barrier, 3))}
			r, err := Quench(context.Background(), f, chainGeometry(start), Settings{})
			require.NoError(t, err, barrier)
			require.InDelta(t, 0, r.Energy, barrier/100, barrier)
			require.Less(t, r.Hessians, 20, barrier)
		}
	}
}

func TestQuenchOfSmallestSystems(t *testing.T) {
	atom := &valence{atoms: 1}
	r, err := Quench(context.Background(), atom, []float64{1, 2, 3}, Settings{})
	require.NoError(t, err)
	require.Equal(t, []float64{1, 2, 3}, r.X)
	require.Zero(t, r.LowestEigenvalue)

	morse := morseField{depth: 100, width: 2, length: 1.2}
	r, err = Quench(context.Background(), morse, []float64{0, 0, 0, 0, 0, 1.9}, Settings{})
	require.NoError(t, err)
	require.InDelta(t, 1.2, molecule.Geometry(r.X).Distance(0, 1), 1e-8)
	require.InEpsilon(t, 2*2*100*2*2, r.LowestEigenvalue, 1e-5, "twice the force constant 2Da², because both atoms move")

	linear := &valence{atoms: 3, bonds: []stretch{{0, 1, 900, 1}, {0, 2, 900, 1}}, angles: []bend{{1, 0, 2, straight(50)}}}
	r, err = Quench(context.Background(), linear, []float64{0, 0, 0, 1, 0.3, 0, -1.1, 0.1, 0.2}, Settings{})
	require.NoError(t, err)
	require.InDelta(t, math.Pi, molecule.Geometry(r.X).Angle(1, 0, 2), 1e-6)
	require.InDelta(t, 6*50, r.LowestEigenvalue, 0.01, "the angle changes by 1, 1 and -2 per displacement of the three atoms: k(1+1+4)")
}

// morseField is P. M. Morse, Phys. Rev. 34, 57 (1929).
type morseField struct{ depth, width, length float64 }

func (m morseField) Atoms() int { return 2 }

func (m morseField) Energy(x, grad []float64) float64 {
	d := vector(x[:3]).minus(vector(x[3:]))
	r := math.Sqrt(d.dot(d))
	e := math.Exp(-m.width * (r - m.length))
	if grad != nil {
		clear(grad)
		slope := 2 * m.depth * m.width * (1 - e) * e / r
		floats.AddScaled(grad[:3], slope, d[:])
		floats.AddScaled(grad[3:], -slope, d[:])
	}
	return m.depth * (1 - e) * (1 - e)
}

func TestQuenchCountsEvaluations(t *testing.T) {
	for _, f := range []Field{lennardJones(t, 8), exactly{chain(cosineTwist(3, 3))}} {
		x := scattered(f.Atoms(), rand.New(rand.NewPCG(3, 3)))
		differences := &counted{Field: f}
		r, err := Quench(context.Background(), differences, x, Settings{})
		require.NoError(t, err)
		require.Equal(t, differences.energies, r.Evaluations, "those for finite differences included")
		require.Greater(t, r.Evaluations, 6*f.Atoms())
		require.Zero(t, r.Hessians)

		exact := &countedExactly{counted: counted{Field: f}}
		again, err := Quench(context.Background(), exact, x, Settings{})
		require.NoError(t, err)
		require.Equal(t, exact.energies, again.Evaluations)
		require.Equal(t, exact.hessians, again.Hessians)
		require.Positive(t, again.Hessians)
		require.InDelta(t, r.Energy, again.Energy, 1e-8)
	}
}

func TestCrudeThenFinish(t *testing.T) {
	f := lennardJones(t, 13)
	x := scattered(13, rand.New(rand.NewPCG(4, 4)))
	start := slices.Clone(x)
	q := NewQuencher(f, Settings{})
	whole, err := q.Quench(context.Background(), x)
	require.NoError(t, err)
	require.Equal(t, start, x, "the snapshot is left alone")

	crude, err := q.Crude(context.Background(), x)
	require.NoError(t, err)
	require.LessOrEqual(t, crude.GradientRMS, 0.3)
	require.Zero(t, crude.Hessians)
	require.Zero(t, crude.LowestEigenvalue, "not that of the quench before")
	require.Less(t, crude.Evaluations, whole.Evaluations)
	_, err = q.Quench(context.Background(), scattered(13, rand.New(rand.NewPCG(5, 5))))
	require.NoError(t, err)
	finished, err := q.Finish(context.Background(), crude)
	require.NoError(t, err)
	require.Equal(t, whole.X, finished.X, "what happened in between leaves no trace")
	require.Equal(t, whole.Evaluations+1, finished.Evaluations, "the finish evaluates the crude point again")
}

// Two quenches that end in one minimum agree far better than identification needs.
func TestQuenchesOfOneMinimumAgree(t *testing.T) {
	f := lennardJones(t, 7)
	reference, err := Quench(context.Background(), f, scattered(7, rand.New(rand.NewPCG(1, 7))), Settings{})
	require.NoError(t, err)
	rapid.Check(t, func(t *rapid.T) {
		x := slices.Clone(reference.X)
		for i := range x {
			x[i] += rapid.Float64Range(-0.04, 0.04).Draw(t, "push")
		}
		r, err := Quench(context.Background(), f, x, Settings{})
		require.NoError(t, err)
		require.InDelta(t, reference.Energy, r.Energy, 1e-11)
		require.InEpsilon(t, reference.LowestEigenvalue, r.LowestEigenvalue, 1e-4)
		for i := range 7 {
			for j := range i {
				require.InDelta(t, molecule.Geometry(reference.X).Distance(i, j), molecule.Geometry(r.X).Distance(i, j), 1e-7)
			}
		}
	})
}

// broken gives what it is told to.
type broken struct{ energy, slope float64 }

func (b broken) Atoms() int { return 2 }

func (b broken) Energy(x, grad []float64) float64 {
	for i := range grad {
		grad[i] = b.slope
	}
	return b.energy
}

// bottomless falls without end.
type bottomless struct{}

func (bottomless) Atoms() int { return 2 }

func (bottomless) Energy(x, grad []float64) float64 {
	d := vector(x[:3]).minus(vector(x[3:]))
	if grad != nil {
		for k := range 3 {
			grad[k], grad[3+k] = -2*d[k], 2*d[k]
		}
	}
	return -d.dot(d)
}

// cliff has no finite energy beyond a distance of 1.5, inside which it is a Morse curve that pulls outward.
type cliff struct{ morseField }

func (c cliff) Energy(x, grad []float64) float64 {
	if molecule.Geometry(x).Distance(0, 1) > 1.5 {
		floats.AddConst(math.NaN(), grad)
		return math.NaN()
	}
	return c.morseField.Energy(x, grad)
}

func TestQuenchErrors(t *testing.T) {
	x := []float64{0, 0, 0, 1, 0, 0}
	for _, b := range []broken{{math.NaN(), 0}, {math.Inf(1), 1}, {0, math.NaN()}, {-1, math.Inf(-1)}} {
		_, err := Quench(context.Background(), b, x, Settings{})
		var diverged *DivergedError
		require.ErrorAs(t, err, &diverged, "%+v", b)
		require.ErrorIs(t, err, ErrDiverged)
	}
	_, err := Quench(context.Background(), bottomless{}, []float64{0, 0, 0, 1, math.NaN(), 0}, Settings{})
	require.ErrorContains(t, err, "atom 2")

	r, err := Quench(context.Background(), bottomless{}, x, Settings{MaxEvaluations: 300})
	require.ErrorIs(t, err, ErrNotConverged)
	require.Less(t, r.Energy, -1.0, "the best point found comes with the error")
	require.LessOrEqual(t, r.Evaluations, 320)

	_, err = Quench(context.Background(), bottomless{}, x[:3], Settings{})
	require.ErrorIs(t, err, ErrLength)

	// A force that the energy knows nothing of.
	_, err = Quench(context.Background(), broken{energy: 1, slope: 2}, x, Settings{})
	require.ErrorIs(t, err, ErrNotConverged)

	r, err = Quench(context.Background(), cliff{morseField{100, 2, 1.4}}, []float64{0, 0, 0, 0, 0, 0.7}, Settings{})
	require.NoError(t, err, "steps that leave the field's domain are taken back")
	require.InDelta(t, 1.4, molecule.Geometry(r.X).Distance(0, 1), 1e-8)
}

// canceling ends the context during an evaluation.
type canceling struct {
	countedExactly
	at     int
	cancel context.CancelFunc
}

func (c *canceling) Energy(x, grad []float64) float64 {
	if c.energies == c.at {
		c.cancel()
	}
	return c.countedExactly.Energy(x, grad)
}

func TestQuenchStopsWithItsContext(t *testing.T) {
	x := scattered(13, rand.New(rand.NewPCG(6, 6)))
	for _, at := range []int{0, 1, 50} {
		ctx, cancel := context.WithCancel(context.Background())
		f := &canceling{countedExactly: countedExactly{counted: counted{Field: lennardJones(t, 13)}}, at: at, cancel: cancel}
		r, err := Quench(ctx, f, x, Settings{})
		require.ErrorIs(t, err, context.Canceled)
		require.LessOrEqual(t, f.energies, at+1)
		require.Len(t, r.X, len(x), "the best point found comes with the error")
	}
}
