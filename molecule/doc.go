// Package molecule holds the model of a molecule and what can be read off its graph: rings, aromaticity, stereocentres,
// canonical order, formula and mass. Every hydrogen is an atom of its own and the bonds are one Kekulé structure, so the
// packages that compute (forcefield, dedupe, search) never have to guess what is there.
//
// The notations live in sub-packages that all end in a [Draft]: smiles (OpenSMILES), ctfile (molfile and SDF, V2000 and
// V3000) and xyz. The first 3D geometry is made in embed. A new notation is a new sub-package that fills a Draft;
// valence rules, kekulisation and implicit hydrogens are changed here, in one place, for all of them.
//
// Where things are: drafts are completed in build.go (valence.go, kekulize.go on matching.go, buildstereo.go). Identity
// rests on skeleton.go, the molecule up to resonance and drawing (variants.go, aromaticity.go), and on its canonical
// labelling (labelling.go on partition.go): what counts as the same molecule is changed there and nowhere else.
// Stereochemistry: candidates.go says what may be stereogenic, cage.go what bridgeheads force on each other,
// stereounits.go what really is; stereogeometry.go reads coordinates, isomers.go lists stereoisomers, cip.go names them.
package molecule
