package minimize

import (
	"errors"
	"fmt"
)

var (
	// ErrNotConverged is what a [NotConvergedError] wraps.
	ErrNotConverged = errors.New("the quench did not converge")
	// ErrDiverged is what a [DivergedError] wraps.
	ErrDiverged = errors.New("the force field gave no finite energy or gradient")
	// ErrLength says that coordinates, masses or a Hessian do not fit the number of atoms.
	ErrLength = errors.New("lengths do not fit the number of atoms")
)

// NotConvergedError says how far a quench came before it gave up. The Result returned with it holds the best point found.
type NotConvergedError struct {
	Reason      string
	Evaluations int
	GradientRMS float64 // kcal/mol/Å
}

func (e *NotConvergedError) Error() string {
	return fmt.Sprintf("%v: %s after %d evaluations, rms gradient %.3g kcal/mol/Å", ErrNotConverged, e.Reason, e.Evaluations, e.GradientRMS)
}

func (e *NotConvergedError) Unwrap() error { return ErrNotConverged }

// DivergedError says that the energy or gradient at the start of a quench is not finite, as when atoms coincide.
type DivergedError struct {
	Energy float64
	Atom   int // index of an atom whose coordinates or gradient are not finite, -1 if only the energy is not
}

func (e *DivergedError) Error() string {
	if e.Atom < 0 {
		return fmt.Sprintf("%v: energy %v", ErrDiverged, e.Energy)
	}
	return fmt.Sprintf("%v at atom %d: check its coordinates and whether it coincides with another atom", ErrDiverged, e.Atom+1)
}

func (e *DivergedError) Unwrap() error { return ErrDiverged }
