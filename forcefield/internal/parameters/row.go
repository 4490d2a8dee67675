package parameters

import (
	"bufio"
	"bytes"
	"fmt"
	"strconv"
	"strings"
)

// row is one line of a table, read field by field. The first failure is kept and ends the reading.
type row struct {
	file   string
	line   int
	fields []string
	err    error
}

// eachRow calls line for every row of a table.
func eachRow(table string, line func(r *row)) error {
	name := "tables/" + table + ".tsv"
	data, err := files.ReadFile(name)
	if err != nil {
		return err
	}
	r := row{file: name}
	lines := bufio.NewScanner(bytes.NewReader(data))
	for lines.Scan() {
		r.line++
		if strings.HasPrefix(lines.Text(), "#") {
			continue
		}
		r.fields = strings.Split(lines.Text(), "\t")
		if line(&r); r.err != nil {
			return r.err
		}
	}
	return lines.Err()
}

func (r *row) fail(reason string) {
	if r.err == nil {
		r.err = fmt.Errorf("%s, line %d: %s", r.file, r.line, reason)
	}
}

func (r *row) text() string {
	if len(r.fields) == 0 {
		r.fail("too few columns")
		return ""
	}
	s := r.fields[0]
	r.fields = r.fields[1:]
	return s
}

func (r *row) number() float64 {
	v, err := strconv.ParseFloat(r.text(), 64)
	if err != nil {
		r.fail(err.Error())
	}
	return v
}

func (r *row) integer() int { return r.parse(r.text()) }

func (r *row) parse(s string) int {
	v, err := strconv.Atoi(s)
	if err != nil {
		r.fail(err.Error())
	}
	return v
}

// integers reads n integers that stand in one column.
func (r *row) integers(separator string, n int) []int {
	parts := strings.Split(r.text(), separator)
	if len(parts) != n {
		r.fail(fmt.Sprintf("%d numbers where %d are expected", len(parts), n))
	}
	values := make([]int, n)
	for i := range min(n, len(parts)) {
		values[i] = r.parse(parts[i])
	}
	return values
}

// span reads "3" or "3/4".
func (r *row) span() (low, high int) {
	first, last, ok := strings.Cut(r.text(), "/")
	if !ok {
		last = first
	}
	return r.parse(first), r.parse(last)
}

// classedKey reads the two leading columns of an interaction, its n types and its class.
func (r *row) classedKey(n int) key {
	types := r.integers("-", n)
	return keyOf(r.integer(), types...)
}
