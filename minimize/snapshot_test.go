package minimize_test

import (
	"context"
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/forcefield"
	"tarn/minimize"
	"tarn/molecule"
	"tarn/molecule/embed"
	"tarn/molecule/smiles"
)

const (
	hexadecane = "CCCCCCCCCCCCCCCC"            // 50 atoms
	muscone    = "C[C@@H]1CCCCCCCCCCCCC(=O)C1" // 46 atoms
)

// snapshots returns geometries of a molecule in MMFF94 every 50 fs of Langevin dynamics at 1,000 K.
func snapshots(t testing.TB, notation string, count int) (*forcefield.MMFF94, [][]float64) {
	const (
		step     = 0.5 / 48.888213         // 0.5 fs in sqrt(u Å²/(kcal/mol))
		thermal  = 1.98720425864e-3 * 1000 // RT, kcal/mol
		friction = 0.01                    // per step
		stride   = 100
	)
	m, err := smiles.Parse(notation)
	require.NoError(t, err)
	f, err := forcefield.NewMMFF94(m, forcefield.Options{})
	require.NoError(t, err)
	rng := rand.New(rand.NewPCG(1, 1000))
	x, err := embed.Embed(context.Background(), m, f, rng)
	require.NoError(t, err)
	quenched, err := minimize.Quench(context.Background(), f, x, minimize.Settings{})
	require.NoError(t, err)
	x = quenched.X
	masses := m.Masses()
	speed, grad := make([]float64, len(x)), make([]float64, len(x))
	kick := func(keep float64) {
		for i := range speed {
			speed[i] = keep*speed[i] + math.Sqrt((1-keep*keep)*thermal/masses[i/3])*rng.NormFloat64()
		}
	}
	push := func() {
		for i := range speed {
			speed[i] -= step / 2 * grad[i] / masses[i/3]
		}
	}
	kick(0)
	f.Energy(x, grad)
	var taken [][]float64
	for k := 1; len(taken) < count; k++ {
		push()
		for i := range x {
			x[i] += step * speed[i]
		}
		f.Energy(x, grad)
		push()
		kick(math.Exp(-friction))
		if k%stride == 0 && k > 20*stride {
			taken = append(taken, slices.Clone(x))
		}
	}
	return f, taken
}

// Half of the quenches of 50 atoms from 1,000 K need 250 evaluations or fewer.
func TestQuenchNeedsFewEvaluations(t *testing.T) {
	for _, notation := range []string{hexadecane, muscone} {
		f, taken := snapshots(t, notation, 25)
		q := minimize.NewQuencher(f, minimize.Settings{})
		var evaluations []int
		for _, x := range taken {
			r, err := q.Quench(context.Background(), x)
			require.NoError(t, err)
			require.LessOrEqual(t, r.GradientRMS, 1e-6)
			require.GreaterOrEqual(t, r.LowestEigenvalue, -1e-5)
			require.Less(t, r.Hessians, 12)
			evaluations = append(evaluations, r.Evaluations)
		}
		slices.Sort(evaluations)
		require.LessOrEqual(t, evaluations[len(evaluations)/2], 250, notation)
	}
}

func BenchmarkQuench(b *testing.B) {
	for name, notation := range map[string]string{"hexadecane": hexadecane, "muscone": muscone} {
		f, taken := snapshots(b, notation, 50)
		q := minimize.NewQuencher(f, minimize.Settings{})
		for stage, run := range map[string]func(context.Context, []float64) (minimize.Result, error){"crude": q.Crude, "whole": q.Quench} {
			b.Run(name+"/"+stage, func(b *testing.B) {
				evaluations, hessians, k := 0, 0, 0
				b.ReportAllocs()
				for b.Loop() {
					r, err := run(context.Background(), taken[k%len(taken)])
					require.NoError(b, err)
					evaluations += r.Evaluations
					hessians += r.Hessians
					k++
				}
				b.ReportMetric(float64(evaluations)/float64(k), "evaluations/op")
				b.ReportMetric(float64(hessians)/float64(k), "hessians/op")
			})
		}
	}
}

// Every minimum keeps its place under a rigid motion of the snapshot: the quench meets the same energies.
func TestQuenchIsInvariant(t *testing.T) {
	f, taken := snapshots(t, "CC(C)CO", 3)
	for _, x := range taken {
		reference, err := minimize.Quench(context.Background(), f, x, minimize.Settings{})
		require.NoError(t, err)
		moved := make([]float64, len(x))
		s, c := math.Sincos(1.1)
		for i := range len(x) / 3 {
			a, b, z := x[3*i], x[3*i+1], x[3*i+2]
			moved[3*i], moved[3*i+1], moved[3*i+2] = z+30, c*a-s*b-7, s*a+c*b
		}
		r, err := minimize.Quench(context.Background(), f, moved, minimize.Settings{})
		require.NoError(t, err)
		require.InDelta(t, reference.Energy, r.Energy, 1e-8)
		require.InEpsilon(t, reference.LowestEigenvalue, r.LowestEigenvalue, 1e-4)
		for i := range len(x) / 3 {
			require.InDelta(t, molecule.Geometry(reference.X).Distance(0, i), molecule.Geometry(r.X).Distance(0, i), 1e-5)
		}
	}
}
