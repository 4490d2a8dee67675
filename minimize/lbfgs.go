package minimize

import (
	"context"
	"errors"

	"gonum.org/v1/gonum/floats"
	"gonum.org/v1/gonum/optimize"
)

var (
	// errStalled says that line searches fail although the gradient is not yet small enough.
	errStalled = errors.New("line searches fail")
	// errPaused says that a metric has been used long enough.
	errPaused = errors.New("the metric is worn out")
)

// restarts is how often L-BFGS forgets its history and goes on with a shorter step before it is given up.
const restarts = 4

// descent drives gonum's L-BFGS and line search itself instead of through optimize.Minimize, which starts three goroutines and
// sends every evaluation over channels: that costs about a fifth of an evaluation at 50 atoms, and a panic there could not be
// caught by the caller of the force field.
type descent struct {
	limited limitedSteps
	search  optimize.LinesearchMethod
	loc     optimize.Location
}

// limitedSteps shortens the first step along each direction so that no atom moves farther than the limit.
type limitedSteps struct {
	lbfgs  *optimize.LBFGS
	limit  float64
	metric *metric   // nil if the directions are Cartesian
	dx     []float64 // workspace
}

func (l *limitedSteps) InitDirection(loc *optimize.Location, dir []float64) float64 {
	step := l.lbfgs.InitDirection(loc, dir)
	if l.metric != nil {
		step = 1
	}
	return l.shorten(step, loc, dir)
}

func (l *limitedSteps) NextDirection(loc *optimize.Location, dir []float64) float64 {
	return l.shorten(l.lbfgs.NextDirection(loc, dir), loc, dir)
}

func (l *limitedSteps) shorten(step float64, loc *optimize.Location, dir []float64) float64 {
	length := l.reach(dir)
	if !isFinite(length) { // the history has become useless
		copy(dir, loc.Gradient)
		floats.Scale(-1, dir)
		length = l.reach(dir)
	}
	return min(step, l.limit/length)
}

func (l *limitedSteps) reach(dir []float64) float64 {
	if l.metric == nil {
		return reach(dir)
	}
	l.metric.displacement(l.dx, dir)
	return reach(l.dx)
}

// descend follows L-BFGS from the best point until its rms gradient is at or below target. It returns errStalled, the error of ctx, or
// a NotConvergedError if the budget is spent.
func (q *Quencher) descend(ctx context.Context, target float64) error {
	limit := q.settings.MaxStep
	for range restarts {
		if q.at.rms() <= target {
			return nil
		}
		err := q.descendOnce(ctx, target, limit, nil)
		if !errors.Is(err, errStalled) {
			return err
		}
		limit /= 4
	}
	return errStalled
}

// descendOnce returns errStalled if a line search fails or meets an energy that is not finite. With a metric it goes in its
// coordinates, and returns errPaused after useOfMetric evaluations.
func (q *Quencher) descendOnce(ctx context.Context, target, limit float64, m *metric) error {
	d := &q.descent
	// A new LBFGS: gonum does not clear all of the history of the last run.
	d.limited = limitedSteps{lbfgs: &optimize.LBFGS{Store: 15}, limit: limit, metric: m, dx: q.newton.step.RawVector().Data}
	d.search = optimize.LinesearchMethod{NextDirectioner: &d.limited, Linesearcher: &optimize.MoreThuente{}}
	trial := &q.trial
	trial.copyFrom(&q.at)
	d.loc = optimize.Location{X: trial.x, F: trial.energy, Gradient: trial.grad}
	if m != nil {
		m.moveOrigin(trial.x)
		m.gradient(m.grad, trial.grad)
		d.loc.X, d.loc.Gradient = m.y, m.grad
	}
	end := q.evaluations + useOfMetric
	operation, err := d.search.Init(&d.loc)
	for err == nil {
		switch operation {
		case optimize.MajorIteration:
			if trial.rms() <= target {
				q.at.copyFrom(trial)
				return nil
			}
		default:
			if err := q.mayGoOn(ctx); err != nil {
				return err
			}
			if m != nil && q.evaluations >= end {
				return errPaused
			}
			if m != nil {
				m.position(trial.x, m.y)
			}
			q.evaluate(trial)
			if !trial.finite() {
				return errStalled
			}
			if m != nil {
				m.gradient(m.grad, trial.grad)
			}
			if trial.energy < q.at.energy {
				q.at.copyFrom(trial)
			}
			d.loc.F = trial.energy
		}
		operation, err = d.search.Iterate(&d.loc)
	}
	return errStalled
}
