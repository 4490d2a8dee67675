// Package moves changes geometries: rotations about bonds, concerted moves of ring segments that keep every bond length, inversion of
// pyramidal nitrogen, displacements of atoms.
//
// [Analyze] reads off the graph what can move. Each move with a given amount is its own inverse with the opposite amount (or with
// itself, for [Crank.Flap] and [Inversion.Apply]) and preserves volume in Cartesian space, so that Metropolis walks that draw the amount
// from a symmetric distribution keep detailed balance. A new kind of move belongs here, in a file of its own, with a test of these
// two properties.
package moves
