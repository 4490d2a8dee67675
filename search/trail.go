package search

import (
	"context"
	"errors"
	"math/rand/v2"

	"tarn/dedupe"
	"tarn/minimize"
	"tarn/molecule"
)

// fate is what became of a quench.
type fate int

const (
	kept     fate = iota // a minimum of the molecule
	known                // recognised after the crude stage as a minimum of the library
	above                // dropped after the crude stage, far above the window
	inverted             // a minimum of another stereoisomer
	broken               // bonds are gone
	failed               // did not converge
)

// outcome is the end of one quench.
type outcome struct {
	fate        fate
	id          int // of a known minimum
	x           []float64
	energy      float64
	gradientRMS float64
	eigenvalue  float64
}

// trail is what a walk leaves behind. It is all that the merge sees, so the order of walks decides and not that of their work.
type trail struct {
	kind        walkKind
	start       int // index of the minimum that the walk started from, -1 if it was built anew
	outcomes    []outcome
	stages      []Stage
	evaluations int
	inverted    []int // atoms at which a centre inverted
	jumps       []int // minima that the walk jumped to; like the start they are no news when quenches end there
}

// walker is the state that all kinds of walk share: where snapshots are quenched and the outcomes noted.
type walker struct {
	problem  *Problem
	rng      *rand.Rand
	quencher *minimize.Quencher
	quota    int     // quenches that the walk may still do
	ceiling  float64 // crude energies above this are dropped
	library  []Minimum
	rough    *dedupe.Index // of the library, with wide tolerances; only read while walks run
	own      *dedupe.Index // of what the walk itself has found, with wide tolerances
	ownAt    []int         // the outcomes that own holds
	reheat   int           // fruitless rounds so far
	wide     bool          // the walk is to roam rather than to go down
	notice   func(temperatureK, energy float64, evaluations int) bool
	trail    trail
}

const (
	// crudeRMS is the gradient at which the first stage of a quench ends, kcal/mol/Å; from there the energy falls by less than crudeMargin.
	crudeRMS    = 0.01
	crudeMargin = 1.0 // kcal/mol
	// proofShare of those that look known are finished all the same, so that a minimum hidden beside a known one is found.
	proofShare = 0.1
)

// errSpent ends a walk whose quota or time is used up.
var errSpent = errors.New("the walk is at its end")

// quench brings a snapshot to its minimum and notes the outcome. It returns errSpent when the walk has to end after this quench, or the
// error of ctx.
func (w *walker) quench(ctx context.Context, x []float64, temperatureK float64) (outcome, error) {
	w.quota--
	result, err := w.quencher.Crude(ctx, x)
	o := outcome{fate: failed, x: result.X, energy: result.Energy}
	switch {
	case err == nil && result.Energy > w.ceiling:
		o.fate = above
	case err == nil && w.recognise(&o):
	case err == nil:
		result, err = w.quencher.Finish(ctx, result)
		if err == nil {
			o = outcome{x: result.X, energy: result.Energy, gradientRMS: result.GradientRMS, eigenvalue: result.LowestEigenvalue}
			if o.fate = w.judge(result.X); o.fate == kept {
				w.own.Add(o.x, o.energy)
				w.ownAt = append(w.ownAt, len(w.trail.outcomes))
			}
		}
	}
	if ctx.Err() != nil {
		return o, ctx.Err()
	}
	w.trail.evaluations += result.Evaluations
	w.trail.outcomes = append(w.trail.outcomes, o)
	if goOn := w.notice(temperatureK, o.energy, result.Evaluations); !goOn || w.quota <= 0 {
		return o, errSpent
	}
	return o, nil
}

// jump picks a minimum of the library for a walk to go on from, if accepts lets it. It returns nil if there is none.
func (w *walker) jump(accepts func(energy float64) bool) *Minimum {
	if len(w.library) == 0 {
		return nil
	}
	id := w.rng.IntN(len(w.library))
	if m := &w.library[id]; accepts(m.Energy) {
		w.trail.jumps = append(w.trail.jumps, id)
		return m
	}
	return nil
}

// recognise takes a crude outcome for the minimum that it is close to, of the library or of the walk itself.
func (w *walker) recognise(o *outcome) bool {
	if w.rng.Float64() < proofShare {
		return false
	}
	if id, ok := w.rough.Find(o.x, o.energy); ok {
		m := &w.library[id]
		*o = outcome{fate: known, id: id, x: m.X, energy: m.Energy}
		return true
	}
	if at, ok := w.own.Find(o.x, o.energy); ok {
		*o = w.trail.outcomes[w.ownAt[at]]
		return true
	}
	return false
}

// usable tells whether a walk can go on from an outcome.
func (o *outcome) usable() bool { return o.fate == kept || o.fate == known || o.fate == above }

func (w *walker) judge(x []float64) fate {
	err := w.problem.check(x)
	var stereo *molecule.StereoError
	switch {
	case err == nil:
		return kept
	case errors.As(err, &stereo):
		w.trail.inverted = append(w.trail.inverted, stereo.Atom)
		return inverted
	}
	return broken
}

// energy evaluates and counts.
func (w *walker) energy(x []float64) float64 {
	w.trail.evaluations++
	return w.problem.Field.Energy(x, nil)
}
