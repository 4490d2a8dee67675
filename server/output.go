package server

import (
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"strings"

	"tarn/molecule"
	"tarn/molecule/ctfile"
	"tarn/molecule/notation"
	"tarn/molecule/xyz"
)

// draft is a file in the making: it takes its name when it is complete, so that a failure leaves what was there before, which may be
// the input.
type draft struct {
	*os.File
	path string
}

func newDraft(path string) (*draft, error) {
	f, err := os.CreateTemp(filepath.Dir(path), "."+filepath.Base(path)+".*")
	if err == nil {
		err = f.Chmod(0o644)
	}
	if err != nil {
		return nil, fmt.Errorf("the output file %s cannot be written: %w", path, err)
	}
	return &draft{f, path}, nil
}

// close gives the file its name unless the work has failed, or drops it.
func (d *draft) close(failure error) error {
	err := errors.Join(failure, d.File.Close())
	if partial := (*partialError)(nil); err == nil || errors.As(err, &partial) {
		return errors.Join(err, os.Rename(d.Name(), d.path))
	}
	return errors.Join(err, os.Remove(d.Name()))
}

// sink writes geometries to a file, or nowhere.
type sink struct {
	draft  *draft
	format notation.Format
}

func openSink(path string) (*sink, error) {
	if path == "" {
		return &sink{}, nil
	}
	format := notation.FormatOf(path)
	if format != notation.SDF && format != notation.XYZ {
		return nil, fmt.Errorf("the output file %s must end in .sdf, .mol or .xyz", path)
	}
	d, err := newDraft(path)
	if err != nil {
		return nil, err
	}
	return &sink{d, format}, nil
}

func (s *sink) write(r *notation.Record, g []float64) error {
	if s.draft == nil {
		return nil
	}
	return writeGeometry(s.draft, s.format, r, g)
}

func (s *sink) close(failure error) error {
	if s.draft == nil {
		return failure
	}
	return s.draft.close(failure)
}

// writeGeometry writes one geometry in a file format.
func writeGeometry(w io.Writer, format notation.Format, r *notation.Record, g molecule.Geometry) error {
	if format == notation.SDF {
		return ctfile.WriteRecord(w, &ctfile.Record{Name: r.Name, Molecule: r.Molecule, Geometry: g})
	}
	elements := make([]molecule.Element, len(r.Molecule.Atoms))
	for i, a := range r.Molecule.Atoms {
		elements[i] = a.Element
	}
	return xyz.Write(w, strings.ReplaceAll(r.Name, "\n", " "), elements, g)
}
