package smiles

import (
	"fmt"
	"strings"
)

// SyntaxError says where a SMILES cannot be read, or which atom of it cannot be (then it wraps the *molecule.ValenceError,
// *molecule.KekuleError or *molecule.BuildError).
type SyntaxError struct {
	Input  string
	Column int // of the character at fault, counted from 1
	Reason string

	cause error
}

// Error returns the reason, then the input with a caret under the column; of a long input only the surroundings.
func (e *SyntaxError) Error() string {
	const before, after = 40, 30
	line := []rune(e.Input)
	at := min(e.Column-1, len(line))
	start, end := max(0, at-before), min(len(line), at+after)
	excerpt := string(line[start:end])
	if end < len(line) {
		excerpt += "…"
	}
	indent := at - start
	if start > 0 {
		excerpt = "…" + excerpt
		indent++
	}
	excerpt = strings.Map(func(r rune) rune {
		if r < ' ' {
			return ' '
		}
		return r
	}, excerpt)
	return fmt.Sprintf("SMILES, column %d: %s\n  %s\n  %s^", e.Column, e.Reason, excerpt, strings.Repeat(" ", indent))
}

// Unwrap returns the chemical fault behind the error, if there is one.
func (e *SyntaxError) Unwrap() error { return e.cause }
