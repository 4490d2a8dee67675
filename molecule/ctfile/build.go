package ctfile

import (
	"errors"
	"fmt"

	"tarn/molecule"
)

// layout says what the coordinates of a table are.
type layout int

const (
	absent layout = iota // all zero
	flat                 // a drawing
	solid                // positions in space
)

// build completes the table to a molecule and its geometry.
func (t *table) build(name string) (*molecule.Molecule, molecule.Geometry, error) {
	m, err := t.draft(name).Build()
	if err != nil {
		return nil, nil, t.buildFault(err)
	}
	implied := len(m.Atoms) - len(t.atoms)
	switch t.layout(implied) {
	case absent:
		m, err = t.stereoFromParity(m)
	case flat:
		m, err = t.stereoFromDrawing(m, flat)
	case solid:
		if implied > 0 {
			t.note(fmt.Sprintf("%d hydrogens have no coordinates in the file, so its geometry is not used; "+
				"the configuration was read from it", implied))
			m, err = t.stereoFromDrawing(m, solid)
			break
		}
		g := make(molecule.Geometry, 0, 3*len(t.atoms))
		for _, a := range t.atoms {
			g = append(g, a.position[:]...)
		}
		if m, err = m.StereoFromGeometry(g); err == nil {
			return m, g, nil
		}
	}
	if err != nil {
		return nil, nil, t.buildFault(err)
	}
	return m, nil, nil
}

// buildFault gives an error of the molecule the line of the atom that it names.
func (t *table) buildFault(err error) error {
	f := &fault{line: t.atoms[0].line, reason: err.Error(), err: err}
	atom := -1
	var valence *molecule.ValenceError
	var build *molecule.BuildError
	var kekule *molecule.KekuleError
	var stereo *molecule.StereoError
	switch {
	case errors.As(err, &valence):
		atom = valence.Atom
	case errors.As(err, &build):
		atom = build.Atom
	case errors.As(err, &kekule) && len(kekule.Atoms) > 0:
		atom = kekule.Atoms[0]
		f.reason += "; in a molfile write such a hydrogen as an atom, or single and double bonds in place of type 4"
	case errors.As(err, &stereo):
		atom = stereo.Atom
	}
	if atom >= 0 && atom < len(t.atoms) {
		f.line = t.atoms[atom].line
	}
	return f
}

func (t *table) draft(name string) *molecule.Draft {
	d := &molecule.Draft{Name: name}
	sums := make([]int, len(t.atoms))
	ring := make([]bool, len(t.atoms))
	for _, b := range t.bonds {
		order := b.kind
		if b.kind == aromatic {
			order = 0
			ring[b.a], ring[b.b] = true, true
		}
		sums[b.a] += max(1, order)
		sums[b.b] += max(1, order)
		d.Bonds = append(d.Bonds, molecule.DraftBond{A: b.a, B: b.b, Order: order})
	}
	for i, a := range t.atoms {
		atom := molecule.DraftAtom{
			Atom:      molecule.Atom{Element: a.element, Isotope: a.isotope, Charge: a.charge},
			Hydrogens: molecule.FillValence,
			Aromatic:  ring[i],
		}
		switch a.radical {
		case 1:
			t.note("singlet radicals are kept as two unpaired electrons")
			atom.Radical = 2
		case 2, 3:
			atom.Radical = a.radical - 1
		}
		if a.valence != unstated {
			// In an aromatic ring the double bond still to be placed takes one of the bonds counted.
			if ring[i] && a.valence > sums[i] {
				sums[i]++
			}
			atom.Hydrogens = max(0, a.valence-sums[i])
		}
		d.Atoms = append(d.Atoms, atom)
	}
	return d
}

// layout decides between a drawing and a geometry: any z makes a geometry, whatever the header says; a flat one is a
// geometry only if the header says 3D and nothing in the record speaks against it.
func (t *table) layout(implied int) layout {
	zero, planar := true, true
	neighbors := make([]int, len(t.atoms))
	marked := false
	for _, a := range t.atoms {
		planar = planar && a.position[2] == 0
		zero = zero && a.position == [3]float64{}
	}
	for _, b := range t.bonds {
		neighbors[b.a]++
		neighbors[b.b]++
		marked = marked || b.direction != plain
	}
	switch {
	case zero && len(t.atoms) > 1:
		return absent
	case !planar:
		if t.dimension == "2D" {
			t.note("the header says 2D but there are z coordinates; they are read as a geometry")
		}
		return solid
	case t.dimension != "3D":
		return flat
	}
	crowded := false
	for i, a := range t.atoms {
		crowded = crowded || neighbors[i] > 3 && a.element < 15
	}
	if marked || crowded || implied > 0 {
		t.note("the header says 3D but the coordinates are those of a flat drawing and are read as such")
		return flat
	}
	return solid
}
