// Package schedule decides temperatures of an annealing: where it starts, how it cools, how it is reheated. Temperatures are energies kT in
// the unit of the potential.
//
// Sources: S. Kirkpatrick, C. D. Gelatt, M. P. Vecchi, Science 220, 671 (1983) for the start; M. D. Huang, F. Romeo,
// A. Sangiovanni-Vincentelli, Proc. IEEE Int. Conf. Computer-Aided Design, 381 (1986) for cooling. Another published schedule
// would be another function beside Cool.
package schedule
