package integrate_test

import (
	"math"
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/require"
	"gonum.org/v1/gonum/stat"

	"tarn/forcefield"
	"tarn/minimize"
	"tarn/molecule/embed"
	"tarn/molecule/smiles"
	"tarn/search/integrate"
)

// springs holds every coordinate at zero with its own force constant.
type springs []float64

func (k springs) Energy(x, grad []float64) float64 {
	e := 0.0
	for i, v := range x {
		e += k[i] * v * v / 2
		if grad != nil {
			grad[i] = k[i] * v
		}
	}
	return e
}

// A mass of 12 u on 100 kcal/mol/Å² swings with ω = sqrt(k/m): in SI 100·4184/6.02214076e23·1e20 N/m over 12·1.66053906892e-27 kg.
func TestVerletFollowsTheOscillator(t *testing.T) {
	k := 100 * 4184 / 6.02214076e23 * 1e20
	omega := math.Sqrt(k/(12*1.66053906892e-27)) * 1e-15
	rng := rand.New(rand.NewPCG(1, 1))
	s := integrate.NewSystem(springs{100, 100, 100}, []float64{0.1, 0, 0}, []float64{12}, 1e-9, rng)
	const dt = 0.1
	s.Verlet(1000, dt)
	require.InDelta(t, 0.1*math.Cos(omega*1000*dt), s.X[0], 1e-4)
}

func system(t *testing.T, text string, temperature float64, rng *rand.Rand) *integrate.System {
	t.Helper()
	m, err := smiles.Parse(text)
	require.NoError(t, err)
	f, err := forcefield.NewMMFF94(m, forcefield.Options{})
	require.NoError(t, err)
	g, err := embed.Embed(t.Context(), m, f, rng)
	require.NoError(t, err)
	q, err := minimize.Quench(t.Context(), f, g, minimize.Settings{})
	require.NoError(t, err)
	masses := make([]float64, len(m.Atoms))
	for i, a := range m.Atoms {
		masses[i] = map[string]float64{"H": 1.008, "C": 12.011, "O": 15.999}[a.Element.String()]
	}
	return integrate.NewSystem(f, q.X, masses, temperature, rng)
}

// Constant energy: the drift is that of the line through the total energy, less than 0.01 kcal/mol/ps an atom at 1 fs and 300 K.
func TestEnergyDrift(t *testing.T) {
	rng := rand.New(rand.NewPCG(5, 5))
	s := system(t, "CCCO", 600, rng) // half of it goes into the potential: 300 K
	s.Verlet(500, 1)
	var times, energies []float64
	for k := range 2000 {
		s.Verlet(5, 1)
		times = append(times, float64(k)*0.005)
		energies = append(energies, s.Energy+s.Kinetic())
	}
	_, slope := stat.LinearRegression(times, energies, nil, false)
	require.Less(t, math.Abs(slope)/float64(len(s.Masses)), 0.01, "kcal/mol/ps per atom")
	for _, p := range s.Momentum() {
		require.InDelta(t, 0, p, 1e-9)
	}
}

// In the bath the kinetic energy follows the gamma distribution of f = 3N-3 degrees of freedom: mean f kT/2, variance f (kT)²/2.
func TestLangevinTemperature(t *testing.T) {
	const temperature = 500.0
	rng := rand.New(rand.NewPCG(8, 9))
	s := system(t, "CCO", temperature, rng)
	s.Langevin(2000, 0.5, temperature, 0.05, rng)
	var kinetic []float64
	for range 6000 {
		s.Langevin(20, 0.5, temperature, 0.05, rng)
		kinetic = append(kinetic, s.Kinetic())
	}
	mean, variance := stat.MeanVariance(kinetic, nil)
	freedom, kT := float64(len(s.X)-3), integrate.Boltzmann*temperature
	require.InEpsilon(t, freedom*kT/2, mean, 0.03)
	require.InEpsilon(t, freedom*kT*kT/2, variance, 0.12)
	for _, p := range s.Momentum() {
		require.InDelta(t, 0, p, 1e-9)
	}
}

// Positions in springs have the variance kT/k exactly, for any step that is stable: BAOAB has no error in the harmonic case
// (Leimkuhler & Matthews 2013).
func TestLangevinPositions(t *testing.T) {
	const temperature, k = 300.0, 20.0
	rng := rand.New(rand.NewPCG(2, 2))
	f := springs{k, k, k, k, k, k}
	s := integrate.NewSystem(f, make([]float64, 6), []float64{12, 12}, temperature, rng)
	var relative []float64
	for range 60000 {
		s.Langevin(10, 6, temperature, 0.02, rng)
		relative = append(relative, s.X[0]-s.X[3]) // the centre of mass never moves
	}
	_, variance := stat.MeanVariance(relative, nil)
	require.InEpsilon(t, 2*integrate.Boltzmann*temperature/k, variance, 0.03)
}

func TestHeavyHydrogens(t *testing.T) {
	m, err := smiles.Parse("CO")
	require.NoError(t, err)
	heavy := integrate.HeavyHydrogens(m, []float64{12.011, 15.999, 1.008, 1.008, 1.008, 1.008}, 3)
	require.InDeltaSlice(t, []float64{12.011 - 3*1.992, 15.999 - 1.992, 3, 3, 3, 3}, heavy, 1e-12)
}

// The period of 3000 cm⁻¹ is 11.12 fs.
func TestStepFor(t *testing.T) {
	require.InDelta(t, 11.12/12, integrate.StepFor(3000), 1e-3)
}
