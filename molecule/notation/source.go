package notation

import (
	"bufio"
	"errors"
	"fmt"
	"io"
	"path/filepath"
	"strconv"
	"strings"

	"tarn/molecule"
	"tarn/molecule/ctfile"
	"tarn/molecule/smiles"
	"tarn/molecule/xyz"
)

// Format is a file format.
type Format string

const (
	SDF    Format = "sdf" // molfile or SD file
	XYZ    Format = "xyz"
	SMILES Format = "smi" // one SMILES a line, then its name
)

// FormatOf returns the format that a file name's ending stands for, or "".
func FormatOf(name string) Format {
	switch strings.ToLower(filepath.Ext(name)) {
	case ".sdf", ".sd", ".mol":
		return SDF
	case ".xyz":
		return XYZ
	case ".smi", ".smiles":
		return SMILES
	}
	return ""
}

// Record is a molecule of a file and its place there.
type Record struct {
	Reading
	Number, Line int // from 1
}

// Source reads the records of a file one after the other.
type Source struct {
	next func() (*Record, error)
}

// NewSource returns a source for a format; "" has it found out from the first lines. charge is the total charge of XYZ frames.
func NewSource(r io.Reader, format Format, charge int) (*Source, error) {
	if format == "" {
		buffered := bufio.NewReaderSize(r, 1<<16)
		head, err := buffered.Peek(1 << 12)
		if err != nil && !errors.Is(err, io.EOF) {
			return nil, err
		}
		format, r = sniff(string(head)), buffered
	}
	switch format {
	case SDF:
		return &Source{sdfRecords(ctfile.NewReader(r))}, nil
	case XYZ:
		return &Source{xyzRecords(xyz.NewReader(r, xyz.Options{Charge: charge}))}, nil
	case SMILES:
		return &Source{smilesRecords(r)}, nil
	}
	return nil, fmt.Errorf("there is no format %q; use sdf, mol, xyz or smi", format)
}

// sniff tells the format from the head of a file: the version mark in the fourth line of a molfile, a lone number in the first line of
// an XYZ file, otherwise SMILES.
func sniff(head string) Format {
	lines := strings.SplitN(strings.ReplaceAll(head, "\r\n", "\n"), "\n", 5)
	if len(lines) > 3 && (strings.Contains(lines[3], "V2000") || strings.Contains(lines[3], "V3000")) {
		return SDF
	}
	if _, err := strconv.Atoi(strings.TrimSpace(lines[0])); err == nil {
		return XYZ
	}
	return SMILES
}

// Read returns the next record and io.EOF at the end. After a *RecordError the next Read goes on with the record that follows.
func (s *Source) Read() (*Record, error) { return s.next() }

// RecordError says why a record of a file could not be read.
type RecordError struct {
	Number, Line int // from 1
	Err          error
}

func (e *RecordError) Error() string {
	return fmt.Sprintf("record %d (line %d): %v", e.Number, e.Line, e.Err)
}

// Unwrap returns the error of the notation.
func (e *RecordError) Unwrap() error { return e.Err }

func sdfRecords(r *ctfile.Reader) func() (*Record, error) {
	return func() (*Record, error) {
		record, err := r.Read()
		var fault *ctfile.RecordError
		if errors.As(err, &fault) {
			return nil, &RecordError{fault.Record, fault.Line, errors.New(fault.Reason)}
		}
		if err != nil {
			return nil, err
		}
		return checked(Reading{record.Name, record.Molecule, record.Geometry, record.Notes}, record.Number, record.Line)
	}
}

func xyzRecords(r *xyz.Reader) func() (*Record, error) {
	return func() (*Record, error) {
		frame, err := r.Read()
		var fault *xyz.FrameError
		if errors.As(err, &fault) {
			return nil, &RecordError{fault.Frame, fault.Line, errors.New(fault.Reason)}
		}
		if err != nil {
			return nil, err
		}
		return checked(Reading{frame.Title, frame.Molecule, frame.Geometry, frame.Notes}, frame.Number, frame.Line)
	}
}

const longestLine = 1 << 20 // bytes of a SMILES line

func smilesRecords(r io.Reader) func() (*Record, error) {
	lines := bufio.NewScanner(r)
	lines.Buffer(make([]byte, 0, 1<<16), longestLine)
	number, line := 0, 0
	return func() (*Record, error) {
		for lines.Scan() {
			line++
			text, name, _ := strings.Cut(strings.TrimSpace(lines.Text()), " ")
			if before, after, tab := strings.Cut(text, "\t"); tab {
				text, name = before, after+" "+name
			}
			if text == "" {
				continue
			}
			number++
			m, err := smiles.Parse(text)
			if err != nil {
				return nil, &RecordError{number, line, err}
			}
			return checked(Reading{Name: strings.TrimSpace(name), Molecule: m}, number, line)
		}
		if err := lines.Err(); err != nil {
			return nil, fmt.Errorf("line %d: %w", line+1, err)
		}
		return nil, io.EOF
	}
}

// checked refuses records without atoms.
func checked(r Reading, number, line int) (*Record, error) {
	if len(r.Molecule.Atoms) == 0 {
		return nil, &RecordError{number, line, errors.New("the record holds no atoms")}
	}
	return &Record{r, number, line}, nil
}

// Single returns the molecule of a record if it has one fragment, and a *FragmentsError if it has several.
func (r *Record) Single() (*molecule.Molecule, error) {
	if err := single(r.Molecule); err != nil {
		return nil, err
	}
	return r.Molecule, nil
}
