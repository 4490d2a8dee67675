package minimize

import (
	"context"
	"fmt"
	"math"

	"gonum.org/v1/gonum/floats"
)

// Torsion is the torsion angle of four atoms, by index, held at an angle in radians.
type Torsion struct {
	Atoms [4]int
	Angle float64
}

const (
	// turn is the farthest that a torsion is turned in one step, radians.
	turn = math.Pi / 12
	// holdStiffness is the force constant of a held torsion, kcal/mol/rad². It is some ten times that of a torsional potential, so
	// that each correction of the multiplier takes away nine tenths of the deviation or more.
	holdStiffness = 300
	// holdTolerance is the deviation at which a torsion counts as held, radians.
	holdTolerance = 1e-9
)

// Hold brings x to a minimum of f under the condition that a torsion has the given angle: it is turned there in small steps the
// shorter way round, and everything else relaxes. Energy is that of f alone, GradientRMS that of the gradient without its part along
// the torsion, LowestEigenvalue that of the Lagrangian with the torsion stiffened. The condition holds to 1e-9 radians: it is
// enforced by an augmented Lagrangian (J. Nocedal, S. J. Wright, Numerical Optimization, 2nd ed. (2006), section 17.3).
func Hold(ctx context.Context, f Field, x []float64, t Torsion, s Settings) (Result, error) {
	if err := t.check(f.Atoms()); err != nil {
		return Result{}, err
	}
	if len(x) != 3*f.Atoms() {
		return Result{}, fmt.Errorf("%w: %d coordinates for %d atoms", ErrLength, len(x), f.Atoms())
	}
	lagrangian := &held{field: f, torsion: t}
	var surface Field = lagrangian
	if exact, ok := f.(Hessian); ok {
		surface = &heldExactly{held: lagrangian, exact: exact}
	}
	q := NewQuencher(surface, s)
	var total, now Result
	run := func(step func(context.Context, []float64) (Result, error)) (err error) {
		now, err = step(ctx, x)
		x = now.X
		total.Evaluations += now.Evaluations
		total.Hessians += now.Hessians
		total.Saddles += now.Saddles
		return err
	}
	start := torsionAngle(x, t.Atoms)
	way := math.Remainder(t.Angle-start, 2*math.Pi)
	for steps, k := math.Ceil(math.Abs(way)/turn), 1.0; k < steps; k++ {
		lagrangian.torsion.Angle = start + way*k/steps
		if err := run(q.Crude); err != nil {
			return Result{}, err
		}
	}
	lagrangian.torsion.Angle = t.Angle
	for range 30 {
		if err := run(q.Quench); err != nil {
			return Result{}, err
		}
		deviation := lagrangian.deviation(x)
		if math.Abs(deviation) < holdTolerance {
			total.X, total.LowestEigenvalue = x, now.LowestEigenvalue
			total.Energy, total.GradientRMS = lagrangian.along(x)
			return total, nil
		}
		lagrangian.multiplier += holdStiffness * deviation
	}
	return Result{}, &NotConvergedError{Reason: "the torsion could not be held", Evaluations: total.Evaluations, GradientRMS: now.GradientRMS}
}

// Drive holds a torsion at each of the angles in turn, in radians, each started from the geometry of the one before. If one fails it
// returns those before it with the error.
func Drive(ctx context.Context, f Field, x []float64, atoms [4]int, angles []float64, s Settings) ([]Result, error) {
	var results []Result
	for _, angle := range angles {
		r, err := Hold(ctx, f, x, Torsion{atoms, angle}, s)
		if err != nil {
			return results, fmt.Errorf("torsion at %.1f°: %w", angle*180/math.Pi, err)
		}
		results = append(results, r)
		x = r.X
	}
	return results, nil
}

func (t Torsion) check(atoms int) error {
	if !isFinite(t.Angle) {
		return fmt.Errorf("a torsion cannot be held at an angle of %v", t.Angle)
	}
	for i, a := range t.Atoms {
		if a < 0 || a >= atoms {
			return fmt.Errorf("torsion names atom %d, but there are %d atoms", a+1, atoms)
		}
		for _, b := range t.Atoms[:i] {
			if a == b {
				return fmt.Errorf("torsion names atom %d twice", a+1)
			}
		}
	}
	return nil
}

// held is the augmented Lagrangian of a field with one torsion held: E + multiplier·d + holdStiffness/2·d², where d is the deviation
// of the torsion from its angle.
type held struct {
	field      Field
	torsion    Torsion
	multiplier float64
}

func (h *held) Atoms() int { return h.field.Atoms() }

func (h *held) deviation(x []float64) float64 {
	return math.Remainder(torsionAngle(x, h.torsion.Atoms)-h.torsion.Angle, 2*math.Pi)
}

func (h *held) Energy(x, grad []float64) float64 {
	d := h.deviation(x)
	if grad == nil {
		return h.field.Energy(x, nil) + d*(h.multiplier+holdStiffness/2*d)
	}
	energy := h.field.Energy(x, grad)
	slopes := torsionGradient(x, h.torsion.Atoms)
	for a, atom := range h.torsion.Atoms {
		floats.AddScaled(grad[3*atom:3*atom+3], h.multiplier+holdStiffness*d, slopes[3*a:3*a+3])
	}
	return energy + d*(h.multiplier+holdStiffness/2*d)
}

// along returns the energy of the field and its rms gradient without the part along the torsion.
func (h *held) along(x []float64) (energy, rms float64) {
	p := newPoint(len(x))
	energy = h.field.Energy(x, p.grad)
	slopes := torsionGradient(x, h.torsion.Atoms)
	part := 0.0
	for a, atom := range h.torsion.Atoms {
		part += floats.Dot(p.grad[3*atom:3*atom+3], slopes[3*a:3*a+3])
	}
	part /= floats.Dot(slopes[:], slopes[:])
	for a, atom := range h.torsion.Atoms {
		floats.AddScaled(p.grad[3*atom:3*atom+3], -part, slopes[3*a:3*a+3])
	}
	return energy, p.rms()
}

// heldExactly is held over a field with exact second derivatives; those of the torsion itself are differences of its gradient.
type heldExactly struct {
	*held
	exact Hessian
}

func (h *heldExactly) Hessian(x, matrix []float64) {
	h.exact.Hessian(x, matrix)
	n := len(x)
	pull := h.multiplier + holdStiffness*h.deviation(x)
	slopes := torsionGradient(x, h.torsion.Atoms)
	var moved [12]float64
	for a, atom := range h.torsion.Atoms {
		copy(moved[3*a:], x[3*atom:3*atom+3])
	}
	order := [4]int{0, 1, 2, 3}
	place := func(k int) int { return 3*h.torsion.Atoms[k/3] + k%3 }
	const shift = 1e-5
	for k := range moved {
		at := moved[k]
		moved[k] = at + shift
		forward := torsionGradient(moved[:], order)
		moved[k] = at - shift
		backward := torsionGradient(moved[:], order)
		moved[k] = at
		for l := range moved {
			curvature := (forward[l] - backward[l]) / (2 * shift)
			matrix[place(k)*n+place(l)] += holdStiffness*slopes[k]*slopes[l] + pull*curvature
		}
	}
}
