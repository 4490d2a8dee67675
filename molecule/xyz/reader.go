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
	lost   bool // the number of atoms of the last frame was unreadable: look for the next one
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
		return nil, r.fault(r.line, ended(err, 0, count))
	}
	f.Title = strings.ToValidUTF8(strings.TrimSpace(title), "\ufffd")
	var elements []molecule.Element
	isotopes := map[int]int{}
	var broken error
	brokenLine := 0
	for i := range count {
		line, err := r.next()
		if err != nil && !errors.Is(err, errTooLong) {
			return nil, r.fault(r.line, ended(err, i, count))
		}
		if broken != nil {
			continue
		}
		element, isotope, at, atomErr := atomLine(line, i+1)
		if err == nil {
			err = atomErr
		}
		if err != nil {
			broken, brokenLine = err, r.line
			if startsFrame(line) {
				r.lost = true
				break
			}
			continue
		}
		if isotope > 0 {
			isotopes[i] = isotope
		}
		elements = append(elements, element)
		f.Geometry = append(f.Geometry, at[:]...)
	}
	if broken != nil {
		return nil, r.fault(brokenLine, broken)
	}
	f.Molecule, f.Notes, err = perceive(elements, isotopes, f.Geometry, r.o.Charge)
	if err != nil {
		return nil, r.fault(f.Line, err)
	}
	f.Molecule.Name = f.Title
	return f, nil
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

// next returns the next line without its end. A line that is too long is read to its end.
func (r *Reader) next() (string, error) {
	piece, err := r.lines.ReadSlice('\n')
	if len(piece) == 0 && err == io.EOF {
		return "", io.EOF
	}
	r.line++
	text := string(piece)
	if err == bufio.ErrBufferFull {
		for err == bufio.ErrBufferFull {
			_, err = r.lines.ReadSlice('\n')
		}
		if err == nil || err == io.EOF {
			return "", errTooLong
		}
	}
	if err != nil && err != io.EOF {
		return "", &readError{err}
	}
	if r.line == 1 {
		text = strings.TrimPrefix(text, "\ufeff")
	}
	return strings.TrimRight(text, "\r\n"), nil
}

func ended(err error, atoms, count int) error {
	if err == io.EOF {
		return fmt.Errorf("the file ends after %d of %d atoms; it was cut off or the number of atoms is wrong", atoms, count)
	}
	return err
}

// count reads the line with the number of atoms, past blank lines.
func (r *Reader) count() (int, error) {
	lost := r.lost
	counted := false
	for {
		line, err := r.next()
		if err == io.EOF {
			return 0, err
		}
		if !lost && !counted && (err != nil || strings.TrimSpace(line) != "") {
			r.frame++
			counted = true
		}
		if err != nil {
			r.lost = true
			return 0, err
		}
		if strings.TrimSpace(line) == "" || lost && !startsFrame(line) {
			continue
		}
		if lost {
			r.frame++
			r.lost = false
		}
		n, err := strconv.Atoi(strings.TrimSpace(line))
		switch {
		case err != nil:
			r.lost = true
			return 0, fmt.Errorf("a frame must begin with its number of atoms alone on a line, found %q", shortened(line))
		case n <= 0:
			r.lost = true
			return 0, fmt.Errorf("the frame announces %d atoms; it needs at least one", n)
		case n > maxAtoms:
			r.lost = true
			return 0, fmt.Errorf("the frame announces %d atoms; at most %d can be read", n, maxAtoms)
		}
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
