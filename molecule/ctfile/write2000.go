package ctfile

import (
	"fmt"
	"io"

	"tarn/molecule"
)

func (o *output) header(w io.Writer) {
	dimension := "  "
	if o.Geometry != nil {
		dimension = "3D"
	}
	// Initials, program, date and time (left open, so that equal records give equal files), dimension.
	fmt.Fprintf(w, "%s\n  %-8s%10s%s\n%s\n", o.Name, "Tarn", "", dimension, o.Comment)
}

// chiral is the chiral flag: some centre has a configuration.
func (o *output) chiral() int {
	if len(o.Molecule.Centers) > 0 {
		return 1
	}
	return 0
}

func (o *output) v2000(w io.Writer) {
	m := o.Molecule
	fmt.Fprintf(w, "%3d%3d  0  0%3d  0  0  0  0  0999 V2000\n", len(m.Atoms), len(m.Bonds), o.chiral())
	for i, a := range m.Atoms {
		var at [3]float64
		if o.Geometry != nil {
			at = o.Geometry.At(i)
		}
		valence := max(0, o.valence[i])
		if o.valence[i] == 0 {
			valence = 15
		}
		fmt.Fprintf(w, "%10.4f%10.4f%10.4f %-3s 0  0%3d  0  0%3d  0  0  0  0  0  0\n", at[0], at[1], at[2], a.Element, o.parity[i], valence)
	}
	for _, b := range m.Bonds {
		fmt.Fprintf(w, "%3d%3d%3d  0\n", b.A+1, b.B+1, b.Order)
	}
	o.properties(w, "CHG", func(a molecule.Atom) int { return a.Charge })
	o.properties(w, "RAD", radicalCode)
	o.properties(w, "ISO", func(a molecule.Atom) int { return a.Isotope })
	fmt.Fprintln(w, "M  END")
}

// radicalCode is 2 for a doublet and 3 for a triplet; more unpaired electrons follow from the stated valence.
func radicalCode(a molecule.Atom) int {
	if a.Radical == 1 || a.Radical == 2 {
		return a.Radical + 1
	}
	return 0
}

// properties writes M lines of at most eight entries.
func (o *output) properties(w io.Writer, name string, value func(molecule.Atom) int) {
	var atoms []int
	for i, a := range o.Molecule.Atoms {
		if value(a) != 0 {
			atoms = append(atoms, i)
		}
	}
	for len(atoms) > 0 {
		n := min(8, len(atoms))
		fmt.Fprintf(w, "M  %s%3d", name, n)
		for _, i := range atoms[:n] {
			fmt.Fprintf(w, " %3d %3d", i+1, value(o.Molecule.Atoms[i]))
		}
		fmt.Fprintln(w)
		atoms = atoms[n:]
	}
}
