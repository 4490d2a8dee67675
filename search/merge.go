package search

import (
	"cmp"
	"math"
	"slices"
)

// merge takes a trail into the library. Every kept quench is a hit of its minimum. A draw, the evidence for the coverage, is only the first
// hit of a minimum in a walk, and never a minimum that the walk started from or jumped to: quenches that follow each other in a walk are not
// independent, and to fall back where one came from is no news. Quenches of random clusters are independent: all of them are draws.
func (r *run) merge(t *trail) {
	c := &r.checkpoint
	c.Walks++
	c.Evaluations += t.evaluations
	c.Quenches += len(t.outcomes)
	drawn := map[int]bool{t.start: true}
	for _, id := range t.jumps {
		drawn[id] = true
	}
	for i := range t.outcomes {
		o := &t.outcomes[i]
		switch o.fate {
		case above:
			c.AboveWindow++
		case inverted:
			c.Inverted++
		case broken:
			c.Broken++
		case failed:
			c.Failed++
		case kept, known:
			id := o.id
			if o.fate == kept {
				id = r.identify(o)
			}
			m := &c.Minima[id]
			m.Hits++
			m.LastHitInRound = c.Round
			if !drawn[id] || t.kind == scatter {
				drawn[id] = true
				m.Draws++
			}
		}
	}
	if len(t.inverted) > 0 {
		c.InvertedWalks++
		for _, atom := range t.inverted {
			if at, known := slices.BinarySearch(c.InvertedAtoms, atom+1); !known {
				c.InvertedAtoms = slices.Insert(c.InvertedAtoms, at, atom+1)
			}
		}
	}
}

// identify returns the index of the minimum that an outcome belongs to; a new one is added.
func (r *run) identify(o *outcome) int {
	if id, ok := r.index.Find(o.x, o.energy); ok {
		return id
	}
	id := r.index.Add(o.x, o.energy)
	r.rough.Add(o.x, o.energy)
	r.checkpoint.Minima = append(r.checkpoint.Minima, Minimum{
		Energy: o.energy, X: o.x, GradientRMS: o.gradientRMS, LowestEigenvalue: o.eigenvalue, FoundInRound: r.checkpoint.Round,
	})
	return id
}

// roundsReported is how many rounds the stages of a checkpoint go back.
const roundsReported = 4

// noteStages averages the stages of the walks of a round, kind by kind.
func (r *run) noteStages(trails []trail) {
	c := &r.checkpoint
	c.Stages = slices.DeleteFunc(c.Stages, func(s Stage) bool { return s.Round <= c.Round-roundsReported })
	type key struct {
		kind  string
		stage int
	}
	sums := map[key]*Stage{}
	var order []key
	for i := range trails {
		for _, s := range trails[i].stages {
			if math.IsNaN(s.EnergyKcal) || math.IsInf(s.EnergyKcal, 0) {
				continue
			}
			k := key{s.Kind, s.Stage}
			if sums[k] == nil {
				sums[k] = &Stage{Round: c.Round, Stage: s.Stage, Kind: s.Kind}
				order = append(order, k)
			}
			sum := sums[k]
			sum.Walks++
			sum.TemperatureK += s.TemperatureK
			sum.Acceptance += s.Acceptance
			sum.EnergyKcal += s.EnergyKcal
		}
	}
	slices.SortFunc(order, func(a, b key) int { return cmp.Or(cmp.Compare(a.kind, b.kind), cmp.Compare(a.stage, b.stage)) })
	for _, k := range order {
		s := *sums[k]
		s.TemperatureK /= float64(s.Walks)
		s.Acceptance /= float64(s.Walks)
		s.EnergyKcal /= float64(s.Walks)
		c.Stages = append(c.Stages, s)
	}
}
