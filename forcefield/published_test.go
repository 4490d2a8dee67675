package forcefield

import (
	"bytes"
	_ "embed"
	"errors"
	"fmt"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/forcefield/internal/sketch"
	"tarn/molecule"
)

//go:embed testdata/published.txt
var published []byte

// publishedMolecule is a molecule with its published results; testdata/published.txt names the source.
type publishedMolecule struct {
	name        string
	energy      float64 // kcal/mol
	elements    []molecule.Element
	charges     []int // formal
	types       []int
	partial     []float64 // e
	coordinates []float64 // Å
	bonds       []molecule.Bond
	other       *publishedMolecule // the same molecule drawn differently, if there is such a drawing
}

func (p *publishedMolecule) molecule(t testing.TB) *molecule.Molecule {
	atoms := make([]molecule.Atom, len(p.elements))
	for i, e := range p.elements {
		atoms[i] = molecule.Atom{Element: e, Charge: p.charges[i]}
	}
	m, err := molecule.New(p.name, atoms, p.bonds, nil, nil)
	require.NoError(t, err)
	return m
}

// publishedChecks reads the published results.
func publishedChecks(t testing.TB) []*publishedMolecule {
	var all []*publishedMolecule
	for n, line := range bytes.Split(published, []byte("\n")) {
		fields := strings.Fields(string(line))
		if len(fields) == 0 || fields[0] == "#" {
			continue
		}
		if fields[0] == "molecule" {
			all = append(all, &publishedMolecule{})
		}
		require.NoError(t, all[len(all)-1].read(fields), "line %d", n+1)
	}
	return all
}

// publishedCheck returns the results of one molecule.
func publishedCheck(t testing.TB, name string) *publishedMolecule {
	for _, p := range publishedChecks(t) {
		if p.name == name {
			return p
		}
	}
	require.Fail(t, "no such molecule", name)
	return nil
}

func (p *publishedMolecule) read(fields []string) error {
	switch fields[0] {
	case "molecule":
		p.name = fields[1]
		_, err := fmt.Sscan(fields[2], &p.energy)
		return err
	case "atom":
		var charge, atomType int
		var partial, x, y, z float64
		_, err := fmt.Sscan(strings.Join(fields[2:], " "), &charge, &atomType, &partial, &x, &y, &z)
		p.elements = append(p.elements, molecule.ElementBySymbol(fields[1]))
		p.charges, p.types, p.partial = append(p.charges, charge), append(p.types, atomType), append(p.partial, partial)
		p.coordinates = append(p.coordinates, x, y, z)
		return err
	case "bonds":
		for _, f := range fields[1:] {
			b, err := sketch.Bond(f)
			if err != nil {
				return err
			}
			p.bonds = append(p.bonds, b)
		}
		return nil
	case "also":
		return p.readOther(fields[1:])
	}
	return errors.New("unknown line")
}

// readOther reads the second drawing: charges and bonds that differ from the first.
func (p *publishedMolecule) readOther(fields []string) error {
	other := *p
	other.charges, other.bonds = append([]int(nil), p.charges...), append([]molecule.Bond(nil), p.bonds...)
	p.other = &other
	for _, f := range fields {
		if strings.Contains(f, ":") {
			var atom, charge int
			if _, err := fmt.Sscanf(f, "%d:%d", &atom, &charge); err != nil {
				return err
			}
			other.charges[atom-1] = charge
			continue
		}
		b, err := sketch.Bond(f)
		if err != nil {
			return err
		}
		found := false
		for n, old := range other.bonds {
			if old.A == b.A && old.B == b.B {
				other.bonds[n], found = b, true
			}
		}
		if !found {
			return fmt.Errorf("bond %s is not in the first drawing", f)
		}
	}
	return nil
}

// requirePublished compares types, charges and energy with the published ones.
func requirePublished(t *testing.T, p *publishedMolecule) {
	f, err := NewMMFF94(p.molecule(t), Options{})
	require.NoError(t, err)
	require.Equal(t, p.types, f.AtomTypes())
	require.InDeltaSlice(t, p.partial, f.PartialCharges(), 1e-4)
	require.InDelta(t, p.energy, f.Energy(p.coordinates, nil), 1e-4)
}

// TestPublishedEnergies covers every atom symbol, every class of interaction and every empirical rule that the validation
// suite reaches, in both drawings.
func TestPublishedEnergies(t *testing.T) {
	checks := publishedChecks(t)
	require.Len(t, checks, 76)
	drawnTwice := 0
	for _, p := range checks {
		t.Run(p.name, func(t *testing.T) {
			requirePublished(t, p)
			if p.other != nil {
				drawnTwice++
				requirePublished(t, p.other)
			}
		})
	}
	require.Equal(t, 17, drawnTwice)
}
