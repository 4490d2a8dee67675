package search

import (
	"math"

	"tarn/search/coverage"
)

const (
	// slack is how far the low end of the interval may lie below the target (0.95 for 0.99).
	slack = 0.04
	// leastRounds is the number of rounds below which nothing is believed; each degree of freedom of a molecule adds one.
	leastRounds = 3
	// recent is the share of the rounds, the last ones, in which hardly anything new may have been found; it is two rounds at least.
	recent = 0.25
	// clusterRecent is the same for clusters, some of whose minima are hit once in a hundred thousand quenches.
	clusterRecent = 0.5
	// clusterDraws is the number of draws for each known minimum of a cluster below which nothing is believed.
	clusterDraws = 500
)

// counts sums up the draws of the minima in the window.
func (r *run) counts() coverage.Counts {
	top := r.lowest() + r.settings.WindowKcal
	draws := make([]int, 0, len(r.checkpoint.Minima))
	for i := range r.checkpoint.Minima {
		if m := &r.checkpoint.Minima[i]; m.Energy <= top {
			draws = append(draws, m.Draws)
		}
	}
	return coverage.Count(draws)
}

func (r *run) lowest() float64 {
	lowest := math.Inf(1)
	for i := range r.checkpoint.Minima {
		lowest = min(lowest, r.checkpoint.Minima[i].Energy)
	}
	return lowest
}

func coverageOf(c coverage.Counts) Coverage {
	s := c.Sample()
	return Coverage{Estimate: s.Estimate, Low: s.Low, High: s.High, Unseen: c.Chao().Estimate - float64(c.Observed)}
}

// complete tells whether the evidence suffices: coverage at the target, its low end within slack of it, fewer unseen minima than the
// target allows, and no more than that found in the last rounds.
func (r *run) complete(c coverage.Counts) bool {
	target := r.settings.Coverage
	now := coverageOf(c)
	if r.problem.Cluster() && c.Draws < clusterDraws*c.Observed {
		return false
	}
	allowed := max(0.5, (1-target)*float64(c.Observed))
	return r.checkpoint.Round >= leastRounds+max(1, r.problem.moves.Freedom()) && c.Draws > 0 &&
		now.Estimate >= target && now.Low >= target-slack && now.Unseen <= allowed && float64(r.foundLately()) <= allowed
}

// foundLately counts the minima in the window that the last rounds found.
func (r *run) foundLately() int {
	top := r.lowest() + r.settings.WindowKcal
	share := recent
	if r.problem.Cluster() {
		share = clusterRecent
	}
	since := r.checkpoint.Round - max(2, int(share*float64(r.checkpoint.Round)))
	count := 0
	for i := range r.checkpoint.Minima {
		if m := &r.checkpoint.Minima[i]; m.Energy <= top && m.FoundInRound >= since {
			count++
		}
	}
	return count
}
