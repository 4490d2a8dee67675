package search

import (
	"math"
	"math/rand/v2"

	"tarn/search/moves"
)

// proposal is one kind of move of a Metropolis walk. amount scales it; drawn from a symmetric distribution it keeps detailed balance.
type proposal struct {
	weight  float64
	step    float64 // largest amount, 0 for moves without one
	most    float64
	propose func(x []float64, amount float64, rng *rand.Rand)

	tried, accepted int // since the step was last tuned
	tunings         int
}

// metropolis samples exp(-E/kT) in Cartesian coordinates (N. Metropolis et al., J. Chem. Phys. 21, 1087 (1953)). Each move picks a kind by
// weight and an amount uniformly within its step.
type metropolis struct {
	energyOf  func(x []float64) float64
	rng       *rand.Rand
	proposals []proposal
	kT        float64
	x, trial  []float64
	energy    float64

	tuning          bool
	tried, accepted int
	sum, square     float64 // of energies, since reset
}

// targetAcceptance is what steps are tuned to (common practice: 0.3 to 0.5, no source).
const targetAcceptance = 0.4

func newMetropolis(energyOf func([]float64) float64, x []float64, proposals []proposal, rng *rand.Rand) *metropolis {
	m := &metropolis{
		energyOf: energyOf, rng: rng, proposals: proposals,
		x: append([]float64(nil), x...), trial: make([]float64, len(x)),
	}
	m.energy = energyOf(m.x)
	return m
}

// place puts the walk elsewhere.
func (m *metropolis) place(x []float64) {
	copy(m.x, x)
	m.energy = m.energyOf(m.x)
}

// try makes a trial and returns its energy and the proposal it came from.
func (m *metropolis) try() (*proposal, float64) {
	total := 0.0
	for i := range m.proposals {
		total += m.proposals[i].weight
	}
	u := m.rng.Float64() * total
	chosen := &m.proposals[0]
	for i := range m.proposals {
		chosen = &m.proposals[i]
		if u -= chosen.weight; u < 0 {
			break
		}
	}
	copy(m.trial, m.x)
	chosen.propose(m.trial, chosen.step*(2*m.rng.Float64()-1), m.rng)
	return chosen, m.energyOf(m.trial)
}

// move does one step of the walk.
func (m *metropolis) move() {
	chosen, energy := m.try()
	chosen.tried++
	m.tried++
	if energy <= m.energy || m.rng.Float64() < math.Exp((m.energy-energy)/m.kT) {
		m.x, m.trial = m.trial, m.x
		m.energy = energy
		chosen.accepted++
		m.accepted++
	}
	m.sum += m.energy
	m.square += m.energy * m.energy
	if m.tuning {
		chosen.tune()
	}
}

// leastGain is how strongly a step still follows the acceptance after long tuning, so that it can follow the temperature.
const leastGain = 0.2

// tune brings the step nearer to the target acceptance. It is done while a stage equilibrates and never while it is sampled: a step that
// depends on the walk breaks detailed balance.
func (p *proposal) tune() {
	const every = 12
	if p.step == 0 || p.tried < every {
		return
	}
	rate := float64(p.accepted) / float64(p.tried)
	p.tunings++
	gain := max(leastGain, 1/math.Sqrt(float64(p.tunings)))
	p.step = min(p.most, max(p.most/1000, p.step*math.Exp(gain*(rate-targetAcceptance))))
	p.tried, p.accepted = 0, 0
}

// stage resets the averages and returns those since the last reset.
func (m *metropolis) stage() (acceptance, mean, deviation float64) {
	if n := float64(m.tried); n > 0 {
		acceptance, mean = float64(m.accepted)/n, m.sum/n
		deviation = math.Sqrt(max(0, m.square/n-mean*mean))
	}
	m.tried, m.accepted, m.sum, m.square = 0, 0, 0, 0
	return acceptance, mean, deviation
}

// uphill returns the increases of energy of trials from where the walk stands, without accepting any.
func (m *metropolis) uphill(trials int) []float64 {
	var up []float64
	for range trials {
		if _, energy := m.try(); energy > m.energy {
			up = append(up, energy-m.energy)
		}
	}
	return up
}

// moleculeProposals are the moves of a Metropolis walk of a molecule: bonds one and several at a time, ring segments turned and flapped,
// nitrogen inverted, atoms shifted. Weights go by the number of degrees of freedom.
func moleculeProposals(s *moves.Set, atoms int) []proposal {
	var list []proposal
	add := func(weight, step, most float64, propose func([]float64, float64, *rand.Rand)) {
		if weight > 0 {
			list = append(list, proposal{weight: weight, step: step, most: most, propose: propose})
		}
	}
	freedom := float64(max(1, s.Freedom()))
	torsions, rings, inversions := float64(len(s.Torsions))/freedom, float64(s.RingFreedom)/freedom, float64(len(s.Inversions))/freedom
	add(0.5*torsions, math.Pi, math.Pi, func(x []float64, amount float64, rng *rand.Rand) {
		s.Torsions[rng.IntN(len(s.Torsions))].Rotate(x, amount)
	})
	if len(s.Torsions) > 1 {
		add(0.2*torsions, math.Pi/2, math.Pi, func(x []float64, amount float64, rng *rand.Rand) {
			first := rng.IntN(len(s.Torsions))
			second := (first + 1 + rng.IntN(len(s.Torsions)-1)) % len(s.Torsions)
			s.Torsions[first].Rotate(x, amount)
			s.Torsions[second].Rotate(x, amount*(2*rng.Float64()-1))
		})
	}
	if len(s.Cranks) > 0 {
		add(0.6*rings, 0.5, math.Pi, func(x []float64, amount float64, rng *rand.Rand) {
			s.Cranks[rng.IntN(len(s.Cranks))].Rotate(x, amount)
		})
		add(0.1*rings, 0, 0, func(x []float64, _ float64, rng *rand.Rand) { s.Cranks[rng.IntN(len(s.Cranks))].Flap(x) })
	}
	if len(s.Inversions) > 0 {
		add(0.5*inversions, 0, 0, func(x []float64, _ float64, rng *rand.Rand) { s.Inversions[rng.IntN(len(s.Inversions))].Apply(x) })
	}
	if len(s.Tops) > 0 {
		add(0.05, 1, math.Pi, func(x []float64, amount float64, rng *rand.Rand) { s.Tops[rng.IntN(len(s.Tops))].Rotate(x, amount) })
	}
	add(0.3, 0.1, 0.5, func(x []float64, amount float64, rng *rand.Rand) {
		moves.KickAtom(x, rng.IntN(atoms), math.Abs(amount), rng)
	})
	return list
}

// clusterProposals shift one atom or all.
func clusterProposals(atoms int) []proposal {
	return []proposal{
		{weight: 0.9, step: 0.3, most: 1, propose: func(x []float64, amount float64, rng *rand.Rand) {
			moves.KickAtom(x, rng.IntN(atoms), math.Abs(amount), rng)
		}},
		{weight: 0.1, step: 0.05, most: 0.5, propose: func(x []float64, amount float64, rng *rand.Rand) {
			moves.Kick(x, math.Abs(amount), rng)
		}},
	}
}
