package schedule

import "math"

const (
	// StartAcceptance is the fraction of uphill moves that the start temperature lets pass (Kirkpatrick et al.: 0.8).
	StartAcceptance = 0.8
	// step is λ in units of the standard deviation by which the mean energy may fall from stage to stage (Huang et al.: 0.7).
	step = 0.7
	// steepest is the smallest ratio of successive temperatures (Huang et al.: 0.5).
	steepest = 0.5
)

// Start returns the temperature at which uphill moves by the given amounts would be accepted with the given mean probability. It returns 0
// if no move goes uphill.
func Start(uphill []float64, acceptance float64) float64 {
	least, most, count := math.Inf(1), 0.0, 0
	for _, u := range uphill {
		if u > 0 && !math.IsInf(u, 1) {
			least, most = min(least, u), max(most, u)
			count++
		}
	}
	if count == 0 {
		return 0
	}
	mean := func(kT float64) float64 {
		sum := 0.0
		for _, u := range uphill {
			if u > 0 && !math.IsInf(u, 1) {
				sum += math.Exp(-u / kT)
			}
		}
		return sum / float64(count)
	}
	// The answer lies between those for the smallest and the largest amount alone.
	low, high := least/-math.Log(acceptance), most/-math.Log(acceptance)
	for range 60 {
		middle := math.Sqrt(low * high)
		if mean(middle) < acceptance {
			low = middle
		} else {
			high = middle
		}
	}
	return math.Sqrt(low * high)
}

// Cool returns the temperature of the stage after one at kT in which the energy had the given standard deviation:
// kT exp(-λ kT/σ), but not less than half. slowness 1 is the published rate; 2 takes about twice as many stages.
func Cool(kT, deviation, slowness float64) float64 {
	ratio := steepest
	if deviation > 0 {
		ratio = max(steepest, math.Exp(-step*kT/deviation))
	}
	return kT * math.Pow(ratio, 1/slowness)
}

// Reheat returns the factor of the start temperature and the slowness of cooling after a number of cycles in a row that found nothing
// new: lower by a tenth each time, not below a half, and slower by a quarter each time, up to twice. Common practice, no source.
func Reheat(fruitless int) (factor, slowness float64) {
	return max(0.5, math.Pow(0.9, float64(fruitless))), min(2, 1+0.25*float64(fruitless))
}
