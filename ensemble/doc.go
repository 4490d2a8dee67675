// Package ensemble turns minima into what an experiment sees: ranks, Boltzmann populations from energies and from free energies,
// rotational constants and dipole moments. Formulas are those of the rigid rotor and harmonic oscillator; constants stand with their
// source in constants.go, a new property of a single minimum gets a file of its own.
package ensemble
