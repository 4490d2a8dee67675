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
	// difference is the displacement for finite-difference Hessians, Å.
	difference = 1e-4
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
		if err := q.takeHessian(); err != nil {
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

// takeHessian fills the workspace with the projected Hessian at the best point.
func (q *Quencher) takeHessian() error {
	w := &q.newton
	n := len(q.at.x)
	h := w.hessian.RawSymmetric().Data
	if f, ok := q.field.(Hessian); ok {
		f.Hessian(q.at.x, h)
		q.hessians++
	} else {
		q.differenceHessian(h)
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

// differenceHessian takes the Hessian at the best point by central differences of gradients.
func (q *Quencher) differenceHessian(h []float64) {
	n := len(q.at.x)
	copy(q.trial.x, q.at.x)
	forward := q.newton.step.RawVector().Data
	for j := range n {
		q.trial.x[j] = q.at.x[j] + difference
		q.evaluate(&q.trial)
		copy(forward, q.trial.grad)
		q.trial.x[j] = q.at.x[j] - difference
		q.evaluate(&q.trial)
		q.trial.x[j] = q.at.x[j]
		floats.SubTo(h[j*n:(j+1)*n], forward, q.trial.grad)
	}
	for i := range n {
		for j := range i + 1 {
			v := (h[i*n+j] + h[j*n+i]) / (4 * difference)
			h[i*n+j], h[j*n+i] = v, v
		}
	}
}

// stiffen adds to the diagonal of a Hessian that is flat in some direction and factorises it again.
func (w *newton) stiffen(shift float64) {
	for i := range w.hessian.SymmetricDim() {
		w.hessian.SetSym(i, i, w.hessian.At(i, i)+shift)
	}
	w.cholesky.Factorize(w.hessian)
}

// newtonStep tries the Newton step of the factorised Hessian, shortened until it lowers the energy, and says whether it moved. A
// polishing step is taken whole and only if it lowers the gradient.
func (q *Quencher) newtonStep(polish bool) bool {
	w := &q.newton
	step := w.step.RawVector().Data
	if err := w.cholesky.SolveVecTo(w.step, mat.NewVecDense(len(step), q.at.grad)); err != nil {
		if _, ill := err.(mat.Condition); !ill {
			return false
		}
	}
	floats.Scale(-1, step)
	slope := floats.Dot(step, q.at.grad)
	t := 1.0
	if length := reach(step); length > q.settings.MaxStep {
		t = q.settings.MaxStep / length
	}
	tolerance := noise * max(1, math.Abs(q.at.energy))
	for range 6 {
		q.tryStep(t, step)
		lower := q.trial.energy <= q.at.energy+1e-4*t*slope
		if polish || -t*slope < tolerance {
			lower = q.trial.rms() < q.at.rms()
		}
		if lower && q.trial.finite() {
			q.accept()
			return true
		}
		if polish {
			return false
		}
		t /= 4
	}
	return false
}
