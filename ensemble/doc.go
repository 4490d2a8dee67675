// Package ensemble turns minima into what an experiment sees: ranks, Boltzmann populations from energies and from free energies,
// rotational constants and dipole moments. The model is the rigid rotor and harmonic oscillator in the ideal gas, with the formulas of
// D. A. McQuarrie, Statistical Mechanics (1976), chapters 5, 6 and 8. Constants stand with their source in constants.go; a new
// property of a single minimum gets a file of its own.
package ensemble
