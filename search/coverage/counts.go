package coverage

import "math"

// z95 is the two-sided 95 % point of the normal distribution.
const z95 = 1.959964

// Counts is all that the estimators need to know of a sample.
type Counts struct {
	Draws    int // draws in total
	Observed int // classes drawn at least once
	Once     int // classes drawn once
	Twice    int // classes drawn twice
}

// Interval is an estimate with its 95 % interval.
type Interval struct {
	Estimate, Low, High float64
}

// Count sums up how often each class was drawn; classes that were never drawn are ignored.
func Count(abundances []int) Counts {
	var c Counts
	for _, k := range abundances {
		if k <= 0 {
			continue
		}
		c.Draws += k
		c.Observed++
		switch k {
		case 1:
			c.Once++
		case 2:
			c.Twice++
		}
	}
	return c
}

// Sample returns the sample coverage, the probability that the next draw belongs to a known class: 1 - f1/n (Good 1953), with Esty's
// interval cut to [0, 1]. Where no class was drawn once that interval has no width; its low end is then 1 - 3/n, the rule of three
// (J. A. Hanley, A. Lippman-Hand, JAMA 249, 1743 (1983)), and never higher elsewhere. Without draws nothing is known: 0 in [0, 1].
func (c Counts) Sample() Interval {
	if c.Draws == 0 {
		return Interval{0, 0, 1}
	}
	n, f1, f2 := float64(c.Draws), float64(c.Once), float64(c.Twice)
	estimate := 1 - f1/n
	half := z95 * math.Sqrt((f1*(n-f1)+2*n*f2)/(n*n*n))
	return Interval{
		Estimate: estimate,
		Low:      max(0, min(estimate-half, 1-3/n)),
		High:     min(1, estimate+half),
	}
}

// Chao returns the lower-bound estimate of the number of classes, seen and unseen, bias-corrected and therefore defined for f2 = 0 as
// well: S + K f1(f1-1)/(2(f2+1)), K = (n-1)/n, with the log-normal interval of Chao (1987).
func (c Counts) Chao() Interval {
	if c.Draws == 0 {
		return Interval{0, 0, math.Inf(1)}
	}
	n, f1, f2 := float64(c.Draws), float64(c.Once), float64(c.Twice)
	k := (n - 1) / n
	unseen := k * f1 * (f1 - 1) / (2 * (f2 + 1))
	variance := unseen + k*k*f1*(2*f1-1)*(2*f1-1)/(4*(f2+1)*(f2+1)) +
		k*k*f1*f1*f2*(f1-1)*(f1-1)/(4*math.Pow(f2+1, 4))
	return c.logNormal(unseen, variance)
}

// ChaoClassic returns the uncorrected estimate S + K f1²/(2 f2) with its interval. It is not defined for f2 = 0 and then falls back to
// [Counts.Chao].
func (c Counts) ChaoClassic() Interval {
	if c.Twice == 0 || c.Draws == 0 {
		return c.Chao()
	}
	n, f2 := float64(c.Draws), float64(c.Twice)
	k, a := (n-1)/n, float64(c.Once)/f2
	variance := f2 * (k*a*a/2 + k*k*a*a*a + k*k*a*a*a*a/4)
	return c.logNormal(k*a*a*f2/2, variance)
}

func (c Counts) logNormal(unseen, variance float64) Interval {
	s := float64(c.Observed)
	if unseen <= 0 {
		return Interval{s, s, s}
	}
	q := math.Exp(z95 * math.Sqrt(math.Log1p(variance/(unseen*unseen))))
	return Interval{s + unseen, s + unseen/q, s + unseen*q}
}

// Extrapolate returns the expected number of classes after m further draws (Colwell et al. 2012).
func (c Counts) Extrapolate(m float64) float64 {
	n, f1, s := float64(c.Draws), float64(c.Once), float64(c.Observed)
	unseen := c.ChaoClassic().Estimate - s
	if unseen <= 0 || m <= 0 {
		return s
	}
	return s + unseen*(1-math.Pow(1-f1/(n*unseen+f1), m))
}
