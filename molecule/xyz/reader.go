package xyz

import (
	"bufio"
	"errors"
	"fmt"
	"io"
	"math"
	"strconv"
	"strings"

	"tarn/molecule"
)

const (
	maxLine  = 1 << 16 // bytes
	maxAtoms = 100_000 // of one frame
)

// Options say what an XYZ file does not.
type Options struct {
	Charge int // total charge of each frame, elementary charges
}

// Reader reads the frames of an XYZ file one after the other, in memory for one frame only.
type Reader struct {
	lines  *bufio.Reader
	o      Options
	line   int // number of the line read last
	frame  int
	lost   bool // the last frame was broken: look for a line with a number of atoms
	cut    bool // the line read last was too long, its rest is still to be read
	held   bool // text is to be read once more
	text   string
	failed error
}

// NewReader returns a reader of an XYZ file: for each frame a line with the number of atoms, a title line, and a line an
// atom with its symbol (or atomic number) and x, y, z in Å; more columns are left aside. Blank lines may stand between
// frames. A line of more than 64 kB and a frame of more than 100,000 atoms are refused.
func NewReader(r io.Reader, o Options) *Reader {
	return &Reader{lines: bufio.NewReaderSize(r, maxLine), o: o}
}

// Read returns the next frame, io.EOF at the end, or a *FrameError after which the next Read goes on with the next frame.
// Other errors are those of the underlying reader.
func (r *Reader) Read() (*Frame, error) {
	if r.failed != nil {
		return nil, r.failed
	}
	count, err := r.count()
	if err != nil {
		return nil, r.fault(r.line, err)
	}
	f := &Frame{Number: r.frame, Line: r.line}
	title, err := r.next()
	if err != nil {
		return nil, r.broken(ended(err, 0, count))
	}
	f.Title = strings.ToValidUTF8(strings.TrimSpace(title), "\ufffd")
	var elements []molecule.Element
	isotopes := map[int]int{}
	for i := range count {
		line, err := r.next()
		if err != nil {
			return nil, r.broken(ended(err, i, count))
		}
		element, isotope, at, err := atomLine(line, i+1)
		if err != nil {
			r.held = startsFrame(line) // the next frame begins already
			return nil, r.broken(err)
		}
		if isotope > 0 {
			isotopes[i] = isotope
		}
		elements = append(elements, element)
		f.Geometry = append(f.Geometry, at[:]...)
	}
	f.Molecule, f.Notes, err = perceive(elements, isotopes, f.Geometry, r.o.Charge)
	if err != nil {
		return nil, r.fault(f.Line, err)
	}
	f.Molecule.Name = f.Title
	return f, nil
}

// broken is fault at the current line; the next frame is to be looked for.
func (r *Reader) broken(err error) error {
	r.lost = true
	return r.fault(r.line, err)
}

// fault turns an error of a frame into a *FrameError; the end of the file and errors of the reader stay.
func (r *Reader) fault(line int, err error) error {
	var reading *readError
	switch {
	case err == io.EOF:
		r.failed = err
		return err
	case errors.As(err, &reading):
		r.failed = reading.err
		return reading.err
	}
	return &FrameError{Frame: r.frame, Line: line, Reason: err.Error(), Err: err}
}

// readError is an error of the underlying reader.
type readError struct{ err error }

func (e *readError) Error() string { return e.err.Error() }

var errTooLong = fmt.Errorf("the line is longer than %d bytes; is this an XYZ file?", maxLine)

// next returns the next line without its end. After a line that is too long the next one begins behind it.
func (r *Reader) next() (string, error) {
	if r.held {
		r.held = false
		return r.text, nil
	}
	for r.cut {
		_, err := r.lines.ReadSlice('\n')
		if err != nil && err != io.EOF && err != bufio.ErrBufferFull {
			return "", &readError{err}
		}
		r.cut = err == bufio.ErrBufferFull
	}
	piece, err := r.lines.ReadSlice('\n')
	switch {
	case err == io.EOF && len(piece) == 0:
		return "", io.EOF
	case err == bufio.ErrBufferFull:
		r.line++
		r.cut = true
		return "", errTooLong
	case err != nil && err != io.EOF:
		return "", &readError{err}
	}
	r.line++
	r.text = strings.TrimRight(string(piece), "\r\n")
	if r.line == 1 {
		r.text = strings.TrimPrefix(r.text, "\ufeff")
	}
	return r.text, nil
}

func ended(err error, atoms, count int) error {
	if err == io.EOF {
		return fmt.Errorf("the file ends after %d of %d atoms; it was cut off or the number of atoms is wrong", atoms, count)
	}
	return err
}

// count reads the line with the number of atoms, past blank lines.
func (r *Reader) count() (int, error) {
	for {
		line, err := r.next()
		line = strings.TrimSpace(line)
		switch {
		case err == io.EOF:
			return 0, err
		case err == nil && line == "", r.lost && errors.Is(err, errTooLong), r.lost && err == nil && !startsFrame(line):
			continue
		}
		r.frame++
		r.lost = true
		if err != nil {
			return 0, err
		}
		n, err := strconv.Atoi(line)
		switch {
		case err != nil:
			return 0, fmt.Errorf("a frame must begin with its number of atoms alone on a line, found %q", shortened(line))
		case n <= 0:
			return 0, fmt.Errorf("the frame announces %d atoms; it needs at least one", n)
		case n > maxAtoms:
			return 0, fmt.Errorf("the frame announces %d atoms; at most %d can be read", n, maxAtoms)
		}
		r.lost = false
		return n, nil
	}
}

// startsFrame tells whether a line is a number of atoms.
func startsFrame(line string) bool {
	n, err := strconv.Atoi(strings.TrimSpace(line))
	return err == nil && n > 0
}

// atomLine reads a symbol or atomic number and three coordinates.
func atomLine(line string, atom int) (e molecule.Element, isotope int, at [3]float64, err error) {
	words := strings.Fields(line)
	if len(words) < 4 {
		return 0, 0, at, fmt.Errorf("atom %d needs a symbol and three coordinates, the line is %q; is the number of atoms right?", atom, shortened(line))
	}
	e, isotope = element(words[0])
	if e == 0 {
		return 0, 0, at, fmt.Errorf("atom %d is %q, which is neither an element symbol nor an atomic number", atom, shortened(words[0]))
	}
	for k := range at {
		v, parseErr := strconv.ParseFloat(words[1+k], 64)
		if parseErr != nil || math.IsNaN(v) || math.Abs(v) >= 1e6 {
			return 0, 0, at, fmt.Errorf("atom %d has the coordinate %q; write a number in ångström below 1000000", atom, shortened(words[1+k]))
		}
		at[k] = v
	}
	return e, isotope, at, nil
}

// element reads a symbol in any case, D and T, or an atomic number.
func element(word string) (e molecule.Element, isotope int) {
	if z, err := strconv.Atoi(word); err == nil {
		if z > 0 && z < 256 && molecule.Element(z).String() != "?" {
			return molecule.Element(z), 0
		}
		return 0, 0
	}
	switch strings.ToUpper(word) {
	case "D":
		return 1, 2
	case "T":
		return 1, 3
	}
	return molecule.ElementBySymbol(strings.ToUpper(word[:1]) + strings.ToLower(word[1:])), 0
}

func shortened(text string) string {
	if len(text) > 60 {
		return text[:60] + "…"
	}
	return text
}
