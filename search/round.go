package search

import (
	"context"
	"errors"
	"math"

	"golang.org/x/sync/errgroup"
	"gonum.org/v1/gonum/floats"

	"tarn/dedupe"
	"tarn/minimize"
	"tarn/molecule/embed"
	"tarn/search/moves"
)

// round runs one batch of walks and takes their trails into the library.
func (r *run) round(ctx context.Context) error {
	plans := r.plan()
	trails := make([]trail, len(plans))
	ceiling := math.Inf(1)
	if len(r.checkpoint.Minima) > 0 {
		ceiling = r.lowest() + r.settings.WindowKcal + crudeMargin
	}
	group, walking := errgroup.WithContext(ctx)
	group.SetLimit(r.settings.Workers)
	for i, pl := range plans {
		group.Go(func() (err error) {
			trails[i], err = r.walk(walking, pl, ceiling)
			return err
		})
	}
	if err := group.Wait(); err != nil {
		return err
	}
	before := len(r.checkpoint.Minima)
	for i := range trails {
		r.merge(&trails[i])
	}
	r.noteStages(trails)
	return r.closeRound(ctx, before)
}

// walk runs one walk from its start to the end of its quota.
func (r *run) walk(ctx context.Context, pl plan, ceiling float64) (trail, error) {
	w := &walker{
		problem:  r.problem,
		rng:      walkStream(r.settings.Seed, r.checkpoint.Round, pl.number),
		quencher: minimize.NewQuencher(r.problem.Field, minimize.Settings{CrudeRMS: crudeRMS}),
		quota:    pl.quota,
		ceiling:  ceiling,
		library:  r.checkpoint.Minima,
		rough:    r.rough,
		own:      dedupe.NewIndex(r.problem.Symmetry, r.problem.roughTolerance()),
		reheat:   r.checkpoint.Fruitless,
		wide:     pl.wide,
		notice:   r.notice,
		trail:    trail{kind: pl.kind, start: pl.start},
	}
	if pl.kind == scatter {
		err := w.scatterWalk(ctx)
		if errors.Is(err, errSpent) {
			err = nil
		}
		return w.trail, err
	}
	x, energy, err := w.begin(ctx, r, pl)
	if err == nil {
		switch pl.kind {
		case overMinima:
			err = w.minimaWalk(ctx, x, energy)
		case thermal:
			err = w.annealWalk(ctx, x)
		case trajectory:
			err = w.dynamicsWalk(ctx, x)
		}
	}
	if errors.Is(err, errSpent) {
		err = nil
	}
	return w.trail, err
}

// scatterWalk quenches one random cluster after the other, from pressed to airy ones: some minima are reached from dense starts only, others
// from loose ones.
func (w *walker) scatterWalk(ctx context.Context) error {
	for {
		x := moves.RandomCluster(w.problem.Atoms(), w.rng)
		floats.Scale(0.6+0.8*w.rng.Float64(), x)
		if _, err := w.quench(ctx, x, 0); err != nil {
			return err
		}
	}
}

// begin returns the geometry that a walk starts from: a known minimum, the start of the problem, or one built anew and quenched. Building
// may need several tries.
func (w *walker) begin(ctx context.Context, r *run, pl plan) (x []float64, energy float64, err error) {
	if pl.start >= 0 {
		m := &r.checkpoint.Minima[pl.start]
		return m.X, m.Energy, nil
	}
	p := w.problem
	for try := 0; ; try++ {
		switch {
		case p.Cluster():
			x = moves.RandomCluster(p.Atoms(), w.rng)
		case r.checkpoint.Round == 0 && pl.number < len(p.Start) && try == 0:
			x = p.Start[pl.number]
		default:
			drawn, err := p.embedder.Draw(ctx, w.rng)
			if errors.Is(err, embed.ErrNoGeometry) {
				drawn, err = p.Start[0], nil
			}
			if err != nil {
				return nil, 0, err
			}
			x = drawn
		}
		o, err := w.quench(ctx, x, 0)
		if err != nil {
			return nil, 0, err
		}
		if o.usable() {
			return o.x, o.energy, nil
		}
	}
}
