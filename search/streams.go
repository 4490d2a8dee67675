package search

import "math/rand/v2"

// firstStream numbers the random stream of the first geometry; it cannot collide with those of walks.
const firstStream = 1 << 63

// walkStream is the random stream of one walk of one round: every walk has its own, so that the order in which walks run does not matter.
func walkStream(seed uint64, round, walk int) *rand.Rand {
	return rand.New(rand.NewPCG(seed, uint64(round+1)<<20|uint64(walk)))
}

// choiceWalk numbers the stream that chooses the starts of a round.
const choiceWalk = 1<<20 - 1
