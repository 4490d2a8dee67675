package notation

import (
	"errors"
	"fmt"
	"io"
	"strings"

	"tarn/molecule"
	"tarn/molecule/ctfile"
	"tarn/molecule/smiles"
	"tarn/molecule/xyz"
)

// Input is a molecule as a request gives it: exactly one of SMILES, Molfile, XYZ and LJ. Charge is the total charge of an XYZ input.
type Input struct {
	Name    string `json:"name,omitempty" maxLength:"200" doc:"A name of your own for the molecule"`
	SMILES  string `json:"smiles,omitempty" maxLength:"100000" doc:"OpenSMILES"`
	Molfile string `json:"molfile,omitempty" doc:"A molfile or the first record of an SD file, V2000 or V3000"`
	XYZ     string `json:"xyz,omitempty" doc:"An XYZ frame in Å; bonds are perceived from distances"`
	Charge  int    `json:"charge,omitempty" minimum:"-100" maximum:"100" doc:"Total charge of an XYZ input"`
	LJ      int    `json:"lj,omitempty" minimum:"0" doc:"A cluster of this many Lennard-Jones atoms in reduced units instead of a molecule"`
}

// Reading is what was understood of an input.
type Reading struct {
	Name     string
	Molecule *molecule.Molecule
	Geometry molecule.Geometry // Å; nil if the input has no 3D coordinates
	Notes    []string          // what was read in one way although the input allows another
}

// InputError says which part of an [Input] could not be read. Err is the error of the notation, such as *smiles.SyntaxError.
type InputError struct {
	Part string // smiles, molfile, xyz or molecule
	Err  error
}

func (e *InputError) Error() string { return e.Err.Error() }

// Unwrap returns the error of the notation.
func (e *InputError) Unwrap() error { return e.Err }

// ErrChoice says that an input does not hold exactly one notation.
var ErrChoice = errors.New("give the molecule in exactly one of smiles, molfile, xyz and lj")

// Read returns the molecule of the input, which must be a single one: a salt or mixture is a *[FragmentsError]. All errors are wrapped
// in *[InputError]. A cluster has no molecule: Read must not be called for it.
func (in Input) Read() (*Reading, error) {
	r, err := in.Parse()
	if err != nil {
		return nil, err
	}
	if err := single(r.Molecule); err != nil {
		return nil, &InputError{"molecule", err}
	}
	return r, nil
}

// Parse is Read that allows several fragments.
func (in Input) Parse() (*Reading, error) {
	given := 0
	for _, s := range []string{in.SMILES, in.Molfile, in.XYZ} {
		if strings.TrimSpace(s) != "" {
			given++
		}
	}
	if given != 1 || in.LJ != 0 {
		return nil, &InputError{"molecule", ErrChoice}
	}
	r, part, err := in.read()
	if err != nil {
		return nil, &InputError{part, err}
	}
	if in.Name != "" {
		r.Name = in.Name
	}
	return r, nil
}

func (in Input) read() (*Reading, string, error) {
	switch {
	case in.Molfile != "":
		record, err := ctfile.NewReader(strings.NewReader(in.Molfile)).Read()
		if errors.Is(err, io.EOF) {
			err = errors.New("the molfile is empty; paste the whole file, header lines included")
		}
		if err != nil {
			return nil, "molfile", err
		}
		return &Reading{record.Name, record.Molecule, record.Geometry, record.Notes}, "molfile", nil
	case in.XYZ != "":
		frame, err := xyz.NewReader(strings.NewReader(in.XYZ), xyz.Options{Charge: in.Charge}).Read()
		if errors.Is(err, io.EOF) {
			err = errors.New("the XYZ input is empty; its first line is the number of atoms")
		}
		if err != nil {
			return nil, "xyz", err
		}
		return &Reading{frame.Title, frame.Molecule, frame.Geometry, frame.Notes}, "xyz", nil
	}
	m, err := smiles.Parse(strings.TrimSpace(in.SMILES))
	if err != nil {
		return nil, "smiles", err
	}
	return &Reading{Molecule: m}, "smiles", nil
}

// FragmentsError says that an input holds several molecules, and lists them: Tarn searches one molecule at a time and never chooses.
type FragmentsError struct {
	SMILES []string
}

func (e *FragmentsError) Error() string {
	return fmt.Sprintf("the input holds %d separate molecules (%s); a salt or mixture must be split: submit the one you mean by itself",
		len(e.SMILES), strings.Join(e.SMILES, ", "))
}

// Fragments returns the SMILES of the unconnected parts of a molecule, or nil if there is only one.
func Fragments(m *molecule.Molecule) []string {
	if len(m.Fragments()) < 2 {
		return nil
	}
	return strings.Split(smiles.Canonical(m), ".")
}

// mostNamed is the number of atoms up to which the parts of an input are named in an error: canonical SMILES take their time.
const mostNamed = 1000

// single returns an error unless there is exactly one fragment.
func single(m *molecule.Molecule) error {
	if len(m.Atoms) == 0 {
		return errors.New("the input holds no atoms; give at least one")
	}
	if n := len(m.Fragments()); n > 1 && len(m.Atoms) > mostNamed {
		return fmt.Errorf("the input holds %d separate molecules; submit one of them by itself", n)
	}
	if parts := Fragments(m); parts != nil {
		return &FragmentsError{parts}
	}
	return nil
}
