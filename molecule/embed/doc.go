// Package embed makes first 3D geometries from a molecule's graph by distance geometry.
//
// Bounds on all interatomic distances (bounds.go, angles.go, torsions.go) come from reference bond lengths and angles, the
// ring system, double bonds and van der Waals radii; they are made consistent by triangle smoothing (smoothing.go).
// Coordinates come from the metric matrix of random distances within the bounds, or at random in four dimensions (start.go);
// they are refined against the bounds, signed volumes of stereocentres and planar groups, first in four and then in three
// dimensions (refine.go). What comes out is checked: bounds, stereo, bonds that pass through rings (check.go,
// penetration.go); what does not stand the checks is thrown away and drawn again.
//
// Tetrangle smoothing is left out: with triangle smoothing alone 96 % of the tries on the test set succeed.
//
// The geometry obeys the graph and the stereodescriptors; it is a start for a quench, not a minimum of any force field.
// New knowledge about groups of atoms belongs in torsions.go (1-4 distances) and angles.go (1-3 distances).
//
// Source: G. M. Crippen, T. F. Havel, Distance Geometry and Molecular Conformation, Research Studies Press (1988);
// J. M. Blaney, J. S. Dixon, Rev. Comput. Chem. 5, 299 (1994).
package embed
