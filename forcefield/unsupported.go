package forcefield

import (
	"fmt"

	"tarn/molecule"
)

// UnsupportedError says that MMFF94 does not cover an atom or lacks a parameter for it.
type UnsupportedError struct {
	Atom        int              // index; the message counts from 1
	Element     molecule.Element // of the atom
	Environment string           // its bonds and charge
	Missing     string           // what MMFF94 lacks or objects to
}

func (e *UnsupportedError) Error() string {
	return fmt.Sprintf("atom %d (%s, %s): %s", e.Atom+1, e.Element, e.Environment, e.Missing)
}
