package ctfile

import (
	"strconv"
	"strings"
)

// dataItems reads the data items up to the end of the record. An item is a header line (> <NAME>) and lines up to a blank
// one; more text after the blank line is kept as part of the value.
func (r *Reader) dataItems(t *table) ([]Field, error) {
	var fields []Field
	var value []string
	closeItem := func() {
		if len(fields) > 0 {
			for len(value) > 0 && strings.TrimSpace(value[len(value)-1]) == "" {
				value = value[:len(value)-1]
			}
			fields[len(fields)-1].Value = text(strings.Join(value, "\n"))
			value = nil
		}
	}
	afterBlank := true
	for {
		line, err := r.source.next()
		if err == errRecordEnds {
			closeItem()
			return fields, nil
		}
		if err != nil {
			return nil, err
		}
		blank := strings.TrimSpace(line) == ""
		switch {
		case afterBlank && strings.HasPrefix(line, ">"):
			closeItem()
			name, ok := dataName(line)
			if !ok {
				return nil, faultf(r.source.number, "the data header %q names no field; write > <NAME>", shortened(line))
			}
			fields = append(fields, Field{Name: name})
			afterBlank = false
			continue
		case len(fields) == 0 && !blank:
			return nil, faultf(r.source.number, "expected a data header (> <NAME>) or $$$$ after M  END, found %q", shortened(line))
		case afterBlank && !blank && len(value) > 0:
			t.note("the value of the data field " + strconv.Quote(fields[len(fields)-1].Name) + " contains blank lines")
		}
		afterBlank = blank
		value = append(value, strings.TrimRight(line, " \t"))
	}
}

// dataName returns the field name of a header: what stands between < and >, or the field number (DT12).
func dataName(header string) (string, bool) {
	rest := header[1:]
	if from := strings.IndexByte(rest, '<'); from >= 0 {
		if to := strings.LastIndexByte(rest, '>'); to > from+1 {
			return text(rest[from+1 : to]), true
		}
		return "", false
	}
	for _, word := range strings.Fields(rest) {
		if strings.HasPrefix(word, "DT") && len(word) > 2 {
			return text(word), true
		}
	}
	return "", false
}
