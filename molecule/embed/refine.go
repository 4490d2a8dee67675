package embed

import (
	"context"

	"gonum.org/v1/gonum/optimize"

	"tarn/molecule"
)

// stage is one minimisation of the error function.
type stage struct {
	dimensions int
	centers    float64 // weight of the volumes of stereocentres
	planes     float64 // weight of the volumes of planar groups
	fourth     float64 // weight of the squared fourth coordinate, Å⁻²
	iterations int
}

// stages: find the right neighbourhoods in four dimensions, press the molecule flat into three, and settle. Planes come last:
// they would hold a double bond on the wrong side.
var stages = []stage{
	{dimensions: 4, centers: 1, fourth: 0.02, iterations: 250},
	{dimensions: 4, centers: 1, planes: 0.1, fourth: 1, iterations: 150},
	{dimensions: 3, centers: 1, planes: 1, iterations: 300},
}

// settled is the gradient (error per Å) below which a stage has converged.
const settled = 1e-3

// refine minimises the error function from 4N coordinates and returns the geometry in three dimensions with its error.
func (d *draw) refine(ctx context.Context, x []float64) (g molecule.Geometry, violation float64, err error) {
	for _, s := range stages {
		if s.dimensions == 3 {
			x = dropFourth(x)
		}
		if x, violation, err = d.minimise(ctx, s, x); err != nil {
			return nil, 0, err
		}
	}
	return x, violation, nil
}

func dropFourth(x []float64) []float64 {
	flat := make([]float64, 0, len(x)/4*3)
	for i := 0; i < len(x); i += 4 {
		flat = append(flat, x[i:i+3]...)
	}
	return flat
}

func (d *draw) minimise(ctx context.Context, s stage, x []float64) (at []float64, value float64, err error) {
	e := errorFunction{draw: d, stage: s, last: make([]float64, len(x)), grad: make([]float64, len(x))}
	problem := optimize.Problem{
		Func: e.value,
		Grad: e.gradient,
		Status: func() (optimize.Status, error) {
			if err := ctx.Err(); err != nil {
				return optimize.Failure, err
			}
			return optimize.NotTerminated, nil
		},
	}
	settings := &optimize.Settings{
		GradientThreshold: settled,
		MajorIterations:   s.iterations,
		Converger:         &optimize.FunctionConverge{Absolute: 1e-6, Relative: 1e-3, Iterations: 10},
	}
	result, err := optimize.Minimize(problem, x, settings, &optimize.LBFGS{})
	if ctx.Err() != nil {
		return nil, 0, ctx.Err()
	}
	if result == nil {
		return nil, 0, err
	}
	return result.X, result.F, nil // a line search that stalls has still lowered the error; the checks judge what it reached
}
