// Package typing reads the MMFF94 atom types, formal charges and aromatic bonds off the graph of a molecule.
//
// Every drawing is first brought to one form (normalise.go). Then follow aromatic rings (aromatic.go), symbols of the heavy
// atoms, element by element (carbon.go, nitrogen.go, oxygen.go, others.go), the symbols inside aromatic rings
// (ringsymbols.go), hydrogens and formal charges (charges.go). In the switch statements the first match wins, so the
// order of the cases is part of the method. Source: T. A. Halgren, J. Comput. Chem. 17, 490-641 (1996).
package typing
