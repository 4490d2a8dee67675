package embed

import (
	"context"
	"errors"
	"fmt"
	"math"
	"math/rand/v2"
	"sync"

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

// MaxAtoms is the size up to which geometries are made; the time grows with the cube of the number of atoms.
const MaxAtoms = 1000

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
	strict  *constraints        // for the first tries
	lenient func() *constraints // wider angles and torsions, for strained cages; made when they are needed
}

// New prepares the bounds and the stereo constraints of a molecule. It returns an error if the molecule has no atoms, more
// than one fragment or more than [MaxAtoms]. ref nil stands for covalent radii and ideal angles.
func New(m *molecule.Molecule, ref Field) (*Embedder, error) {
	switch parts := m.Fragments(); {
	case len(parts) == 0:
		return nil, errors.New("the molecule has no atoms: there is nothing to place")
	case len(parts) > 1:
		return nil, fmt.Errorf("the molecule has %d fragments (atom %d is not connected to atom 1): choose one of them", len(parts), parts[1][0]+1)
	}
	if len(m.Atoms) > MaxAtoms {
		return nil, fmt.Errorf("the molecule has %d atoms; first geometries are made for up to %d: give coordinates with it", len(m.Atoms), MaxAtoms)
	}
	g := newGraph(m)
	if ref == nil {
		ref = ideal{g}
	}
	return &Embedder{
		graph:   g,
		strict:  newConstraints(g, ref, 1),
		lenient: sync.OnceValue(func() *constraints { return newConstraints(g, ref, lenience) }),
	}, nil
}

// Draw returns a random geometry like [Embed]. It returns [ErrNoGeometry] after [Tries] tries, or the error of ctx.
func (e *Embedder) Draw(ctx context.Context, rng *rand.Rand) (molecule.Geometry, error) {
	best := candidate{violation: math.Inf(1)}
	standing := 0 // candidates that stood the checks
	var reason error
	for try := range Tries {
		c, err := e.try(ctx, try, rng)
		if ctx.Err() != nil {
			return nil, fmt.Errorf("first geometry: %w", ctx.Err())
		}
		if err != nil {
			reason = err
			continue
		}
		standing++
		if c.violation < best.violation {
			best = c
		}
		if best.violation < fitting || best.violation < tolerable && standing >= enough {
			break
		}
	}
	if best.geometry == nil {
		return nil, fmt.Errorf("%w (%d tries; the last: %w)", ErrNoGeometry, Tries, reason)
	}
	return best.geometry, nil
}

// candidate is a geometry that stood the checks, with what is left of the error function.
type candidate struct {
	geometry  molecule.Geometry
	violation float64
}

// On the test set what is left of the error function tells sound geometries from strained ones: taxanes whose rings are
// folded well stay below fitting, folded badly above; cages with a hydrogen inside keep more than tolerable.
const (
	fitting   = 0.004 // taken at once
	tolerable = 0.07  // taken when enough candidates have been compared
	enough    = 3
	// strictTries are made with bounds of the usual width.
	strictTries = 6
	// lenience is how many times wider the ranges of angles are for the other tries.
	lenience = 2.5
)

// try makes one geometry and checks it. Tries alternate between the two kinds of start.
func (e *Embedder) try(ctx context.Context, try int, rng *rand.Rand) (candidate, error) {
	c := e.strict
	if try >= strictTries {
		c = e.lenient()
	}
	d := c.choose(rng)
	start := d.metricStart
	if try%2 == 1 {
		start = d.randomStart
	}
	g, violation, err := d.refine(ctx, start(rng))
	if err != nil {
		return candidate{}, err
	}
	if err := d.check(g); err != nil {
		return candidate{}, err
	}
	if err := e.graph.penetration(g); err != nil {
		return candidate{}, err
	}
	return candidate{g, violation}, nil
}
