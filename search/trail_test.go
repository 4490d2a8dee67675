package search

import (
	"math"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/dedupe"
	"tarn/minimize"
	"tarn/molecule"
)

func newWalker(t *testing.T, p *Problem) *walker {
	t.Helper()
	r := &run{problem: p, settings: Settings{}.WithDefaults(p.Cluster()), index: dedupe.NewIndex(p.Symmetry, p.tolerance()), rough: dedupe.NewIndex(p.Symmetry, p.roughTolerance())}
	return &walker{
		problem: p, rng: walkStream(1, 0, 0), quencher: minimize.NewQuencher(p.Field, minimize.Settings{CrudeRMS: crudeRMS}),
		quota: 100, ceiling: math.Inf(1), rough: r.rough, own: dedupe.NewIndex(p.Symmetry, p.roughTolerance()),
		notice: r.notice, trail: trail{start: -1},
	}
}

func problemOf(t *testing.T, text string) *Problem {
	t.Helper()
	p, err := NewMoleculeProblem(t.Context(), parse(t, text), "", nil, 1)
	require.NoError(t, err)
	return p
}

// A snapshot of the mirror image is a minimum of the enantiomer: it is reported with its atom and never kept.
func TestInvertedCentresAreReported(t *testing.T) {
	p := problemOf(t, "CC[C@H](C)O")
	w := newWalker(t, p)
	mirrored := p.Start[0].Clone()
	for i := 0; i < len(mirrored); i += 3 {
		mirrored[i] = -mirrored[i]
	}
	o, err := w.quench(t.Context(), mirrored, 300)
	require.NoError(t, err)
	require.Equal(t, inverted, o.fate)
	r := &run{problem: p, settings: Settings{}.WithDefaults(false), index: dedupe.NewIndex(p.Symmetry, p.tolerance()), rough: w.rough}
	r.merge(&w.trail)
	require.Empty(t, r.checkpoint.Minima)
	require.Equal(t, 1, r.checkpoint.Inverted)
	require.Equal(t, 1, r.checkpoint.InvertedWalks)
	require.Equal(t, []int{3}, r.checkpoint.InvertedAtoms)
}

// Atoms that have lost their bond, and atoms on top of each other, end a quench without a minimum.
func TestBrokenAndFailedSnapshots(t *testing.T) {
	p := problemOf(t, "CCO")
	torn := p.Start[0].Clone()
	torn[0] += 4
	require.ErrorContains(t, p.check(torn), "the bond between atoms 1 and 2 is gone")
	w := newWalker(t, p)
	nowhere := p.Start[0].Clone()
	nowhere[4] = math.NaN()
	o, err := w.quench(t.Context(), nowhere, 300)
	require.NoError(t, err)
	require.Equal(t, failed, o.fate)
	lj, err := NewClusterProblem(3)
	require.NoError(t, err)
	require.ErrorContains(t, lj.check([]float64{0, 0, 0, 1.1, 0, 0, 30, 0, 0}), "atom 3 has left the cluster")
}

// Draws: the first hit of a minimum in a walk, without the minimum that the walk started from. Hits: all.
func TestDrawsAndHits(t *testing.T) {
	p := problemOf(t, "CCCC")
	r := &run{problem: p, settings: Settings{}.WithDefaults(false), index: dedupe.NewIndex(p.Symmetry, p.tolerance()), rough: dedupe.NewIndex(p.Symmetry, p.roughTolerance())}
	ends := map[int][]float64{}
	for k, angle := range []float64{0, 2 * math.Pi / 3} { // anti, gauche
		x := p.Start[0].Clone()
		torsion := &p.moves.Torsions[0]
		now := x.Torsion(torsion.Ends[0], torsion.A, torsion.B, torsion.Ends[1])
		torsion.Rotate(x, math.Copysign(math.Pi-math.Abs(now)+angle, 1))
		q, err := minimize.Quench(t.Context(), p.Field, x, minimize.Settings{})
		require.NoError(t, err)
		ends[k] = q.X
	}
	walk := func(start int, visits ...int) *trail {
		w := trail{start: start}
		for _, k := range visits {
			w.outcomes = append(w.outcomes, outcome{x: ends[k], energy: p.Field.Energy(ends[k], nil)})
		}
		return &w
	}
	r.merge(walk(-1, 0, 0, 1, 0))
	require.Len(t, r.checkpoint.Minima, 2)
	r.merge(walk(0, 0, 1, 1, 0))
	r.merge(walk(1, 1, 1))
	require.Equal(t, []int{5, 5}, []int{r.checkpoint.Minima[0].Hits, r.checkpoint.Minima[1].Hits})
	require.Equal(t, []int{1, 2}, []int{r.checkpoint.Minima[0].Draws, r.checkpoint.Minima[1].Draws})
}

// A geometry that a known minimum is near is counted for it without a Hessian; most of the time, for one in ten is proved.
func TestRecognise(t *testing.T) {
	p := problemOf(t, "CCCCCC")
	w := newWalker(t, p)
	w.library = []Minimum{{X: p.Start[0], Energy: p.Field.Energy(p.Start[0], nil)}}
	w.rough.Add(w.library[0].X, w.library[0].Energy)
	shaken := make(molecule.Geometry, len(p.Start[0]))
	recognised := 0
	for range 60 {
		for i := range shaken {
			shaken[i] = p.Start[0][i] + 0.02*w.rng.NormFloat64()
		}
		o, err := w.quench(t.Context(), shaken, 300)
		require.NoError(t, err)
		if o.fate == known {
			recognised++
			require.Equal(t, 0, o.id)
		} else {
			require.Equal(t, kept, o.fate)
		}
	}
	require.Greater(t, recognised, 40)
	require.Less(t, recognised, 60)
}
