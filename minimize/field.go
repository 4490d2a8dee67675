package minimize

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
