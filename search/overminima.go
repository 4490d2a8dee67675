package search

import (
	"context"
	"math"

	"tarn/search/integrate"
	"tarn/search/schedule"
)

func (w *walker) minimaLimits() limits {
	switch {
	case w.problem.Cluster() && w.wide:
		return limits{1, 4}
	case w.problem.Cluster():
		return limits{0.4, 1.0} // Wales & Doye 1997 found 0.8 to serve all clusters
	}
	return limits{400 * integrate.Boltzmann, 1500 * integrate.Boltzmann}
}

// jumpShare is how often, per quench, a walk tries to jump to another minimum of the library; that costs no quench.
const jumpShare = 0.05

// minimaWalk is Monte Carlo over minima: a large move, a quench, and the Metropolis criterion on the energies of the minima before and
// after. Sources: Z. Li, H. A. Scheraga, Proc. Natl. Acad. Sci. USA 84, 6611 (1987); D. J. Wales, J. P. K. Doye, J. Phys. Chem. A 101,
// 5111 (1997). The temperature starts from the uphill moves of a first, hottest stage, is cooled by the same schedule as
// other annealing, and reheated when cold.
func (w *walker) minimaWalk(ctx context.Context, start []float64, energy float64) error {
	here := append([]float64(nil), start...)
	trial := make([]float64, len(here))
	span := w.minimaLimits()
	factor, slowness := schedule.Reheat(w.reheat)
	hottest := span.hottest
	kT := hottest
	const length = 6 // quenches a stage
	accepts := func(e float64) bool { return e <= energy || w.rng.Float64() < math.Exp((energy-e)/kT) }
	for stage := 0; ; stage++ {
		var uphill []float64
		accepted, tried, sum, square := 0, 0.0, 0.0, 0.0
		for range length {
			if w.rng.Float64() < jumpShare {
				if minimum := w.jump(accepts); minimum != nil {
					copy(here, minimum.X)
					energy = minimum.Energy
				}
			}
			w.leap(trial, here, energy)
			o, err := w.quench(ctx, trial, w.kelvin(kT))
			if o.usable() {
				tried++
				if o.energy > energy {
					uphill = append(uphill, o.energy-energy)
				}
				if accepts(o.energy) {
					copy(here, o.x)
					energy = o.energy
					accepted++
				}
			}
			sum += energy
			square += energy * energy
			if err != nil {
				return err
			}
		}
		mean := sum / length
		if stage == 0 {
			hottest = factor * schedule.Start(uphill, schedule.StartAcceptance)
			hottest = min(span.hottest, max(span.coldest, hottest))
			kT = hottest
			w.noteStage(kT, float64(accepted)/max(1, tried), mean)
			continue
		}
		w.noteStage(kT, float64(accepted)/max(1, tried), mean)
		kT = schedule.Cool(kT, math.Sqrt(max(0, square/length-mean*mean)), slowness)
		if kT < span.coldest {
			kT = hottest
		}
	}
}
