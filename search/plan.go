package search

import (
	"cmp"
	"math/rand/v2"
	"slices"
)

// walkKind is what a walk does.
type walkKind int

const (
	overMinima walkKind = iota // Monte Carlo over minima, annealed
	thermal                    // Metropolis on the potential energy surface, annealed
	trajectory                 // Langevin dynamics
	scatter                    // quenches of random clusters, each for itself
)

func (k walkKind) String() string {
	return [...]string{"over minima", "thermal", "trajectory", "scatter"}[k]
}

// walksInRound is the number of walks of a round, whatever the number of workers: two for each way to choose a start.
const walksInRound = 8

// kindOf returns what a walk of a round does. Monte Carlo over minima finds most for its cost; the others find what it finds last
// (docs/search.md shows the comparison).
func kindOf(m Method, number int) walkKind {
	switch {
	case m == Dynamics:
		return trajectory
	case m == Mixed && number%4 == 3:
		return trajectory
	case m == Anneal && number == 3:
		return thermal
	}
	return overMinima
}

// plan is what a walk is told to do.
type plan struct {
	number int
	kind   walkKind
	start  int // index of a minimum, -1 for a geometry built anew
	quota  int
	wide   bool // roam rather than go down
}

// For clusters up to scatterAtoms, of which all minima are wanted, the last walks of a round scatter: minima with small basins high up are
// found by random quenches sooner than by any walk.
const (
	scatterAtoms = 13
	scatterFrom  = 4
)

// quotaOf is the number of quenches of a walk: long enough to get away from its start, short enough that a round ends soon.
func (p *Problem) quotaOf() int {
	if p.Cluster() {
		return 20 + 10*p.Atoms()
	}
	return min(60, 8+3*p.moves.Freedom())
}

// fewMinima is the number of minima in the window up to which walks are short and more of them start anew: walks among so few say little
// about others, however long they are.
const fewMinima = 3

// plan makes the plans of the next round from the checkpoint and the seed alone. For a molecule, of every four starts one is the lowest minimum or, with
// falling chance, one near it; one is a minimum in the window that was drawn least often; one is any minimum in the window; and
// one is built anew, by distance geometry or as a random cluster. The first round builds all anew, and so do those that know one minimum.
func (r *run) plan() []plan {
	rng := walkStream(r.settings.Seed, r.checkpoint.Round, choiceWalk)
	inWindow := r.inWindow()
	left := r.settings.MaxQuenches - r.checkpoint.Quenches
	length := r.problem.quotaOf()
	if n := len(inWindow); 0 < n && n <= fewMinima && !r.problem.Cluster() {
		length = min(length, 4+4*n)
	}
	plans := make([]plan, 0, walksInRound)
	for number := range walksInRound {
		quota := min(length, (left+walksInRound-1-number)/walksInRound)
		if quota <= 0 {
			break
		}
		pl := plan{number: number, kind: kindOf(r.settings.Method, number), start: -1, quota: quota}
		switch {
		case r.problem.Cluster():
			r.planCluster(&pl, inWindow, rng)
		case len(inWindow) > 1:
			switch (number / 2) % 4 {
			case 0:
				pl.start = inWindow[lowRank(len(inWindow), rng)]
			case 1:
				pl.start = r.leastDrawn(inWindow, number%2, rng)
			case 2:
				if len(inWindow) > fewMinima {
					pl.start = inWindow[rng.IntN(len(inWindow))]
				}
			}
		}
		plans = append(plans, pl)
	}
	return plans
}

// planCluster decides for a cluster. Of a small one all minima are wanted: half of the walks scatter, a quarter goes down from low minima, a
// quarter roams from those that were drawn least often. Of a large one only the lowest can be had: three quarters of the walks start anew,
// one goes on from a low minimum and one roams from any; walking on the surface finds little there and is left to one walk in eight.
func (r *run) planCluster(pl *plan, inWindow []int, rng *rand.Rand) {
	small := r.problem.Atoms() <= scatterAtoms
	switch {
	case small && pl.number >= scatterFrom:
		pl.kind = scatter
	case len(inWindow) < 2:
	case pl.number == 0 || small && pl.number == 1:
		pl.start = inWindow[lowRank(len(inWindow), rng)]
	case small:
		pl.start, pl.wide = r.leastDrawn(inWindow, pl.number%2, rng), true
	case pl.number == 1:
		pl.start, pl.wide = inWindow[rng.IntN(len(inWindow))], true
	}
}

// lowRank draws a rank, the lowest most often: half of the time 0, else each further one with three quarters of the chance of the one before.
func lowRank(count int, rng *rand.Rand) int {
	rank := 0
	if rng.Float64() < 0.5 {
		for rank = 1; rng.Float64() < 0.75; {
			rank++
		}
	}
	return rank % count
}

// leastDrawn returns the minimum with the nth least draws; ties are broken at random.
func (r *run) leastDrawn(inWindow []int, nth int, rng *rand.Rand) int {
	order := slices.Clone(inWindow)
	rng.Shuffle(len(order), func(i, j int) { order[i], order[j] = order[j], order[i] })
	slices.SortStableFunc(order, func(a, b int) int {
		return cmp.Compare(r.checkpoint.Minima[a].Draws, r.checkpoint.Minima[b].Draws)
	})
	return order[min(nth, len(order)-1)]
}

// inWindow lists the minima in the window by ascending energy.
func (r *run) inWindow() []int {
	minima := r.checkpoint.Minima
	top := r.lowest() + r.settings.WindowKcal
	var list []int
	for i := range minima {
		if minima[i].Energy <= top {
			list = append(list, i)
		}
	}
	slices.SortFunc(list, func(a, b int) int {
		return cmp.Or(cmp.Compare(minima[a].Energy, minima[b].Energy), cmp.Compare(a, b))
	})
	return list
}
