// Package minimize brings a geometry to a local minimum of a force field and tells what kind of point it is.
//
// A [Quencher] works in two stages. The crude stage is gonum's L-BFGS; a search may look at its result and drop the snapshot before
// paying for a Hessian. The finish is Newton's method in a trust region, to a gradient at which two quenches of one minimum agree in
// every digit that matters; it ends with the eigenvalues of the Hessian, and a saddle is pushed off and quenched again. [NormalModes]
// turns the Hessian into wavenumbers, [Hold] and [Drive] relax everything but one torsion.
//
// Methods: D. C. Liu, J. Nocedal, Math. Program. 45, 503 (1989) for L-BFGS; J. Nocedal, S. J. Wright, Numerical Optimization, 2nd ed.
// (2006), chapters 4 and 17, for trust regions and the augmented Lagrangian. Steps and stopping are tuned in lbfgs.go and newton.go; a
// new constraint is a new Field like the one in hold.go.
package minimize
