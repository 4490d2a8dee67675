package xyz

import (
	"errors"
	"fmt"
	"io"

	"tarn/molecule"
)

// Options say what an XYZ file does not.
type Options struct {
	Charge int // total charge of each frame, elementary charges
}

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
	Err         error  // the cause, if it is an error of its own
}

func (e *FrameError) Error() string {
	return fmt.Sprintf("frame %d, line %d: %s", e.Frame, e.Line, e.Reason)
}

// Unwrap returns the cause, or nil.
func (e *FrameError) Unwrap() error { return e.Err }

// Reader reads the frames of an XYZ file one after the other.
type Reader struct {
	r io.Reader
	o Options
}

// NewReader returns a reader of an XYZ file.
func NewReader(r io.Reader, o Options) *Reader { return &Reader{r: r, o: o} }

// Read returns the next frame, io.EOF at the end, or a *FrameError after which the next Read goes on.
func (r *Reader) Read() (*Frame, error) { return nil, errors.New("xyz: not read yet") }

// Perceive returns the molecule with bonds, bond orders, formal charges and stereo that a geometry (Å) shows at a total
// charge, and notes on other readings. The atoms keep their order.
func Perceive(elements []molecule.Element, g molecule.Geometry, charge int) (*molecule.Molecule, []string, error) {
	return nil, nil, errors.New("xyz: not perceived yet")
}

// Write writes one frame: coordinates in Å with eight decimals.
func Write(w io.Writer, title string, elements []molecule.Element, g molecule.Geometry) error {
	return errors.New("xyz: not written yet")
}
