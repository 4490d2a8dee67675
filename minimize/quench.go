package minimize

import "context"

// Settings of a quench; the zero value is the default.
type Settings struct {
	GradientRMS    float64 // kcal/mol/Å, where the finish stops; 0 stands for 1e-6
	CrudeRMS       float64 // kcal/mol/Å, where the crude stage stops; 0 stands for 0.1
	MaxEvaluations int     // energy evaluations of both stages together; 0 stands for 5000 + 60 an atom
	MaxStep        float64 // Å, the farthest an atom moves in one step; 0 stands for 0.3
}

// Result is the point that a quench reached.
type Result struct {
	X                []float64 // 3N coordinates in Å
	Energy           float64   // kcal/mol
	GradientRMS      float64   // kcal/mol/Å, root of the mean square of the 3N components
	Evaluations      int       // energies with or without gradient, those for finite-difference Hessians included
	Hessians         int       // exact Hessians, which are not counted above
	LowestEigenvalue float64   // kcal/mol/Å², of the Hessian without translations and rotations; 0 if nothing else is left
	Saddles          int       // how many saddles it was pushed off
}

// Quench brings x, which is left alone, to a minimum of f. See [Quencher.Quench].
func Quench(ctx context.Context, f Field, x []float64, s Settings) (Result, error) {
	return NewQuencher(f, s).Quench(ctx, x)
}

// Quencher quenches many geometries of one field without allocating its workspace again. It serves one goroutine at a time.
type Quencher struct {
	field    Field
	settings Settings
}

// NewQuencher returns a Quencher for f.
func NewQuencher(f Field, s Settings) *Quencher { return &Quencher{field: f, settings: s} }

// Quench runs both stages. The point it returns without error is a minimum: rms gradient at or below Settings.GradientRMS, no
// eigenvalue of the Hessian below zero by more than 1e-5 kcal/mol/Å². It returns a [DivergedError], a [NotConvergedError] (then
// the result holds the best point found), [ErrLength], or the error of ctx.
func (q *Quencher) Quench(ctx context.Context, x []float64) (Result, error) {
	crude, err := q.Crude(ctx, x)
	if err != nil {
		return crude, err
	}
	return q.Finish(ctx, crude)
}

// Crude runs the L-BFGS stage alone, down to Settings.CrudeRMS. The result may be handed to [Quencher.Finish] or dropped.
func (q *Quencher) Crude(ctx context.Context, x []float64) (Result, error) {
	return Result{}, ErrNotConverged
}

// Finish takes the result of [Quencher.Crude] to the minimum and counts on from it.
func (q *Quencher) Finish(ctx context.Context, crude Result) (Result, error) {
	return Result{}, ErrNotConverged
}
