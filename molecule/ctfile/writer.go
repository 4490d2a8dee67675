package ctfile

import (
	"bufio"
	"fmt"
	"io"
	"math"
	"strings"

	"tarn/molecule"
)

// WriteMolfile writes a molfile. g holds the 3D coordinates in Å or is nil; version 0 is V2000 if the molecule fits (999
// atoms and bonds, coordinates of at most five digits before the point), else V3000. Without coordinates the configuration
// of stereocentres goes into the parity field; allenes and double-bond geometry have no place there and are an error.
func WriteMolfile(w io.Writer, m *molecule.Molecule, g molecule.Geometry, version Version) error {
	return write(w, &Record{Name: m.Name, Molecule: m, Geometry: g, Version: version}, false)
}

// WriteRecord writes a record of an SD file: the molfile, the data fields and the delimiter. Nothing is written if the record
// cannot be.
func WriteRecord(w io.Writer, r *Record) error { return write(w, r, true) }

func write(w io.Writer, r *Record, delimited bool) error {
	o, err := prepare(r)
	if err != nil {
		return err
	}
	out := bufio.NewWriter(w)
	o.header(out)
	if o.version == V3000 {
		o.v3000(out)
	} else {
		o.v2000(out)
	}
	if delimited {
		for _, f := range r.Data {
			fmt.Fprintf(out, ">  <%s>\n", f.Name)
			if f.Value != "" {
				fmt.Fprintf(out, "%s\n", f.Value)
			}
			fmt.Fprintln(out)
		}
		fmt.Fprintln(out, "$$$$")
	}
	return out.Flush()
}

// output is a record that has been found writable.
type output struct {
	*Record
	version Version
	parity  []int // of each atom
	valence []int // of each atom: unstated, or the sum of its bond orders
}

func prepare(r *Record) (*output, error) {
	m := r.Molecule
	o := &output{Record: r, version: r.Version, parity: make([]int, len(m.Atoms))}
	switch o.version {
	case 0:
		o.version = V2000
		if o.misfit() != "" {
			o.version = V3000
		}
	case V2000:
		if reason := o.misfit(); reason != "" {
			return nil, fmt.Errorf("%s do not fit a V2000 molfile; write V3000", reason)
		}
	case V3000:
	default:
		return nil, fmt.Errorf("there is no molfile version %d; write V2000 or V3000", o.version)
	}
	if err := o.checkText(); err != nil {
		return nil, err
	}
	if len(r.Geometry) != 0 && len(r.Geometry) != 3*len(m.Atoms) {
		return nil, fmt.Errorf("%d coordinates for %d atoms; each atom needs three", len(r.Geometry), len(m.Atoms))
	}
	for i, x := range r.Geometry {
		if math.IsNaN(x) || math.Abs(x) >= 1e6 {
			return nil, fmt.Errorf("atom %d has the coordinate %v; only finite ones below 1000000 Å can be written", i/3+1, x)
		}
	}
	for i, b := range m.Bonds {
		if b.Order > 3 {
			return nil, fmt.Errorf("bond %d (atoms %d and %d) is quadruple, for which a molfile has no type", i+1, b.A+1, b.B+1)
		}
	}
	if r.Geometry == nil {
		if err := o.setParities(); err != nil {
			return nil, err
		}
	}
	return o, o.setValences()
}

// misfit says what of the record is beyond the columns of V2000, or "".
func (o *output) misfit() string {
	switch m := o.Molecule; {
	case len(m.Atoms) > 999:
		return fmt.Sprintf("%d atoms", len(m.Atoms))
	case len(m.Bonds) > 999:
		return fmt.Sprintf("%d bonds", len(m.Bonds))
	}
	for _, x := range o.Geometry {
		if x < -9999.9999 || x > 99999.9999 {
			return fmt.Sprintf("coordinates like %.4f", x)
		}
	}
	return ""
}

func (o *output) checkText() error {
	for what, line := range map[string]string{"name": o.Name, "comment": o.Comment} {
		if strings.ContainsAny(line, "\r\n") || strings.HasPrefix(line, "$") {
			return fmt.Errorf("the %s %q cannot be a header line; it must be one line that does not begin with $", what, line)
		}
	}
	for _, f := range o.Data {
		if f.Name == "" || strings.ContainsAny(f.Name, "<>\r\n") {
			return fmt.Errorf("the field name %q cannot be written; it must be one line without < and >", f.Name)
		}
		if f.Value == "" {
			continue
		}
		for _, line := range strings.Split(f.Value, "\n") {
			if strings.TrimSpace(line) == "" || strings.HasPrefix(line, "$$$$") || strings.Contains(line, "\r") {
				return fmt.Errorf("the value of the field %q cannot be written: a line in it is blank, begins with $$$$ or contains "+
					"a carriage return, which would end the field", f.Name)
			}
		}
	}
	return nil
}

func (o *output) setParities() error {
	m := o.Molecule
	for _, c := range m.Centers {
		if m.BondBetween(c.Atom, max(c.Neighbors[0], c.Neighbors[1])) < 0 {
			return fmt.Errorf("a molfile without coordinates cannot hold the configuration of the allene at atom %d; give a geometry", c.Atom+1)
		}
		o.parity[c.Atom] = parityOf(m, c)
	}
	for _, d := range m.DoubleBonds {
		return fmt.Errorf("a molfile without coordinates cannot hold the cis or trans geometry of the double bond between atoms %d and %d; "+
			"give a geometry", d.A+1, d.B+1)
	}
	return nil
}

// setValences states the valence of atoms to which a reader would add hydrogens.
func (o *output) setValences() error {
	m := o.Molecule
	d := &molecule.Draft{}
	sums := make([]int, len(m.Atoms))
	o.valence = make([]int, len(m.Atoms))
	for _, b := range m.Bonds {
		d.Bonds = append(d.Bonds, molecule.DraftBond(b))
		sums[b.A] += b.Order
		sums[b.B] += b.Order
	}
	for i, a := range m.Atoms {
		if a.Radical > 2 {
			a.Radical = 0
		}
		d.Atoms = append(d.Atoms, molecule.DraftAtom{Atom: a, Hydrogens: molecule.FillValence})
		o.valence[i] = unstated
	}
	filled, err := d.Build()
	if err != nil {
		return fmt.Errorf("the molecule cannot be written: %w", err)
	}
	for _, b := range filled.Bonds[len(m.Bonds):] {
		o.valence[b.A] = sums[b.A]
	}
	return nil
}
