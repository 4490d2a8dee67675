package ctfile

import (
	"errors"
	"io"
)

// Reader reads the records of a molfile or an SD file one after the other, in memory for one record only.
type Reader struct {
	r io.Reader
}

// NewReader returns a reader of a molfile or an SD file.
func NewReader(r io.Reader) *Reader { return &Reader{r: r} }

// Read returns the next record. It returns io.EOF at the end and a *RecordError for a record that cannot be read, after
// which the next Read goes on with the record that follows. Other errors are those of the underlying reader.
func (r *Reader) Read() (*Record, error) { return nil, errors.New("ctfile: not read yet") }
