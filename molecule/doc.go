// Package molecule holds the model of a molecule and what can be read off its graph: rings, aromaticity, stereocentres,
// canonical order, formula and mass. Every hydrogen is an atom of its own and the bonds are one Kekulé structure, so the
// packages that compute (forcefield, dedupe, search) never have to guess what is there.
//
// The notations live in sub-packages that all end in a [Draft]: smiles (OpenSMILES), ctfile (molfile and SDF, V2000 and
// V3000) and xyz. The first 3D geometry is made in embed. A new notation is a new sub-package that fills a Draft;
// valence rules, kekulisation and implicit hydrogens are changed here, in one place, for all of them.
package molecule
