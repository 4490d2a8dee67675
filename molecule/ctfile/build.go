package ctfile

import (
	"errors"
	"fmt"
	"math"

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

// layout decides between a drawing and a geometry: any z makes a geometry, whatever the header says. A flat one is a geometry only if
// nothing in the record speaks against it and the header says 3D, or says nothing and the bonds are as long as those of a molecule.
func (t *table) layout(implied int) layout {
	zero, planar := true, true
	for _, a := range t.atoms {
		planar = planar && a.position[2] == 0
		zero = zero && a.position == [3]float64{}
	}
	switch {
	case zero && len(t.atoms) > 1:
		return absent
	case !planar:
		if t.dimension == "2D" {
			t.note("the header says 2D but there are z coordinates; they are read as a geometry")
		}
		return solid
	case t.dimension == "2D":
		return flat
	}
	drawn := implied > 0 || t.crowded()
	switch {
	case t.dimension == "3D" && drawn:
		t.note("the header says 3D but the coordinates are those of a flat drawing and are read as such")
		return flat
	case t.dimension == "3D":
		return solid
	case drawn || !t.lengthsOfMolecule():
		return flat
	}
	t.note("the header does not say whether the coordinates are 2D or 3D; with all hydrogens and real bond lengths they are read as a flat geometry")
	return solid
}

// crowded reports whether the record holds what no flat geometry has: wedges, or an atom of the first rows with four neighbours.
func (t *table) crowded() bool {
	neighbors := make([]int, len(t.atoms))
	for _, b := range t.bonds {
		neighbors[b.a]++
		neighbors[b.b]++
		if b.direction != plain {
			return true
		}
	}
	for i, a := range t.atoms {
		if neighbors[i] > 3 && a.element < 15 {
			return true
		}
	}
	return false
}

// lengthsOfMolecule reports whether every bond is about as long as covalent radii make it. Drawings have bonds of one length, which fits
// bonds to hydrogen and bonds between other atoms never at a time.
func (t *table) lengthsOfMolecule() bool {
	const shortest, longest = 0.78, 1.15 // triple bonds are the shortest against single-bond radii
	for _, b := range t.bonds {
		p, q := t.atoms[b.a], t.atoms[b.b]
		d := math.Hypot(p.position[0]-q.position[0], p.position[1]-q.position[1])
		if r := d / (p.element.CovalentRadius() + q.element.CovalentRadius()); r < shortest || r > longest {
			return false
		}
	}
	return len(t.bonds) > 0 || len(t.atoms) == 1
}
