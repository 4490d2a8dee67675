package search

import (
	"context"
	"errors"
)

// StopReason says why a search ended.
type StopReason string

const (
	StopCoverage StopReason = "coverage" // the target coverage was reached
	StopRigid    StopReason = "rigid"    // nothing in the molecule can move to another minimum
	StopQuenches StopReason = "quenches" // the budget of quenches was spent
	StopTime     StopReason = "time"     // the budget of time was spent
)

// Result of a search.
type Result struct {
	Settings   Settings   `json:"settings"` // with the defaults filled in
	Minima     []Minimum  `json:"minima"`   // in the window, by ascending energy
	Coverage   Coverage   `json:"coverage"`
	StopReason StopReason `json:"stop_reason"`
	Counted    `json:"counted"`
	// Checkpoint holds all minima, those above the window too, and lets the search be continued with higher aims.
	Checkpoint Checkpoint `json:"-"`
}

// Run searches until the target coverage is reached or a budget is spent. from nil stands for a new search; otherwise the search
// goes on after that checkpoint, which must come from the same problem and settings. The minima depend on the problem, the settings
// and the seed only, not on the number of workers nor on interruptions (with a budget of time they depend on the machine as well).
// If ctx ends, Run returns its error; the rounds that were done are in the last checkpoint.
func Run(ctx context.Context, p *Problem, s Settings, from *Checkpoint, h Hooks) (*Result, error) {
	return nil, errors.New("not yet")
}
