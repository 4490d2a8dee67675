package molecule

import (
	"fmt"
	"strings"
)

// ValenceError says that an atom of a draft cannot have the bonds, hydrogens and charge it was given.
type ValenceError struct {
	Atom    int // index; users see Atom+1
	Element Element
	Place   string // where it stands in the input, "" if unknown
	Reason  string
	Remedy  string
}

func (e *ValenceError) Error() string {
	message := fmt.Sprintf("atom %d (%s%s): %s", e.Atom+1, e.Element, atPlace(e.Place), e.Reason)
	if e.Remedy != "" {
		message += "; " + e.Remedy
	}
	return message
}

// KekuleError says that no choice of single and double bonds gives every aromatic atom of a draft its double bond.
type KekuleError struct {
	Atoms    []int // the atoms left without a partner; indices
	Elements []Element
	Places   []string
}

func (e *KekuleError) Error() string {
	names := make([]string, len(e.Atoms))
	for i, atom := range e.Atoms {
		names[i] = fmt.Sprintf("atom %d (%s%s)", atom+1, e.Elements[i], atPlace(e.Places[i]))
	}
	return "no single and double bonds fit the aromatic ring at " + strings.Join(names, ", ") +
		"; a pyrrole-type nitrogen carries its hydrogen ([nH]), a charge must be written, or the ring is not aromatic"
}

// BuildError says that a draft is not a molecule for another reason than valence: an index out of range, a
// stereodescriptor that does not fit its atom.
type BuildError struct {
	Atom   int    // index of the atom at fault, or -1
	Place  string // where it stands in the input, "" if unknown
	Reason string
}

func (e *BuildError) Error() string {
	if e.Atom < 0 {
		return e.Reason
	}
	if e.Place == "" {
		return fmt.Sprintf("atom %d: %s", e.Atom+1, e.Reason)
	}
	return fmt.Sprintf("atom %d (%s): %s", e.Atom+1, e.Place, e.Reason)
}

func atPlace(place string) string {
	if place == "" {
		return ""
	}
	return ", " + place
}
