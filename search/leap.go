package search

import (
	"math"
	"math/rand/v2"

	"tarn/search/moves"
)

// tries is how many candidates a leap looks at before it takes the one of lowest energy, and clash the energy above the start, in kcal/mol
// for one changed degree of freedom, from which a candidate counts as atoms pushed into each other.
const (
	tries = 10
	clash = 60.0
)

// leap writes to trial a geometry that is likely to quench to another minimum than here does.
func (w *walker) leap(trial, here []float64, energy float64) {
	if w.problem.Cluster() {
		copy(trial, here)
		clusterLeap(trial, w.rng)
		return
	}
	best := math.Inf(1)
	candidate := make([]float64, len(here))
	for range tries {
		copy(candidate, here)
		changed := moleculeLeap(candidate, w.problem.moves, w.rng)
		e := w.energy(candidate)
		if e < best || math.IsInf(best, 1) {
			best = e
			copy(trial, candidate)
		}
		if e < energy+clash*float64(changed) {
			return
		}
	}
}

// moleculeLeap changes one to a few degrees of freedom by any amount and returns how many.
func moleculeLeap(x []float64, s *moves.Set, rng *rand.Rand) (changed int) {
	freedom := s.Freedom()
	if freedom == 0 || len(s.Tops) > 0 && rng.Float64() < 0.05 {
		for i := range s.Tops {
			s.Tops[i].Rotate(x, 2*math.Pi*rng.Float64())
		}
		moves.Kick(x, 0.4, rng)
		return 3
	}
	changed = 1
	for changed < freedom && rng.Float64() < 0.5 {
		changed++
	}
	for range changed {
		switch k := pick(s, rng); {
		case k < len(s.Torsions):
			turnTorsion(x, &s.Torsions[k], rng)
		case k < len(s.Torsions)+len(s.Inversions):
			s.Inversions[rng.IntN(len(s.Inversions))].Apply(x)
		default:
			for range 1 + rng.IntN(mostCranks) {
				turnCrank(x, &s.Cranks[rng.IntN(len(s.Cranks))], rng)
			}
		}
	}
	return changed
}

// stiffShare is how often a partly double bond is taken when it is picked: it has two states, others more.
const stiffShare = 0.3

// pick chooses a degree of freedom: torsions first, then inversions, then those of rings.
func pick(s *moves.Set, rng *rand.Rand) int {
	for {
		k := rng.IntN(s.Freedom())
		if k >= len(s.Torsions) || !s.Torsions[k].Stiff || rng.Float64() < stiffShare {
			return k
		}
	}
}

// turnTorsion turns a bond by any angle, or to the other state if it is partly double.
func turnTorsion(x []float64, t *moves.Torsion, rng *rand.Rand) {
	angle := math.Pi * (2*rng.Float64() - 1)
	if t.Stiff {
		angle = math.Pi + 0.3*(2*rng.Float64()-1)
	}
	t.Rotate(x, angle)
}

// A change of a ring turns one to mostCranks of its segments; flapShare of them flap instead of turning by any angle.
const (
	mostCranks = 3
	flapShare  = 0.3
)

func turnCrank(x []float64, c *moves.Crank, rng *rand.Rand) {
	if rng.Float64() < flapShare {
		c.Flap(x)
		return
	}
	c.Rotate(x, math.Pi*(2*rng.Float64()-1))
}

// clusterLeap shifts all atoms or resettles the most loosely bound.
func clusterLeap(x []float64, rng *rand.Rand) {
	if rng.Float64() < 0.75 {
		moves.Kick(x, 0.25+0.35*rng.Float64(), rng)
		return
	}
	moves.Resettle(x, 1+rng.IntN(max(1, len(x)/30)), rng)
}
