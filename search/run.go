package search

import (
	"cmp"
	"context"
	"errors"
	"fmt"
	"slices"
	"sync"
	"time"

	"tarn/dedupe"
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

// run is a search in progress.
type run struct {
	problem    *Problem
	settings   Settings
	hooks      Hooks
	index      *dedupe.Index // of checkpoint.Minima
	rough      *dedupe.Index // the same with wide tolerances, for geometries on their way to a minimum
	checkpoint Checkpoint

	began   time.Time
	earlier float64 // seconds spent before this sitting

	mu      sync.Mutex // guards what follows, which walks report to
	shown   time.Time
	latest  Progress
	running Counted // with the quenches of the round in flight
}

// Run searches until the target coverage is reached or a budget is spent. from nil stands for a new search; otherwise the search
// goes on after that checkpoint, which must come from the same problem and seed. The minima depend on the problem, the settings
// and the seed only, not on the number of workers nor on interruptions (with a budget of time they depend on the machine as well).
// If ctx ends, Run returns its error; the rounds that were done are in the last checkpoint.
func Run(ctx context.Context, p *Problem, s Settings, from *Checkpoint, h Hooks) (*Result, error) {
	if err := s.Validate(); err != nil {
		return nil, err
	}
	r := &run{
		problem: p, settings: s.WithDefaults(p.Cluster()), hooks: h,
		index: dedupe.NewIndex(p.Symmetry, p.tolerance()),
		rough: dedupe.NewIndex(p.Symmetry, p.roughTolerance()),
		began: time.Now(),
	}
	if from != nil {
		if err := r.goOnFrom(from); err != nil {
			return nil, err
		}
	}
	r.running = r.checkpoint.Counted
	for {
		if reason := r.stop(); reason != "" {
			return r.result(ctx, reason)
		}
		if err := r.round(ctx); err != nil {
			return nil, err
		}
		if r.checkpoint.Round >= leastRounds && len(r.checkpoint.Minima) == 0 {
			return nil, r.noMinimum()
		}
	}
}

func (r *run) goOnFrom(c *Checkpoint) error {
	for i := range c.Minima {
		if n := len(c.Minima[i].X); n != 3*r.problem.Atoms() {
			return fmt.Errorf("the checkpoint belongs to another molecule: minimum %d has %d coordinates, not %d", i+1, n, 3*r.problem.Atoms())
		}
		r.index.Add(c.Minima[i].X, c.Minima[i].Energy)
		r.rough.Add(c.Minima[i].X, c.Minima[i].Energy)
	}
	r.checkpoint = c.clone()
	r.earlier = c.ElapsedSeconds
	return nil
}

// clone shares coordinates, which never change, and nothing else.
func (c *Checkpoint) clone() Checkpoint {
	out := *c
	out.Minima = slices.Clone(c.Minima)
	out.Stages = slices.Clone(c.Stages)
	out.Discovery = slices.Clone(c.Discovery)
	out.InvertedAtoms = slices.Clone(c.InvertedAtoms)
	return out
}

// stop returns why the search is over, or "".
func (r *run) stop() StopReason {
	c := &r.checkpoint
	counts := r.counts()
	switch {
	case r.rigid():
		return StopRigid
	case r.complete(counts):
		return StopCoverage
	case c.Quenches >= r.settings.MaxQuenches:
		return StopQuenches
	case r.outOfTime():
		return StopTime
	}
	return ""
}

// rigid tells whether the molecule has nothing that moves and the quenches of a first round, from random geometries and after kicks, have
// found one minimum.
func (r *run) rigid() bool {
	c := &r.checkpoint
	return !r.problem.Cluster() && r.problem.moves.Rigid() && c.Round > 0 && len(c.Minima) == 1
}

func (r *run) elapsed() float64 { return r.earlier + time.Since(r.began).Seconds() }

func (r *run) outOfTime() bool {
	return r.settings.MaxSeconds > 0 && r.elapsed() >= r.settings.MaxSeconds
}

// closeRound describes what is new and tells the hooks. before is the number of minima before the round.
func (r *run) closeRound(ctx context.Context, before int) error {
	c := &r.checkpoint
	top := r.lowest() + r.settings.WindowKcal
	var fresh []*Minimum
	for i := before; i < len(c.Minima); i++ {
		if c.Minima[i].Energy <= top {
			fresh = append(fresh, &c.Minima[i])
		}
	}
	c.Fruitless++
	if len(fresh) > 0 {
		c.Fruitless = 0
	}
	if err := r.problem.describe(ctx, fresh, r.settings.Workers); err != nil {
		return err
	}
	c.Discovery = append(c.Discovery, DiscoveryPoint{Quenches: c.Quenches, Minima: len(r.inWindow())})
	c.Round++
	c.ElapsedSeconds = r.elapsed()
	r.report()
	if r.hooks.Checkpoint != nil {
		if err := r.hooks.Checkpoint(c.clone()); err != nil {
			return fmt.Errorf("keeping the checkpoint of round %d: %w", c.Round, err)
		}
	}
	return nil
}

// ErrNoMinimum says that no quench ended in a minimum of the molecule.
var ErrNoMinimum = errors.New("the search found no minimum")

func (r *run) noMinimum() error {
	c := &r.checkpoint
	return fmt.Errorf("%w: of %d quenches %d did not converge, %d left the stereochemistry asked for, %d lost a bond",
		ErrNoMinimum, c.Quenches, c.Failed, c.Inverted, c.Broken)
}

func (r *run) result(ctx context.Context, reason StopReason) (*Result, error) {
	c := &r.checkpoint
	if len(c.Minima) == 0 {
		return nil, r.noMinimum()
	}
	inWindow := r.inWindow()
	undescribed := make([]*Minimum, len(inWindow))
	for k, i := range inWindow {
		undescribed[k] = &c.Minima[i]
	}
	if err := r.problem.describe(ctx, undescribed, r.settings.Workers); err != nil {
		return nil, err
	}
	c.ElapsedSeconds = r.elapsed()
	result := &Result{
		Settings: r.settings, StopReason: reason, Counted: c.Counted, Coverage: coverageOf(r.counts()), Checkpoint: c.clone(),
	}
	if reason == StopRigid {
		result.Coverage = Coverage{Estimate: 1, Low: 1, High: 1}
	}
	for _, i := range inWindow {
		result.Minima = append(result.Minima, c.Minima[i])
	}
	slices.SortStableFunc(result.Minima, func(a, b Minimum) int { return cmp.Compare(a.Energy, b.Energy) })
	return result, nil
}
