// Package integrate moves atoms by the equations of motion: velocity Verlet at constant energy, and the BAOAB splitting of Langevin
// dynamics at constant temperature, which is velocity Verlet when the friction is zero. Both are of second order; BAOAB samples
// configurations with an error of fourth order in the step at high friction.
//
// Units: Å, fs, u, kcal/mol, K. Sources: W. C. Swope, H. C. Andersen, P. H. Berens, K. R. Wilson, J. Chem. Phys. 76, 637 (1982);
// B. Leimkuhler, C. Matthews, Appl. Math. Res. Express 2013, 34 (2013); repartitioned hydrogen masses: K. A. Feenstra, B. Hess,
// H. J. C. Berendsen, J. Comput. Chem. 20, 786 (1999).
package integrate
