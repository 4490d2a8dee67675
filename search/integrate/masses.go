package integrate

import (
	"math"

	"tarn/molecule"
)

// HeavyHydrogens returns the masses with each hydrogen made as heavy as given, in u, at the cost of the atom it is bonded to. The total stays
// the same; configurations at equilibrium do not depend on masses, but the fastest modes become slower.
func HeavyHydrogens(m *molecule.Molecule, masses []float64, hydrogen float64) []float64 {
	out := append([]float64(nil), masses...)
	for i, a := range m.Atoms {
		if a.Element != 1 || len(m.Neighbors(i)) != 1 {
			continue
		}
		parent := m.Neighbors(i)[0].Atom
		if shift := hydrogen - masses[i]; shift > 0 && m.Atoms[parent].Element > 2 && out[parent]-shift >= hydrogen {
			out[i] += shift
			out[parent] -= shift
		}
	}
	return out
}

// StepFor returns a time step in fs for a fastest mode of the given wavenumber in cm⁻¹: a twelfth of its period (common practice,
// no source; velocity Verlet is stable up to a third).
func StepFor(wavenumberCM1 float64) float64 {
	const periodTimesWavenumber = 1e15 / 2.99792458e10 // fs·cm⁻¹
	return periodTimesWavenumber / math.Max(wavenumberCM1, 300) / 12
}
