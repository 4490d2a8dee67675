package ctfile

import (
	"errors"
	"io"

	"tarn/molecule"
)

// WriteMolfile writes a molfile. g holds the 3D coordinates in Å or is nil; version 0 is V2000 if the molecule fits (999
// atoms and bonds, coordinates of at most five digits before the point), else V3000. Without coordinates the configuration
// of stereocentres goes into the parity field; double-bond geometry has no place there and is an error.
func WriteMolfile(w io.Writer, m *molecule.Molecule, g molecule.Geometry, version Version) error {
	return WriteRecord(w, &Record{Name: m.Name, Molecule: m, Geometry: g, Version: version})
}

// WriteRecord writes a record of an SD file: the molfile, the data fields and the delimiter.
func WriteRecord(w io.Writer, r *Record) error { return errors.New("ctfile: not written yet") }
