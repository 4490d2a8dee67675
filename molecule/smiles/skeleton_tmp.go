package smiles

import (
	"errors"

	"tarn/molecule"
)

// SyntaxError says where a SMILES cannot be read.
type SyntaxError struct {
	Input  string
	Column int // counted from 1
	Reason string
}

func (e *SyntaxError) Error() string { return e.Reason }

// Parse reads one SMILES.
func Parse(s string) (*molecule.Molecule, error) { return nil, errors.New("not built yet") }

// Write returns an isomeric SMILES in the order of the atoms.
func Write(m *molecule.Molecule) string { return "" }

// Canonical returns the canonical isomeric SMILES.
func Canonical(m *molecule.Molecule) string { return "" }

// Key returns a short URL-safe key derived from the canonical SMILES.
func Key(m *molecule.Molecule) string { return "" }
