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
	// maxHessians bounds the Hessians of one quench; ten are many.
	maxHessians = 100
	// noise is the relative rounding error of an energy: smaller differences say nothing.
	noise = 1e-12
)

// newton is the workspace of the finish.
type newton struct {
	hessian       *mat.SymDense // projected, the rigid motions at the upper end of its spectrum
	motions, work [6][]float64
	internal      int // number of coordinates that are not rigid motions
	cholesky      mat.Cholesky
	eigen         mat.EigenSym
	step          *mat.VecDense
	lowest        float64
}

func newNewton(n int) newton {
	w := newton{hessian: mat.NewSymDense(max(n, 1), nil), step: mat.NewVecDense(max(n, 1), nil)}
	for k := range w.motions {
		w.motions[k], w.work[k] = make([]float64, n), make([]float64, n)
	}
	return w
}

// finish takes the best point to a minimum by Newton steps. Where the Hessian is not positive definite it leaves the region first:
// by L-BFGS while the slope is steep, else along the most negative mode.
func (q *Quencher) finish(ctx context.Context) (Result, error) {
	w := &q.newton
	for range maxHessians {
		if err := q.mayGoOn(ctx); err != nil {
			return q.result(), err
		}
		if err := q.projectedHessian(); err != nil {
			return q.result(), err
		}
		converged := q.at.rms() <= q.settings.GradientRMS
		definite := w.cholesky.Factorize(w.hessian)
		if converged || !definite {
			if !w.eigen.Factorize(w.hessian, !definite) {
				return q.result(), q.notConverged("the Hessian could not be diagonalised")
			}
			w.lowest = 0
			if w.internal > 0 {
				w.lowest = w.eigen.RawValues()[0]
			}
		}
		switch {
		case !definite && w.lowest < -flat:
			if err := q.leaveSaddle(ctx); err != nil {
				return q.result(), err
			}
			continue
		case !definite:
			w.stiffen(10*flat - w.lowest)
		}
		moved := q.newtonStep(converged)
		if converged {
			return q.result(), nil
		}
		if !moved {
			err := q.descend(ctx, max(q.at.rms()/10, q.settings.GradientRMS))
			if errors.Is(err, errStalled) {
				err = q.notConverged("neither Newton steps nor line searches lower the energy")
			}
			if err != nil {
				return q.result(), err
			}
		}
	}
	return q.result(), q.notConverged("too many Newton steps were taken")
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

// stiffen adds to the diagonal of a Hessian that is flat in some direction and factorises it again.
func (w *newton) stiffen(shift float64) {
	for i := range w.hessian.SymmetricDim() {
		w.hessian.SetSym(i, i, w.hessian.At(i, i)+shift)
	}
	w.cholesky.Factorize(w.hessian)
}

// newtonStep tries the Newton step of the factorised Hessian and says whether it moved. A step that is too long or does not lower the
// energy is tried again with a stiffer Hessian (Levenberg, Marquardt), which shortens it in the soft modes, where the quadratic model
// fails first. A polishing step is taken whole and only if it lowers the gradient.
func (q *Quencher) newtonStep(polish bool) bool {
	w := &q.newton
	step := w.step.RawVector().Data
	gradient := mat.NewVecDense(len(step), q.at.grad)
	tolerance := noise * max(1, math.Abs(q.at.energy))
	for radius, tries := q.settings.MaxStep, 0; tries < 10; tries++ {
		if err := w.cholesky.SolveVecTo(w.step, gradient); err != nil && !errors.As(err, new(mat.Condition)) {
			return false
		}
		floats.Scale(-1, step)
		if length := reach(step); length <= radius {
			slope := floats.Dot(step, q.at.grad)
			q.tryStep(1, step)
			lower := q.trial.energy <= q.at.energy+1e-4*slope
			if polish || -slope < tolerance {
				lower = q.trial.rms() < q.at.rms()
			}
			if lower && q.trial.finite() {
				q.accept()
				return true
			}
			radius = length / 4
		}
		if polish {
			return false
		}
		w.stiffen(floats.Norm(q.at.grad, 2) / radius)
	}
	return false
}
