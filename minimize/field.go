package minimize

import "gonum.org/v1/gonum/floats"

// Field is a potential energy surface. Energy returns the energy at x in kcal/mol; x holds 3N coordinates in Å, atom-major, and
// grad, if not nil, receives dE/dx in kcal/mol/Å. Reduced units serve as well.
type Field interface {
	Atoms() int
	Energy(x, grad []float64) float64
}

// Hessian is what a [Field] offers if it has exact second derivatives: h receives the 3N×3N matrix d²E/dx², row-major, in
// kcal/mol/Å². Without it they are taken by finite differences of gradients, which costs 6N evaluations.
type Hessian interface {
	Hessian(x, h []float64)
}

// difference is the displacement for finite-difference Hessians, Å. A bond of 700 kcal/mol/Å² then errs by some 4e-7 from the fourth
// derivative and 2e-8 from rounding.
const difference = 2e-5

// HessianAt returns the 3N×3N Hessian of f at x, row-major: the exact one if f has it, else central differences of gradients.
func HessianAt(f Field, x []float64) []float64 {
	h := make([]float64, len(x)*len(x))
	takeHessian(f, x, h, newPoint(len(x)), make([]float64, len(x)))
	return h
}

// takeHessian fills h and returns how many energies it evaluated; the trial point and forward are workspace.
func takeHessian(f Field, x, h []float64, trial point, forward []float64) (evaluations int) {
	if exact, ok := f.(Hessian); ok {
		exact.Hessian(x, h)
		return 0
	}
	n := len(x)
	copy(trial.x, x)
	for j := range n {
		trial.x[j] = x[j] + difference
		f.Energy(trial.x, forward)
		trial.x[j] = x[j] - difference
		f.Energy(trial.x, trial.grad)
		trial.x[j] = x[j]
		floats.SubTo(h[j*n:(j+1)*n], forward, trial.grad)
	}
	for i := range n {
		for j := range i + 1 {
			v := (h[i*n+j] + h[j*n+i]) / (4 * difference)
			h[i*n+j], h[j*n+i] = v, v
		}
	}
	return 2 * n
}
