package ctfile

import (
	"fmt"

	"tarn/molecule"
)

// Record is one molecule of a file with its data fields.
type Record struct {
	Name     string
	Comment  string // third header line
	Molecule *molecule.Molecule
	// Geometry holds the 3D coordinates in Å in the order of the atoms of Molecule. It is nil for flat drawings, for records
	// without coordinates, and where the file leaves out hydrogens and so has no place for them (see Notes).
	Geometry molecule.Geometry
	Data     []Field
	// Version is the version that the record was read in, or is to be written in; 0 stands for V2000 where the record fits.
	Version Version
	// Notes say in sentences what was read in one way although the file allows another, or was left aside.
	Notes []string
	// Number and Line say where the record stands in its file: the count of records and the first line, both from 1.
	Number, Line int
}

// Field is one data item of an SD file; Value may have several lines, joined by "\n".
type Field struct {
	Name, Value string
}

// Version is a version of the connection table.
type Version int

const (
	// V2000 has fixed columns, four decimals, at most 999 atoms and 999 bonds. An energy computed from coordinates with four
	// decimals differs by up to some 0.001 kcal/mol from that of the coordinates themselves.
	V2000 Version = 2000
	// V3000 has free columns; coordinates are written with all their digits, so that they read back exactly.
	V3000 Version = 3000
)

// RecordError says why a record could not be read. The next Read goes on with the record after it.
type RecordError struct {
	Record int    // number of the record, from 1
	Line   int    // line of the file, from 1
	Reason string // what is wrong and what to do
	Err    error  // the cause, if it is an error of its own such as *molecule.ValenceError
}

func (e *RecordError) Error() string {
	return fmt.Sprintf("record %d, line %d: %s", e.Record, e.Line, e.Reason)
}

// Unwrap returns the cause, or nil.
func (e *RecordError) Unwrap() error { return e.Err }
