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

// leaveSaddle takes the best point out of a region where the Hessian, which has been diagonalised, has a negative eigenvalue. On a
// slope L-BFGS goes on. Near a saddle the geometry is pushed along the most negative mode, to the side where the energy is lower;
// if both are equal, as at a saddle between mirror images, to the side where the first large component of the mode is positive.
// Then L-BFGS runs again.
func (q *Quencher) leaveSaddle(ctx context.Context) error {
	if rms := q.at.rms(); rms > saddleRMS {
		if err := q.descend(ctx, max(rms/10, saddleRMS)); !errors.Is(err, errStalled) {
			return err
		}
	}
	mode := q.lowestMode()
	tolerance := 1e-9 * max(1, math.Abs(q.at.energy))
	for t := push / reach(mode); t*reach(mode) > push/1000; t /= 2 {
		q.tryStep(-t, mode)
		backward := q.trial.energy
		q.tryStep(t, mode)
		if backward < q.trial.energy-tolerance {
			q.tryStep(-t, mode)
		}
		if q.trial.energy >= q.at.energy || !q.trial.finite() {
			continue
		}
		q.accept()
		q.saddles++
		err := q.descend(ctx, min(q.settings.CrudeRMS, max(q.at.rms()/10, q.settings.GradientRMS)))
		if errors.Is(err, errStalled) {
			return nil
		}
		return err
	}
	return q.notConverged("the energy falls on no side of a saddle")
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
