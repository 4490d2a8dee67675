package search

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
