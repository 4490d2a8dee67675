// Package minimize brings a geometry to a local minimum of a force field and tells what kind of point it is.
//
// A [Quencher] works in two stages. The crude stage is gonum's L-BFGS; a search may look at its result and drop the snapshot before
// paying for a Hessian. The finish uses Hessians, for Newton steps where these are short and as the metric of L-BFGS where they are
// not, down to a gradient at which two quenches of one minimum agree in every digit that matters. It ends with the eigenvalues of
// the Hessian; a saddle is pushed off and quenched again. [NormalModes] turns a Hessian into wavenumbers, [Hold] and [Drive] relax
// everything but one torsion.
//
// Methods: D. C. Liu, J. Nocedal, Math. Program. 45, 503 (1989) for L-BFGS; J. J. Moré, D. J. Thuente, ACM Trans. Math. Softw. 20, 286
// (1994) for line searches; J. Nocedal, S. J. Wright, Numerical Optimization, 2nd ed. (2006), chapters 3 and 17, for modified Newton
// steps and the augmented Lagrangian. Steps and stopping are tuned by the constants in lbfgs.go, newton.go and saddle.go; a new
// constraint is a new Field like the one in hold.go.
package minimize
