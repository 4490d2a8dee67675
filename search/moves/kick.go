package moves

import "math/rand/v2"

// Kick displaces every atom by a vector drawn uniformly from a ball of the given radius.
func Kick(x []float64, radius float64, rng *rand.Rand) {
	for i := 0; i < len(x); i += 3 {
		v := inBall(rng).times(radius)
		x[i] += v[0]
		x[i+1] += v[1]
		x[i+2] += v[2]
	}
}

// KickAtom displaces one atom in the same way.
func KickAtom(x []float64, atom int, radius float64, rng *rand.Rand) {
	Kick(x[3*atom:3*atom+3], radius, rng)
}

func inBall(rng *rand.Rand) vector {
	for {
		v := vector{2*rng.Float64() - 1, 2*rng.Float64() - 1, 2*rng.Float64() - 1}
		if v.dot(v) <= 1 {
			return v
		}
	}
}

func direction(rng *rand.Rand) vector {
	for {
		if v, ok := inBall(rng).unit(); ok {
			return v
		}
	}
}
