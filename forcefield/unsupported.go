package forcefield

import (
	"fmt"
	"strings"

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

func unsupported(m *molecule.Molecule, atom int, missing string) error {
	return &UnsupportedError{Atom: atom, Element: m.Atoms[atom].Element, Environment: environment(m, atom), Missing: missing}
}

// environment describes the charge and the bonds of an atom, for example "charge +1, bonded to -C2, =O3, -H9".
func environment(m *molecule.Molecule, atom int) string {
	var parts []string
	for _, n := range m.Neighbors(atom) {
		sign, ok := map[int]string{1: "-", 2: "=", 3: "#"}[m.Bonds[n.Bond].Order]
		if !ok {
			sign = fmt.Sprintf("(order %d)", m.Bonds[n.Bond].Order)
		}
		parts = append(parts, fmt.Sprintf("%s%s%d", sign, m.Atoms[n.Atom].Element, n.Atom+1))
	}
	bonds := "no bonds"
	if len(parts) > 0 {
		bonds = "bonded to " + strings.Join(parts, ", ")
	}
	if q := m.Atoms[atom].Charge; q != 0 {
		return fmt.Sprintf("charge %+d, %s", q, bonds)
	}
	return bonds
}
