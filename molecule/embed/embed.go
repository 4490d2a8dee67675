package embed

import (
	"context"
	"errors"
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
// specified, the others either way; no bond passes through a ring. The same state of rng gives
// the same geometry; calls in a row give different ones. To draw many geometries of one molecule use [New].
func Embed(ctx context.Context, m *molecule.Molecule, ref Field, rng *rand.Rand) (molecule.Geometry, error) {
	e, err := New(m, ref)
	if err != nil {
		return nil, err
	}
	return e.Draw(ctx, rng)
}

// Embedder draws geometries of one molecule. It may be used by any number of goroutines.
type Embedder struct{}

// New prepares the bounds and the stereo constraints of a molecule. It returns an error if the molecule has no atoms or
// more than one fragment.
func New(m *molecule.Molecule, ref Field) (*Embedder, error) {
	return nil, errors.New("embed: not assembled")
}

// Draw returns a random geometry like [Embed]. It returns [ErrNoGeometry] after [Tries] tries, or the error of ctx.
func (e *Embedder) Draw(ctx context.Context, rng *rand.Rand) (molecule.Geometry, error) {
	return nil, ErrNoGeometry
}
