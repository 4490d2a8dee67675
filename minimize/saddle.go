package minimize

import (
	"context"
	"errors"
	"math"

	"gonum.org/v1/gonum/floats"
	"gonum.org/v1/gonum/mat"
)

const (
	// saddleRMS is the rms gradient below which a geometry with a negative eigenvalue is taken to be near a saddle, kcal/mol/Å.
	saddleRMS = 1e-2
	// push is how far the atom moves that moves farthest when a saddle is left, Å.
	push = 0.2
)

// leaveSaddle takes the best point out of a region where the Hessian, which has been diagonalised, has a negative eigenvalue and the
// gradient is small: the geometry is pushed along the most negative mode to both sides, L-BFGS relaxes both, and the
// lower one is kept; if both are equal, as at a saddle between mirror images, the one to which the first large component of the mode
// is positive.
func (q *Quencher) leaveSaddle(ctx context.Context) error {
	mode := q.lowestMode()
	// Tight enough for what is left of the push in stiff modes to be small beside what the soft one gains.
	target := math.Sqrt(-q.newton.lowest) * push / 2
	target = max(q.settings.GradientRMS, min(target, q.settings.CrudeRMS))
	q.saddle.copyFrom(&q.at)
	for t := push / reach(mode); t*reach(mode) > push/100; t /= 4 {
		if err := q.relaxPushed(ctx, -t, mode, target); err != nil {
			return err
		}
		q.backward.copyFrom(&q.at)
		if err := q.relaxPushed(ctx, t, mode, target); err != nil {
			return err
		}
		if q.backward.energy < q.at.energy-1e-9*max(1, math.Abs(q.at.energy)) {
			q.at.copyFrom(&q.backward)
		}
		if q.at.energy < q.saddle.energy {
			q.saddles++
			return nil
		}
	}
	q.at.copyFrom(&q.saddle)
	return q.notConverged("the energy falls on no side of a saddle")
}

// relaxPushed leaves the best point where L-BFGS ends from the saddle + t·mode.
func (q *Quencher) relaxPushed(ctx context.Context, t float64, mode []float64, target float64) error {
	q.at.copyFrom(&q.saddle)
	q.tryStep(t, mode)
	if !q.trial.finite() {
		return nil
	}
	q.accept()
	if err := q.descend(ctx, target); !errors.Is(err, errStalled) {
		return err
	}
	return nil
}

// lowestMode returns the unit eigenvector of the lowest eigenvalue with the first of its large components positive.
func (q *Quencher) lowestMode() []float64 {
	mode := mat.Col(nil, 0, q.newton.eigen.RawQ())
	largest := floats.Norm(mode, math.Inf(1))
	for _, v := range mode {
		if math.Abs(v) > largest/2 {
			if v < 0 {
				floats.Scale(-1, mode)
			}
			break
		}
	}
	return mode
}
