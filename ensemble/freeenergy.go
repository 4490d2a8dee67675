package ensemble

import (
	"fmt"
	"math"
)

// numericallyFlat is the wavenumber in cm⁻¹ below which a mode cannot be told from one of no curvature. Such modes, the slightly
// imaginary ones included, count as this one, because the entropy of a harmonic oscillator has no limit (common practice, no source).
const numericallyFlat = 1

// Gas is one minimum in the ideal gas, a rigid rotor and harmonic oscillator.
type Gas struct {
	MassU                  float64
	RotationalConstantsMHz []float64 // three, two equal ones for a linear molecule, none for an atom
	SymmetryNumber         int       // of the rotations; 0 stands for 1
	WavenumbersCM1         []float64
}

// Functions are thermodynamic functions without the potential energy.
type Functions struct {
	ZeroPoint float64 // kcal/mol
	Enthalpy  float64 // H(T) - H(0), kcal/mol
	Entropy   float64 // kcal/mol/K
}

// FreeEnergy returns the Gibbs energy above the potential energy, zero-point energy included, in kcal/mol.
func (f Functions) FreeEnergy(temperatureK float64) float64 {
	return f.ZeroPoint + f.Enthalpy - temperatureK*f.Entropy
}

func (f Functions) plus(o Functions) Functions {
	return Functions{f.ZeroPoint + o.ZeroPoint, f.Enthalpy + o.Enthalpy, f.Entropy + o.Entropy}
}

// Functions returns the standard molar functions at a temperature and a pressure in pascal. It returns an error if one of them, the
// mass or a rotational constant is not positive, or if a wavenumber is imaginary.
func (g Gas) Functions(temperatureK, pressurePa float64) (Functions, error) {
	if !(pressurePa > 0) || !(g.MassU > 0) {
		return Functions{}, fmt.Errorf("pressure %v Pa and mass %v u must be positive", pressurePa, g.MassU)
	}
	inside, err := g.internal(temperatureK)
	if err != nil {
		return Functions{}, err
	}
	wave := planck / math.Sqrt(2*math.Pi*g.MassU*atomicMass*boltzmann*temperatureK)
	perMolecule := boltzmann * temperatureK / pressurePa / (wave * wave * wave)
	return inside.plus(Functions{
		Enthalpy: 2.5 * GasConstant * temperatureK,
		Entropy:  GasConstant * (math.Log(perMolecule) + 2.5),
	}), nil
}

// internal returns the functions of rotation and vibration.
func (g Gas) internal(temperatureK float64) (Functions, error) {
	if !(temperatureK > 0) || math.IsInf(temperatureK, 0) {
		return Functions{}, fmt.Errorf("temperature %v K must be positive", temperatureK)
	}
	rotation, err := g.rotation(temperatureK)
	if err != nil {
		return Functions{}, err
	}
	vibration, err := g.vibration(temperatureK)
	return rotation.plus(vibration), err
}

func (g Gas) rotation(temperatureK float64) (Functions, error) {
	states := 1.0
	for _, b := range g.RotationalConstantsMHz {
		if !(b > 0) {
			return Functions{}, fmt.Errorf("rotational constant %v MHz must be positive", b)
		}
		states *= math.Sqrt(temperatureK / (kelvinPerMegahertz * b))
	}
	half := float64(len(g.RotationalConstantsMHz)) / 2
	if len(g.RotationalConstantsMHz) == 3 {
		states *= math.Sqrt(math.Pi)
	}
	symmetry := max(g.SymmetryNumber, 1)
	return Functions{
		Enthalpy: half * GasConstant * temperatureK,
		Entropy:  GasConstant * (math.Log(states/float64(symmetry)) + half),
	}, nil
}

func (g Gas) vibration(temperatureK float64) (sum Functions, err error) {
	for i, w := range g.WavenumbersCM1 {
		if !(w > -numericallyFlat) {
			return Functions{}, fmt.Errorf("mode %d is imaginary (%.1f cm⁻¹): the geometry is no minimum", i+1, w)
		}
		// In units of RT: u is the quantum, n the mean number of quanta.
		u := kelvinPerWavenumber * max(w, numericallyFlat) / temperatureK
		n := 1 / math.Expm1(u)
		sum = sum.plus(Functions{
			ZeroPoint: GasConstant * temperatureK * u / 2,
			Enthalpy:  GasConstant * temperatureK * u * n,
			Entropy:   GasConstant * (u*n - math.Log(-math.Expm1(-u))),
		})
	}
	return sum, nil
}

// FreeEnergies returns the free energies of the states in kcal/mol above the lowest: potential energy, rigid rotation, harmonic
// vibration with zero-point energy, and -RT ln(degeneracy). The population of a state is proportional to exp(-G/RT). The degeneracy
// counts the versions that symmetry makes of a state, so rotation enters without its symmetry number: counting both would count the
// symmetry twice. It returns an error if the temperature is not positive or a state has an imaginary wavenumber.
func FreeEnergies(states []State, temperatureK float64) ([]float64, error) {
	energies := make([]float64, len(states))
	for i, s := range states {
		inside, err := Gas{RotationalConstantsMHz: s.RotationalConstantsMHz, WavenumbersCM1: s.WavenumbersCM1}.internal(temperatureK)
		if err != nil {
			return nil, fmt.Errorf("state %d: %w", i+1, err)
		}
		energies[i] = s.Energy + inside.FreeEnergy(temperatureK) - GasConstant*temperatureK*math.Log(s.degeneracy())
	}
	return aboveLowest(energies), nil
}
