package smiles

import "tarn/molecule"

// Write returns an isomeric SMILES in the order of the atoms.
func Write(m *molecule.Molecule) string { return "" }

// Canonical returns the canonical isomeric SMILES.
func Canonical(m *molecule.Molecule) string { return "" }

// Key returns a short URL-safe key derived from the canonical SMILES.
func Key(m *molecule.Molecule) string { return "" }
