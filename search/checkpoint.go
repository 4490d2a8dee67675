package search

// Checkpoint is everything that the next round depends on besides problem and settings. It is made after every round, serialises to
// JSON without loss, and [Run] goes on from it as if nothing had happened. Callers treat it as read-only: it shares the minima with
// the running search only until the hook returns.
type Checkpoint struct {
	Round   int       `json:"round"`  // rounds done
	Minima  []Minimum `json:"minima"` // in the order of discovery; an index never changes its meaning
	Counted `json:"counted"`
	// Stages reports the last rounds, the latest last.
	Stages []Stage `json:"stages"`
	// Discovery holds one point a round: the discovery curve.
	Discovery []DiscoveryPoint `json:"discovery"`
	// Fruitless is how many rounds in a row found nothing new in the window.
	Fruitless int `json:"fruitless"`
}

// Counted is what a search has done and what became of it.
type Counted struct {
	Quenches       int     `json:"quenches"`           // begun and brought to some end
	Evaluations    int     `json:"energy_evaluations"` // energies with or without gradient
	Inverted       int     `json:"inverted"`           // quenches that had left the stereochemistry asked for; not kept
	Broken         int     `json:"broken"`             // quenches whose atoms no longer had their bonds; not kept
	Failed         int     `json:"failed"`             // quenches that did not converge; not kept
	AboveWindow    int     `json:"above_window"`       // snapshots dropped after the crude stage because they were far above the window
	Walks          int     `json:"walks"`
	InvertedWalks  int     `json:"inverted_walks"` // walks in which a centre inverted
	InvertedAtoms  []int   `json:"inverted_atoms"` // numbers, counted from 1, of the atoms at which that happened
	ElapsedSeconds float64 `json:"elapsed_s"`
}

// Stage reports one stage of constant temperature, averaged over the walks of a round.
type Stage struct {
	Round        int     `json:"round"`
	Stage        int     `json:"stage"`
	Kind         string  `json:"kind"` // of walk
	Walks        int     `json:"walks"`
	TemperatureK float64 `json:"temperature_k"`
	Acceptance   float64 `json:"acceptance"` // fraction of moves accepted; 0 for dynamics
	EnergyKcal   float64 `json:"energy_kcal_mol"`
}

// DiscoveryPoint is a point of the discovery curve.
type DiscoveryPoint struct {
	Quenches int `json:"quenches"`
	Minima   int `json:"minima"` // in the window
}
