package moves

import (
	"math"
	"math/rand/v2"
	"slices"
)

// touching is the distance of neighbours in a Lennard-Jones cluster, 2^(1/6) σ.
const touching = 1.122462048309373

// RandomCluster fills a ball in which n atoms have about the density of a cluster at random, without hard overlaps. Lengths in σ.
func RandomCluster(n int, rng *rand.Rand) []float64 {
	radius := touching * (0.5 + math.Cbrt(3*float64(n)/(4*math.Pi*math.Sqrt2)))
	x := make([]float64, 0, 3*n)
	for apart := 0.8; len(x) < 3*n; apart *= 0.99 {
		v := inBall(rng).times(radius)
		if nearest(x, v) >= apart {
			x = append(x, v[:]...)
			apart = 0.8
		}
	}
	return x
}

func nearest(x []float64, v vector) float64 {
	least := math.Inf(1)
	for i := range len(x) / 3 {
		least = min(least, at(x, i).minus(v).norm())
	}
	return least
}

// Resettle takes the count least bound atoms of a cluster off and lets each touch down from a random direction. It is the angular move of
// D. J. Wales and J. P. K. Doye, J. Phys. Chem. A 101, 5111 (1997), with the radius found where atoms touch.
func Resettle(x []float64, count int, rng *rand.Rand) {
	n := len(x) / 3
	bound := make([]float64, n)
	var center vector
	for i := range n {
		center = center.plus(at(x, i).times(1 / float64(n)))
		for j := range n {
			if j != i {
				d := at(x, i).minus(at(x, j))
				inverse := 1 / max(0.5, d.dot(d))
				bound[i] += inverse * inverse * inverse
			}
		}
	}
	order := make([]int, n)
	for i := range order {
		order[i] = i
	}
	slices.SortStableFunc(order, func(a, b int) int {
		switch {
		case bound[a] < bound[b]:
			return -1
		case bound[a] > bound[b]:
			return 1
		}
		return 0
	})
	for _, i := range order[:min(count, n-1)] {
		v := touchDown(x, i, center, direction(rng))
		copy(x[3*i:], v[:])
	}
}

// touchDown returns where an atom that comes from afar along a direction towards the center first touches another.
func touchDown(x []float64, atom int, center, from vector) vector {
	farthest := 0.0
	for j := range len(x) / 3 {
		if j == atom {
			continue
		}
		r := at(x, j).minus(center)
		along := r.dot(from)
		if gap := touching*touching - (r.dot(r) - along*along); gap > 0 {
			farthest = max(farthest, along+math.Sqrt(gap))
		}
	}
	return center.plus(from.times(farthest))
}
