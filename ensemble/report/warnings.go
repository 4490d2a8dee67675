package report

import (
	"fmt"
	"strings"

	"tarn/search"
)

// Warnings says in sentences what happened in a search that a user should know of.
func Warnings(c search.Counted) []string {
	var warnings []string
	add := func(format string, arguments ...any) { warnings = append(warnings, fmt.Sprintf(format, arguments...)) }
	if c.Inverted > 0 {
		atoms := make([]string, len(c.InvertedAtoms))
		for i, a := range c.InvertedAtoms {
			atoms[i] = fmt.Sprint(a)
		}
		add("%d quenches left the stereochemistry asked for (at atoms %s) and were not kept", c.Inverted, strings.Join(atoms, ", "))
	}
	if c.Broken > 0 {
		add("%d quenches ended with a broken bond and were not kept", c.Broken)
	}
	if c.Failed > 0 {
		add("%d quenches did not converge and were not kept", c.Failed)
	}
	return warnings
}
