package ctfile

import (
	"errors"
	"io"
	"strings"
)

// Reader reads the records of a molfile or an SD file one after the other, in memory for one record only.
type Reader struct {
	source *source
	record int
}

// NewReader returns a reader of a molfile or an SD file. Lines may end in LF or CRLF; a line of more than 1 MB and a record
// of more than 64 MB are refused.
func NewReader(r io.Reader) *Reader { return &Reader{source: newSource(r)} }

// Read returns the next record. It returns io.EOF at the end and a *RecordError for a record that cannot be read, after
// which the next Read goes on with the record that follows. Other errors are those of the underlying reader.
func (r *Reader) Read() (*Record, error) {
	if err := r.source.begin(); err != nil {
		return nil, err
	}
	first := r.source.number + 1
	record, err := r.readRecord()
	if err == io.EOF {
		return nil, err
	}
	r.record++
	var f *fault
	switch {
	case errors.As(err, &f):
		return nil, &RecordError{Record: r.record, Line: f.line, Reason: f.reason, Err: f.err}
	case err != nil:
		return nil, err
	}
	record.Number, record.Line = r.record, first
	return record, nil
}

func (r *Reader) readRecord() (*Record, error) {
	header, err := r.header()
	if err != nil {
		return nil, err
	}
	record := &Record{Name: text(header[0]), Comment: text(header[2])}
	t := &table{}
	if len(header[1]) >= 22 {
		t.dimension = strings.ToUpper(header[1][20:22])
	}
	countsLine := r.source.number
	switch counts := header[3]; {
	case strings.Contains(counts, "V3000"):
		record.Version = V3000
		err = r.readV3000(t)
	default:
		record.Version = V2000
		err = r.readV2000(t, counts)
	}
	if err != nil {
		return nil, err
	}
	if len(t.atoms) == 0 {
		return nil, faultf(countsLine, "the record has no atoms")
	}
	if record.Molecule, record.Geometry, err = t.build(record.Name); err != nil {
		return nil, err
	}
	if record.Data, err = r.dataItems(t); err != nil {
		return nil, err
	}
	record.Notes = t.notes
	return record, nil
}

// header reads the three header lines and the counts line. Nothing but blank lines up to the end of the file is io.EOF.
func (r *Reader) header() (header [4]string, err error) {
	blank := true
	for i := range header {
		line, err := r.source.next()
		if err == errRecordEnds {
			if blank && r.source.atEOF {
				return header, io.EOF
			}
			return header, faultf(r.source.number, "the record ends after %d lines; a molfile has three header lines, a counts line and atoms", i)
		}
		if err != nil {
			return header, err
		}
		for _, kind := range [...]string{"$RXN", "$MDL", "$RDFILE", "$RIRF"} {
			if strings.HasPrefix(line, kind) {
				return header, faultf(r.source.number, "%s files (reactions, R groups, databases) are not read; give a molfile or an SD file", kind)
			}
		}
		if i < 3 && (strings.HasSuffix(strings.TrimSpace(line), "V2000") || strings.HasSuffix(strings.TrimSpace(line), "V3000")) {
			return header, faultf(r.source.number, "the counts line stands on line %d of the record; three header lines (name, program, comment; "+
				"they may be blank) must come before it", i+1)
		}
		blank = blank && strings.TrimSpace(line) == ""
		header[i] = line
	}
	if strings.TrimSpace(header[3]) != "" {
		return header, nil
	}
	at := r.source.number
	for blank {
		line, err := r.source.next()
		if err == errRecordEnds && r.source.atEOF {
			return header, io.EOF
		}
		if err != nil && err != errRecordEnds {
			return header, err
		}
		blank = err == nil && strings.TrimSpace(line) == ""
	}
	return header, faultf(at, "the fourth line of a record must be the counts line, it is blank")
}

// text makes a line valid UTF-8.
func text(line string) string { return strings.ToValidUTF8(strings.TrimRight(line, " \t"), "\ufffd") }
