package xyz

import (
	"fmt"

	"tarn/molecule"
)

// Frame is one molecule of an XYZ file.
type Frame struct {
	Title    string
	Molecule *molecule.Molecule // atoms in the order of the file
	Geometry molecule.Geometry  // Å
	// Notes say in sentences where the geometry allows another reading.
	Notes        []string
	Number, Line int // place in the file, both from 1
}

// FrameError says why a frame could not be read. The next Read goes on with the frame after it.
type FrameError struct {
	Frame, Line int    // from 1
	Reason      string // what is wrong and what to do
	Err         error  // the cause, if it is an error of its own such as *PerceptionError
}

func (e *FrameError) Error() string {
	return fmt.Sprintf("frame %d, line %d: %s", e.Frame, e.Line, e.Reason)
}

// Unwrap returns the cause, or nil.
func (e *FrameError) Unwrap() error { return e.Err }

// PerceptionError says why no bonds, orders and charges fit a geometry.
type PerceptionError struct {
	Atoms  []int // indices of the atoms at fault, if any can be named
	Reason string
}

func (e *PerceptionError) Error() string { return e.Reason }
