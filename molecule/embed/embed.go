package embed

import (
	"context"
	"errors"
	"fmt"
	"math/rand/v2"

	"tarn/molecule"
)

// Field gives reference lengths in Å of bonds i–j and reference angles in radians of i–j–k, j in the middle, for bonded
// atoms. forcefield.MMFF94 is one.
type Field interface {
	ReferenceBond(i, j int) float64
	ReferenceAngle(i, j, k int) float64
}

// ErrNoGeometry is returned when none of the tries gave a geometry with the right stereo and no bond through a ring.
var ErrNoGeometry = errors.New("no geometry found that fits the molecule and its stereodescriptors")

// Tries is how often one call draws before it gives up.
const Tries = 10

// Embed returns a random 3D geometry of a connected molecule. Specified stereocentres and double bonds come out as
// specified, the others either way; no bond passes through a ring. ref nil stands for covalent radii and ideal angles. The
// same state of rng gives the same geometry; calls in a row give different ones. Use [New] to draw many geometries of one
// molecule.
func Embed(ctx context.Context, m *molecule.Molecule, ref Field, rng *rand.Rand) (molecule.Geometry, error) {
	e, err := New(m, ref)
	if err != nil {
		return nil, err
	}
	return e.Draw(ctx, rng)
}

// Embedder draws geometries of one molecule. It may be used by any number of goroutines, each with its own generator.
type Embedder struct {
	graph   *graph
	strict  *constraints // the first tries
	lenient *constraints // wider angles and torsions, for strained cages
}

// New prepares the bounds and the stereo constraints of a molecule. It returns an error if the molecule has no atoms or
// more than one fragment. ref nil stands for covalent radii and ideal angles.
func New(m *molecule.Molecule, ref Field) (*Embedder, error) {
	switch parts := m.Fragments(); {
	case len(parts) == 0:
		return nil, errors.New("the molecule has no atoms: there is nothing to place")
	case len(parts) > 1:
		return nil, fmt.Errorf("the molecule has %d fragments (atom %d is not connected to atom 1): choose one of them", len(parts), parts[1][0]+1)
	}
	g := newGraph(m)
	if ref == nil {
		ref = ideal{g}
	}
	return &Embedder{graph: g, strict: newConstraints(g, ref, 1), lenient: newConstraints(g, ref, 2.5)}, nil
}

// Draw returns a random geometry like [Embed]. It returns [ErrNoGeometry] after [Tries] tries, or the error of ctx.
func (e *Embedder) Draw(ctx context.Context, rng *rand.Rand) (molecule.Geometry, error) {
	var reason error
	for try := range Tries {
		var g molecule.Geometry
		g, reason = e.try(ctx, try, rng)
		if err := ctx.Err(); err != nil {
			return nil, fmt.Errorf("first geometry: %w", err)
		}
		if reason == nil {
			return g, nil
		}
	}
	return nil, fmt.Errorf("%w (%d tries; the last: %w)", ErrNoGeometry, Tries, reason)
}

// try makes one geometry and checks it. The first tries alternate between the two kinds of start with strict bounds, the
// later ones with lenient bounds.
func (e *Embedder) try(ctx context.Context, try int, rng *rand.Rand) (molecule.Geometry, error) {
	c := e.strict
	if try >= strictTries {
		c = e.lenient
	}
	draw := c.choose(rng)
	var x []float64
	if try%2 == 0 {
		x = draw.metricStart(rng)
	} else {
		x = draw.randomStart(rng)
	}
	g, err := draw.refine(ctx, x)
	if err != nil {
		return nil, err
	}
	if err := draw.check(g); err != nil {
		return nil, err
	}
	if err := e.graph.penetration(g); err != nil {
		return nil, err
	}
	return g, nil
}

const strictTries = 4
