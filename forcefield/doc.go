// Package forcefield turns a geometry into an energy (kcal/mol) and its first and second derivatives. It holds MMFF94 and its
// static variant MMFF94s, complete with every empirical rule, and the Lennard-Jones potential of atomic clusters.
//
// A force field is prepared once per molecule ([NewMMFF94], [NewLennardJones]); it is then immutable and may be evaluated
// by any number of goroutines. Evaluation allocates nothing.
//
// Where things live: internal/typing reads atom types and formal charges off the graph, internal/parameters holds the
// published tables (as data), their look-up and the empirical rules; here the terms are listed (assemble.go) and evaluated,
// one file a term. A new term is a list in [MMFF94], an energy with gradient and a Hessian in a file of its own, and one
// field of [Terms]. The method and its sources are described in docs/forcefield.md.
package forcefield
