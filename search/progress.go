package search

import (
	"math"
	"time"
)

// Coverage says how complete a search is: the estimated probability that a further draw ends in a known minimum of the window
// (Good 1953) with its 95 % interval (Esty 1983), and the estimated number of minima of the window that are still unseen
// (Chao 1984, bias-corrected).
type Coverage struct {
	Estimate float64 `json:"estimate"`
	Low      float64 `json:"low"`
	High     float64 `json:"high"`
	Unseen   float64 `json:"unseen"`
}

// Progress is what a running search tells.
type Progress struct {
	Round        int      `json:"round"`
	Quenches     int      `json:"quenches"`
	Evaluations  int      `json:"energy_evaluations"`
	Minima       int      `json:"minima"` // in the window
	Coverage     Coverage `json:"coverage"`
	Fraction     float64  `json:"fraction"`     // of the work, estimated, 0 to 1
	SecondsLeft  float64  `json:"seconds_left"` // estimated; negative if nothing can be said yet
	TemperatureK float64  `json:"temperature_k"`
	EnergyKcal   float64  `json:"energy_kcal_mol"`        // of the walk that reported last
	LowestKcal   float64  `json:"lowest_energy_kcal_mol"` // of the lowest minimum
}

// Hooks are called by a running search, never by two goroutines at a time. Nil hooks are left out.
type Hooks struct {
	// Progress is called after quenches, at most some ten times a second, and after every round.
	Progress func(Progress)
	// Checkpoint is called after every round; if it returns an error the search ends with it.
	Checkpoint func(Checkpoint) error
}

// between is the shortest time between two reports of progress within a round.
const between = 100 * time.Millisecond

// notice is called by walks after every quench. It returns whether there is time to go on.
func (r *run) notice(temperatureK, energy float64, evaluations int) bool {
	r.mu.Lock()
	defer r.mu.Unlock()
	r.running.Quenches++
	r.running.Evaluations += evaluations
	r.latest.TemperatureK = temperatureK
	if !math.IsNaN(energy) && !math.IsInf(energy, 0) { // a quench that failed has no energy to show
		r.latest.EnergyKcal = energy
	}
	if now := time.Now(); r.hooks.Progress != nil && now.Sub(r.shown) >= between {
		r.shown = now
		r.latest.Quenches, r.latest.Evaluations = r.running.Quenches, r.running.Evaluations
		r.latest.Fraction, r.latest.SecondsLeft = r.fraction(r.latest.Coverage, r.running.Quenches)
		r.hooks.Progress(r.latest)
	}
	return !r.outOfTime()
}

// report tells of the round that is done.
func (r *run) report() {
	r.mu.Lock()
	defer r.mu.Unlock()
	c := &r.checkpoint
	r.running = c.Counted
	counts := r.counts()
	r.latest.Round, r.latest.Quenches, r.latest.Evaluations = c.Round, c.Quenches, c.Evaluations
	r.latest.Minima, r.latest.Coverage = counts.Observed, coverageOf(counts)
	r.latest.LowestKcal = 0
	if len(c.Minima) > 0 {
		r.latest.LowestKcal = r.lowest()
	}
	r.latest.Fraction, r.latest.SecondsLeft = r.fraction(r.latest.Coverage, c.Quenches)
	if r.hooks.Progress != nil {
		r.hooks.Progress(r.latest)
	}
}

// fraction estimates how much of the work is done and how many seconds are left. The missing coverage falls about as one over the number of
// quenches, so the quenches needed are those done times missing over allowed; a budget may end the search earlier.
func (r *run) fraction(c Coverage, quenches int) (fraction, secondsLeft float64) {
	if quenches == 0 {
		return 0, -1
	}
	if c.Estimate > 0 {
		missing, allowed := 1-c.Estimate, 1-r.settings.Coverage
		lowMissing, lowAllowed := 1-c.Low, 1-r.settings.Coverage+slack
		need := max(1, missing/max(allowed, 1e-3), lowMissing/lowAllowed)
		fraction = min(0.99, 1/need)
	}
	fraction = max(fraction, float64(quenches)/float64(r.settings.MaxQuenches))
	elapsed := r.elapsed()
	if r.settings.MaxSeconds > 0 {
		fraction = max(fraction, elapsed/r.settings.MaxSeconds)
	}
	fraction = min(1, fraction)
	if fraction == 0 {
		return 0, -1
	}
	return fraction, elapsed * (1 - fraction) / fraction
}
