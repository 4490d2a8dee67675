package ctfile

import (
	"bufio"
	"errors"
	"fmt"
	"io"
	"strings"
)

const (
	maxLine   = 1 << 20  // bytes; the description allows 80 to 200 characters, data items in use are longer
	maxRecord = 64 << 20 // bytes of one record
)

var errRecordEnds = errors.New("the record ends")

// fault is what is wrong with a record, at a line.
type fault struct {
	line   int
	reason string
	err    error
}

func (f *fault) Error() string { return f.reason }

func faultf(line int, format string, arguments ...any) error {
	return &fault{line: line, reason: fmt.Sprintf(format, arguments...)}
}

// source hands out the lines of one record after the other. A record ends with a line $$$$ or with the file.
type source struct {
	r      *bufio.Reader
	number int // of the line handed out last, from 1
	size   int // bytes of this record so far
	ended  bool
	atEOF  bool
	cut    bool // the line handed out last was too long, its rest is still to be read
}

func newSource(r io.Reader) *source { return &source{r: bufio.NewReaderSize(r, 1<<16)} }

// next returns the next line of the record without its end of line, errRecordEnds after the last one, or a *fault.
func (s *source) next() (string, error) {
	if s.ended {
		return "", errRecordEnds
	}
	line, err := s.read(maxLine)
	if err != nil {
		return "", err
	}
	if s.size += len(line); s.size > maxRecord {
		return "", faultf(s.number, "the record is larger than %d MB; split it", maxRecord>>20)
	}
	if strings.HasPrefix(line, "$$$$") {
		s.ended = true
		return "", errRecordEnds
	}
	return line, nil
}

// read returns the next line of the file. A line longer than limit is a fault; the next read begins behind it.
func (s *source) read(limit int) (string, error) {
	if s.cut {
		if err := s.skipRest(); err != nil {
			return "", err
		}
	}
	var long []byte
	for {
		piece, err := s.r.ReadSlice('\n')
		if len(long)+len(piece) > limit {
			s.number++
			s.cut = err == bufio.ErrBufferFull
			return "", faultf(s.number, "the line is longer than %d bytes; is this an SD file?", limit)
		}
		switch {
		case err == bufio.ErrBufferFull:
			long = append(long, piece...)
			continue
		case err == io.EOF && len(long)+len(piece) == 0:
			s.ended, s.atEOF = true, true
			return "", errRecordEnds
		case err != nil && err != io.EOF:
			return "", err
		}
		s.number++
		text := string(append(long, piece...))
		text = strings.TrimSuffix(strings.TrimSuffix(text, "\n"), "\r")
		if s.number == 1 {
			text = strings.TrimPrefix(text, "\ufeff")
		}
		return text, nil
	}
}

func (s *source) skipRest() error {
	for {
		_, err := s.r.ReadSlice('\n')
		switch {
		case err == bufio.ErrBufferFull:
			continue
		case err == nil || err == io.EOF:
			s.cut = false
			return nil
		}
		return err
	}
}

// finish goes to the end of the record.
func (s *source) finish() error {
	for !s.ended {
		line, err := s.read(maxLine)
		var tooLong *fault
		switch {
		case errors.As(err, &tooLong) || err == errRecordEnds:
		case err != nil:
			return err
		case strings.HasPrefix(line, "$$$$"):
			s.ended = true
		}
	}
	return nil
}

// begin opens the next record; it returns io.EOF after the last one.
func (s *source) begin() error {
	if s.number > 0 {
		if err := s.finish(); err != nil {
			return err
		}
	}
	if s.atEOF {
		return io.EOF
	}
	s.size, s.ended = 0, false
	return nil
}
