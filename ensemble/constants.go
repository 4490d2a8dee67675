package ensemble

import "math"

// The SI (2019) fixes these by definition; the atomic mass constant is that of CODATA 2022.
const (
	planck           = 6.62607015e-34    // J s
	boltzmann        = 1.380649e-23      // J/K
	avogadro         = 6.02214076e23     // 1/mol
	elementaryCharge = 1.602176634e-19   // C
	lightSpeed       = 299792458         // m/s
	atomicMass       = 1.66053906892e-27 // kg
	joulePerKcal     = 4184
)

const (
	// GasConstant is R in kcal/mol/K.
	GasConstant = boltzmann * avogadro / joulePerKcal
	// StandardPressure is 1 bar in pascal (IUPAC 1982).
	StandardPressure = 1e5
	// debyePerElectronAngstrom is 4.80320; a debye is 10⁻²¹/c C m.
	debyePerElectronAngstrom = elementaryCharge * 1e-10 * lightSpeed / 1e-21
	// megahertzTimesMoment is a rotational constant in MHz times the moment of inertia in u Å²: 505379.
	megahertzTimesMoment = planck / (8 * math.Pi * math.Pi * atomicMass * 1e-20) * 1e-6
	// kelvinPerWavenumber is hc/k for 1 cm⁻¹: 1.43878 K.
	kelvinPerWavenumber = planck * lightSpeed * 100 / boltzmann
	// kelvinPerMegahertz is h/k for 1 MHz.
	kelvinPerMegahertz = planck * 1e6 / boltzmann
)
