package minimize

import (
	"context"
	"errors"
	"math"

	"gonum.org/v1/gonum/floats"
	"gonum.org/v1/gonum/mat"
)

const (
	// flat is the magnitude below which an eigenvalue of the Hessian counts as zero, kcal/mol/Å². A hydrogen atom in such a mode
	// has 0.3 cm⁻¹.
	flat = 1e-5
	// maxHessians bounds the Hessians of one quench; four or five are usual.
	maxHessians = 100
	// noise is the relative rounding error of an energy: smaller differences say nothing.
	noise = 1e-12
	// trust is the reach of a Newton step within which the surface is taken to be quadratic, Å. With 0.2 it takes twice as many
	// Hessians as with 0.002 and saves hardly any evaluations. Below metricRMS only soft modes are left, and softTrust holds.
	trust, softTrust = 0.002, 0.2
	// still is the reach of a Newton step, Å, after which the Hessian need not be taken again to know that there is no negative
	// eigenvalue, provided that the lowest is above firm, kcal/mol/Å².
	still, firm = 1e-4, 1e-2
	// softest is the curvature that the softest modes get in a metric, kcal/mol/Å²: torsions, whose curvature changes as they turn,
	// must not be stretched too far. Values between 1 and 4 need the fewest evaluations for chains of 16 and 24 carbon atoms.
	softest = 1.0
	// useOfMetric is the number of evaluations after which a new Hessian is worth its cost, that of some 50 evaluations.
	useOfMetric = 60
	// metricRMS is the rms gradient from which one Newton step reaches the minimum, kcal/mol/Å.
	metricRMS = 1e-5
)

// newton is the workspace of the finish.
type newton struct {
	hessian       *mat.SymDense // projected, the rigid motions at the upper end of its spectrum
	motions, work [6][]float64
	internal      int // number of coordinates that are not rigid motions
	cholesky      mat.Cholesky
	eigen         mat.EigenSym
	step          *mat.VecDense
	lowest        float64 // eigenvalue
	reach         float64 // of the last step
	metric        metric
}

func newNewton(n int) newton {
	w := newton{hessian: mat.NewSymDense(max(n, 1), nil), step: mat.NewVecDense(max(n, 1), nil), metric: newMetric(n)}
	for k := range w.motions {
		w.motions[k], w.work[k] = make([]float64, n), make([]float64, n)
	}
	return w
}

// finish takes the best point to a minimum. Each Hessian serves once: for a Newton step where it is positive definite and the step
// is short; else, made positive definite, as the metric in which L-BFGS goes on; or, where the gradient is small, to leave a saddle.
func (q *Quencher) finish(ctx context.Context) (Result, error) {
	for range maxHessians {
		if err := q.mayGoOn(ctx); err != nil {
			return q.result(), err
		}
		if err := q.projectedHessian(); err != nil {
			return q.result(), err
		}
		done, err := q.improve(ctx)
		if err != nil || done {
			return q.result(), err
		}
	}
	return q.result(), q.notConverged("too many Hessians were taken")
}

// improve uses the Hessian at the best point and says whether that has become a minimum.
func (q *Quencher) improve(ctx context.Context) (done bool, err error) {
	w := &q.newton
	before := q.at.rms()
	definite := w.cholesky.Factorize(w.hessian)
	if !definite && before <= saddleRMS {
		if err := q.diagonalize(true); err != nil {
			return false, err
		}
		if w.lowest < -flat {
			return false, q.leaveSaddle(ctx)
		}
		definite = w.stiffen(10*flat - w.lowest)
	} else if definite && before <= metricRMS {
		if err := q.diagonalize(false); err != nil {
			return false, err
		}
	}
	if definite {
		within := trust
		if before <= metricRMS {
			within = softTrust
		}
		moved := q.newtonStep(within)
		converged := q.at.rms() <= q.settings.GradientRMS
		switch {
		case converged && before <= q.settings.GradientRMS, // moved or not
			converged && before <= metricRMS && w.reach <= still && w.lowest >= firm:
			return true, nil
		case moved:
			return false, nil
		}
	}
	return false, q.descendInMetric(ctx)
}

// descendInMetric follows L-BFGS in the metric of the Hessian, made positive definite, or in none if that does not help.
func (q *Quencher) descendInMetric(ctx context.Context) error {
	w := &q.newton
	before := q.at.rms()
	for shift := softest; !w.stiffen(shift); {
		shift *= 4
	}
	err := w.metric.set(&w.cholesky)
	if err == nil || errors.As(err, new(mat.Condition)) {
		target := max(min(metricRMS, before/10), q.settings.GradientRMS)
		err = q.descendOnce(ctx, target, q.settings.MaxStep, &w.metric)
		if !errors.Is(err, errStalled) && !errors.Is(err, errPaused) {
			return err
		}
	}
	if q.at.rms() < before {
		return nil
	}
	err = q.descend(ctx, max(before/10, q.settings.GradientRMS))
	if errors.Is(err, errStalled) {
		return q.notConverged("neither Newton steps nor line searches lower the energy")
	}
	return err
}

// diagonalize finds the lowest eigenvalue of the projected Hessian, and if asked its eigenvectors.
func (q *Quencher) diagonalize(vectors bool) error {
	w := &q.newton
	if !w.eigen.Factorize(w.hessian, vectors) {
		return q.notConverged("the Hessian could not be diagonalised")
	}
	w.lowest = 0
	if w.internal > 0 {
		w.lowest = w.eigen.RawValues()[0]
	}
	return nil
}

// projectedHessian fills the workspace with the projected Hessian at the best point.
func (q *Quencher) projectedHessian() error {
	w := &q.newton
	n := len(q.at.x)
	h := w.hessian.RawSymmetric().Data
	evaluations := takeHessian(q.field, q.at.x, h, q.trial, w.step.RawVector().Data)
	q.evaluations += evaluations
	if evaluations == 0 {
		q.hessians++
	}
	bound := 1.0
	for i := range n {
		bound = max(bound, floats.Norm(h[i*n:(i+1)*n], 1))
	}
	if !isFinite(floats.Sum(h)) {
		return q.notConverged("the Hessian is not finite")
	}
	rigid := rigidMotions(q.at.x, nil, &w.motions)
	w.internal = n - rigid
	projectOut(h, w.motions[:rigid], 2*bound, &w.work)
	return nil
}

// stiffen adds to the diagonal of the Hessian, factorises it again and says whether it is positive definite.
func (w *newton) stiffen(shift float64) bool {
	for i := range w.hessian.SymmetricDim() {
		w.hessian.SetSym(i, i, w.hessian.At(i, i)+shift)
	}
	return w.cholesky.Factorize(w.hessian)
}

// newtonStep tries the step of the factorised Hessian if its reach is within a limit, and says whether it moved. The step must lower the energy, or
// the gradient where the gain is lost in rounding.
func (q *Quencher) newtonStep(within float64) bool {
	w := &q.newton
	step := w.step.RawVector().Data
	err := w.cholesky.SolveVecTo(w.step, mat.NewVecDense(len(step), q.at.grad))
	w.reach = reach(step)
	if err != nil && !errors.As(err, new(mat.Condition)) || !(w.reach <= within) {
		return false
	}
	floats.Scale(-1, step)
	slope := floats.Dot(step, q.at.grad)
	q.tryStep(1, step)
	lower := q.trial.energy <= q.at.energy+1e-4*slope
	if -slope < noise*max(1, math.Abs(q.at.energy)) {
		lower = q.trial.rms() < q.at.rms()
	}
	if lower && q.trial.finite() {
		q.accept()
		return true
	}
	return false
}
