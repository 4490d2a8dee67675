// Package smiles reads and writes molecules in the OpenSMILES notation (opensmiles.org, specification of 2016), and
// derives the canonical SMILES and the key by which Tarn knows a molecule again.
//
// Reading: [Parse] turns the text into a [molecule.Draft] (parser.go and its parts), which does the chemistry.
// Writing: one writer (writer.go) serves [Write], in input order, and [Canonical], in the canonical order of package
// molecule. A change to what counts as the same molecule belongs to package molecule, never here.
package smiles
