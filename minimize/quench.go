package minimize

import (
	"context"
	"errors"
	"fmt"
	"math"

	"gonum.org/v1/gonum/floats"
)

// Settings of a quench; the zero value is the default.
type Settings struct {
	GradientRMS    float64 // kcal/mol/Å, where the finish stops; 0 stands for 1e-6
	CrudeRMS       float64 // kcal/mol/Å, where the crude stage stops; 0 stands for 0.3
	MaxEvaluations int     // energy evaluations of both stages together; 0 stands for 5000 and 60 more an atom
	MaxStep        float64 // Å, the farthest that an atom moves in one step; 0 stands for 0.3
}

func (s Settings) withDefaults(atoms int) Settings {
	if s.GradientRMS == 0 {
		s.GradientRMS = 1e-6
	}
	if s.CrudeRMS == 0 {
		s.CrudeRMS = 0.3
	}
	if s.MaxEvaluations == 0 {
		s.MaxEvaluations = 5000 + 60*atoms
	}
	if s.MaxStep == 0 {
		s.MaxStep = 0.3
	}
	return s
}

// Result is the point that a quench reached.
type Result struct {
	X                []float64 // 3N coordinates in Å
	Energy           float64   // kcal/mol
	GradientRMS      float64   // kcal/mol/Å, root of the mean square of the 3N components
	Evaluations      int       // energies with or without gradient, those for finite-difference Hessians included
	Hessians         int       // exact Hessians, which are not counted above
	LowestEigenvalue float64   // kcal/mol/Å², of the Hessian at X or up to 1e-4 Å before, without translations and rotations; 0 if nothing else is left
	Saddles          int       // how often it was pushed off a saddle
}

// Quench brings x, which is left alone, to a minimum of f. See [Quencher.Quench].
func Quench(ctx context.Context, f Field, x []float64, s Settings) (Result, error) {
	return NewQuencher(f, s).Quench(ctx, x)
}

// Quencher quenches many geometries of one field in one workspace. It serves one goroutine at a time.
type Quencher struct {
	field    Field
	settings Settings
	descent  descent
	newton   newton

	// The best point so far and the one being tried.
	at, trial point
	// A saddle that is being left, and the point reached on one side of it.
	saddle, backward point
	evaluations      int
	hessians         int
	saddles          int
}

// point is a geometry with its energy and gradient.
type point struct {
	x, grad []float64
	energy  float64
}

func newPoint(n int) point { return point{x: make([]float64, n), grad: make([]float64, n)} }

func (p *point) rms() float64 { return floats.Norm(p.grad, 2) / math.Sqrt(float64(len(p.grad))) }

func (p *point) finite() bool {
	return isFinite(p.energy) && isFinite(floats.Norm(p.grad, 1))
}

func (p *point) copyFrom(o *point) {
	copy(p.x, o.x)
	copy(p.grad, o.grad)
	p.energy = o.energy
}

func isFinite(v float64) bool { return !math.IsNaN(v) && !math.IsInf(v, 0) }

// NewQuencher returns a Quencher for f.
func NewQuencher(f Field, s Settings) *Quencher {
	n := 3 * f.Atoms()
	return &Quencher{
		field: f, settings: s.withDefaults(f.Atoms()),
		at: newPoint(n), trial: newPoint(n), saddle: newPoint(n), backward: newPoint(n), newton: newNewton(n),
	}
}

// Quench runs both stages. The point it returns without error is a minimum: its rms gradient is at or below Settings.GradientRMS
// and no eigenvalue of its Hessian is below -1e-5 kcal/mol/Å². It returns a [DivergedError], a [NotConvergedError] (then the
// result holds the best point found), [ErrLength], or the error of ctx.
func (q *Quencher) Quench(ctx context.Context, x []float64) (Result, error) {
	crude, err := q.Crude(ctx, x)
	if err != nil {
		return crude, err
	}
	return q.finish(ctx)
}

// Crude runs the L-BFGS stage alone, down to Settings.CrudeRMS. The result may be handed to [Quencher.Finish] or dropped. If line
// searches fail on the way its GradientRMS is higher, which is no error: Newton's method may still go on from there.
func (q *Quencher) Crude(ctx context.Context, x []float64) (Result, error) {
	q.evaluations, q.hessians, q.saddles, q.newton.lowest = 0, 0, 0, 0
	if err := q.start(x); err != nil {
		return Result{}, err
	}
	err := q.descend(ctx, q.settings.CrudeRMS)
	if errors.Is(err, errStalled) {
		err = nil
	}
	return q.result(), err
}

// Finish takes the result of [Quencher.Crude] to the minimum and counts on from it.
func (q *Quencher) Finish(ctx context.Context, crude Result) (Result, error) {
	q.evaluations, q.hessians, q.saddles = crude.Evaluations, crude.Hessians, crude.Saddles
	q.newton.lowest = 0
	if err := q.start(crude.X); err != nil {
		return crude, err
	}
	return q.finish(ctx)
}

func (q *Quencher) start(x []float64) error {
	if len(x) != len(q.at.x) || len(x) == 0 {
		return fmt.Errorf("%w: %d coordinates for %d atoms", ErrLength, len(x), q.field.Atoms())
	}
	for i, v := range x {
		if !isFinite(v) {
			return &DivergedError{Energy: math.NaN(), Atom: i / 3}
		}
	}
	copy(q.at.x, x)
	q.evaluate(&q.at)
	for i, v := range q.at.grad {
		if !isFinite(v) {
			return &DivergedError{Energy: q.at.energy, Atom: i / 3}
		}
	}
	if !isFinite(q.at.energy) {
		return &DivergedError{Energy: q.at.energy, Atom: -1}
	}
	return nil
}

func (q *Quencher) evaluate(p *point) {
	q.evaluations++
	p.energy = q.field.Energy(p.x, p.grad)
}

// tryStep evaluates the trial point at x + t·step.
func (q *Quencher) tryStep(t float64, step []float64) {
	floats.AddScaledTo(q.trial.x, q.at.x, t, step)
	q.evaluate(&q.trial)
}

// accept makes the trial point the best one.
func (q *Quencher) accept() { q.at, q.trial = q.trial, q.at }

// mayGoOn returns the error of the context or of a spent budget.
func (q *Quencher) mayGoOn(ctx context.Context) error {
	if err := ctx.Err(); err != nil {
		return err
	}
	if q.evaluations >= q.settings.MaxEvaluations {
		return q.notConverged("the budget was spent")
	}
	return nil
}

func (q *Quencher) notConverged(reason string) error {
	return &NotConvergedError{Reason: reason, Evaluations: q.evaluations, GradientRMS: q.at.rms()}
}

func (q *Quencher) result() Result {
	return Result{
		X: append([]float64(nil), q.at.x...), Energy: q.at.energy, GradientRMS: q.at.rms(),
		Evaluations: q.evaluations, Hessians: q.hessians, Saddles: q.saddles, LowestEigenvalue: q.newton.lowest,
	}
}

// reach returns how far the atom moves that step moves farthest, Å.
func reach(step []float64) float64 {
	farthest := 0.0
	for i := 0; i < len(step); i += 3 {
		if d := floats.Norm(step[i:i+3], 2); !(d <= farthest) {
			farthest = d
		}
	}
	return farthest
}
