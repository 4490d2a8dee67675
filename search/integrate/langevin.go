package integrate

import (
	"math"
	"math/rand/v2"
)

// Field is a potential energy surface: energy in kcal/mol at 3N coordinates in Å, with its gradient.
type Field interface {
	Energy(x, grad []float64) float64
}

const (
	// acceleration is 1 kcal/mol/Å/u in Å/fs²: 4184 J/kcal over Avogadro's number and 1.66053906892e-27 kg (CODATA 2022) is
	// 4.184e-4 Å² u/fs² for 1 kcal/mol.
	acceleration = 4184 / 6.02214076e23 / 1.66053906892e-27 * 1e-10
	// Boltzmann is the gas constant in kcal/mol/K (SI 2019).
	Boltzmann = 1.380649e-23 * 6.02214076e23 / 4184
)

// System is a set of atoms in motion.
type System struct {
	X, V   []float64 // Å, Å/fs
	Masses []float64 // u, one an atom
	Energy float64   // potential, kcal/mol

	field Field
	grad  []float64
}

// NewSystem starts at x with Maxwell-Boltzmann velocities at a temperature in K, total momentum removed.
func NewSystem(f Field, x, masses []float64, temperatureK float64, rng *rand.Rand) *System {
	s := &System{
		X: append([]float64(nil), x...), V: make([]float64, len(x)), Masses: masses,
		field: f, grad: make([]float64, len(x)),
	}
	s.Energy = f.Energy(s.X, s.grad)
	s.Thermalize(temperatureK, rng)
	return s
}

// Thermalize draws new velocities, total momentum removed.
func (s *System) Thermalize(temperatureK float64, rng *rand.Rand) {
	for i := range s.V {
		s.V[i] = s.spread(i/3, temperatureK) * rng.NormFloat64()
	}
	s.removeMomentum()
}

// spread is the standard deviation of a velocity component.
func (s *System) spread(atom int, temperatureK float64) float64 {
	return math.Sqrt(Boltzmann * temperatureK * acceleration / s.Masses[atom])
}

func (s *System) removeMomentum() {
	total := 0.0
	for _, m := range s.Masses {
		total += m
	}
	for c := range 3 {
		p := s.Momentum()[c] / total
		for i := range s.Masses {
			s.V[3*i+c] -= p
		}
	}
}

// Momentum returns the total momentum in u Å/fs.
func (s *System) Momentum() (p [3]float64) {
	for i, m := range s.Masses {
		for c := range 3 {
			p[c] += m * s.V[3*i+c]
		}
	}
	return p
}

// Kinetic returns the kinetic energy in kcal/mol.
func (s *System) Kinetic() float64 {
	sum := 0.0
	for i, v := range s.V {
		sum += s.Masses[i/3] * v * v
	}
	return sum / (2 * acceleration)
}

// Temperature returns the kinetic temperature in K: 3N-3 degrees of freedom, since the total momentum is zero.
func (s *System) Temperature() float64 {
	return 2 * s.Kinetic() / (Boltzmann * float64(max(1, len(s.X)-3)))
}

// Verlet makes steps of dt fs at constant energy.
func (s *System) Verlet(steps int, dt float64) {
	for range steps {
		s.push(dt / 2)
		s.drift(dt)
		s.Energy = s.field.Energy(s.X, s.grad)
		s.push(dt / 2)
	}
}

// Langevin makes steps of dt fs in a bath of a temperature in K with a friction in 1/fs: half a push, half a drift, the exact
// Ornstein-Uhlenbeck process, half a drift, half a push. The noise has no net momentum.
func (s *System) Langevin(steps int, dt, temperatureK, friction float64, rng *rand.Rand) {
	keep := math.Exp(-friction * dt)
	noise := math.Sqrt(1 - keep*keep)
	for range steps {
		s.push(dt / 2)
		s.drift(dt / 2)
		for i := range s.V {
			s.V[i] = keep*s.V[i] + noise*s.spread(i/3, temperatureK)*rng.NormFloat64()
		}
		s.removeMomentum()
		s.drift(dt / 2)
		s.Energy = s.field.Energy(s.X, s.grad)
		s.push(dt / 2)
	}
}

func (s *System) push(dt float64) {
	for i, g := range s.grad {
		s.V[i] -= dt * acceleration * g / s.Masses[i/3]
	}
}

func (s *System) drift(dt float64) {
	for i, v := range s.V {
		s.X[i] += dt * v
	}
}
