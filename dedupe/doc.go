// Package dedupe decides whether two geometries are the same minimum, and counts the versions of one.
//
// Two geometries are the same minimum if a rotation carries one onto the other after an automorphism of the molecular graph
// (symmetry-equivalent atoms change places; Lewis structures of one molecule count as one graph) or, exactly where the mirror
// image of the molecule is the same stereoisomer, a rotation with reflection. The atoms of a Lennard-Jones cluster may change
// places freely.
//
// graph.go colours atoms and bonds; automorphism.go searches the permutations of a graph and counts them along a chain of
// stabilisers; isometry.go searches those that fit two geometries; superpose.go finds the best rotation (Kabsch); index.go keeps
// the known minima; handedness.go and degeneracy.go count versions. What may differ between two quenches of one minimum is
// set in [Tolerance], nowhere else.
package dedupe
