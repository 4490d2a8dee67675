package search

import (
	"errors"
	"fmt"
	"math"
	"runtime"
)

// Method is the way in which walks move.
type Method string

const (
	Anneal   Method = "anneal"   // Metropolis Monte Carlo, cooled and reheated
	Dynamics Method = "dynamics" // Langevin dynamics at high temperature
	Mixed    Method = "mixed"    // walks of both kinds in every round
)

// Methods lists the methods in the order in which they are shown.
var Methods = []Method{Anneal, Dynamics, Mixed}

// Settings of a search. The zero value of a field stands for its default; the JSON names are those of a job request.
type Settings struct {
	Method      Method  `json:"method,omitempty"`          // default anneal
	Seed        uint64  `json:"seed"`                      // of all random streams
	WindowKcal  float64 `json:"window_kcal_mol,omitempty"` // energies above the lowest minimum that matter; default 6, for clusters everything
	Coverage    float64 `json:"coverage,omitempty"`        // at which the search stops, 0 to 1; default 0.99, for clusters 0.9999
	MaxQuenches int     `json:"max_quenches,omitempty"`    // budget; default 200,000
	MaxSeconds  float64 `json:"max_seconds,omitempty"`     // budget of wall time over all sittings; default none
	// TemperatureK is the temperature of populations; default 298.15. It does not steer the search.
	TemperatureK float64 `json:"temperature_k,omitempty"`
	// Workers is the number of walks that run at a time; default one for each processor. It never changes the result.
	Workers int `json:"-"`
}

const (
	defaultWindow      = 6.0
	clusterWindow      = 1000.0 // units of the well depth: everything
	defaultCoverage    = 0.99
	clusterCoverage    = 0.9999 // many minima of clusters have very small basins
	defaultMaxQuenches = 200_000
	defaultTemperature = 298.15
	maxTemperature     = 10_000
)

// ErrZeroBudget is for callers that see a user ask for no quenches or no time: in Settings a zero would stand for the default.
var ErrZeroBudget = errors.New("a budget of zero leaves nothing to do: leave it out for the default, or give a positive number")

// WithDefaults returns the settings with every zero replaced by its default. cluster says that the problem is a Lennard-Jones cluster.
func (s Settings) WithDefaults(cluster bool) Settings {
	if s.Method == "" {
		s.Method = Anneal
	}
	if s.WindowKcal == 0 {
		s.WindowKcal = defaultWindow
		if cluster {
			s.WindowKcal = clusterWindow
		}
	}
	if s.Coverage == 0 {
		s.Coverage = defaultCoverage
		if cluster {
			s.Coverage = clusterCoverage
		}
	}
	if s.MaxQuenches == 0 {
		s.MaxQuenches = defaultMaxQuenches
	}
	if s.TemperatureK == 0 {
		s.TemperatureK = defaultTemperature
	}
	if s.Workers == 0 {
		s.Workers = runtime.GOMAXPROCS(0)
	}
	return s
}

// SettingError says which setting cannot be used, by its JSON name, and what would do.
type SettingError struct {
	Name, Reason string
}

func (e *SettingError) Error() string { return e.Name + ": " + e.Reason }

// Validate returns a [SettingError] for the first setting that cannot be used.
func (s Settings) Validate() error {
	fault := func(name, format string, arguments ...any) error {
		return &SettingError{name, fmt.Sprintf(format, arguments...)}
	}
	usable := func(v, most float64) bool { return v == 0 || v > 0 && v <= most && !math.IsNaN(v) }
	switch s.Method {
	case "", Anneal, Dynamics, Mixed:
	default:
		return fault("method", "there is no method %q; use anneal, dynamics or mixed", string(s.Method))
	}
	switch {
	case !usable(s.WindowKcal, clusterWindow):
		return fault("window_kcal_mol", "%v is no energy window; give a positive number of kcal/mol up to %g", s.WindowKcal, clusterWindow)
	case !usable(s.Coverage, 1):
		return fault("coverage", "%v is no target; give a fraction above 0 and up to 1, such as 0.99", s.Coverage)
	case s.MaxQuenches < 0:
		return fault("max_quenches", "%d quenches cannot be done; give a positive number", s.MaxQuenches)
	case !usable(s.MaxSeconds, math.MaxFloat64):
		return fault("max_seconds", "%v seconds cannot be spent; give a positive number", s.MaxSeconds)
	case !usable(s.TemperatureK, maxTemperature):
		return fault("temperature_k", "%v K is no usable temperature; give a number above 0 and up to %d K", s.TemperatureK, maxTemperature)
	case s.Workers < 0:
		return fault("workers", "%d workers cannot work; give a positive number", s.Workers)
	}
	return nil
}
