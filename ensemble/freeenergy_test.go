package ensemble

import (
	"bufio"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"
)

const (
	room            = 298.15 // K
	megahertzPerCM1 = lightSpeed * 100 / 1e6
)

func TestConstants(t *testing.T) {
	for _, c := range []struct {
		name                     string
		want, got, withinOneUnit float64
	}{
		{"R, kcal/mol/K (CODATA 2022)", 1.98720425864e-3, GasConstant, 1e-14},
		{"e Å in debye (CODATA 2022)", 4.80320471, debyePerElectronAngstrom, 1e-8},
		{"second radiation constant, K cm (CODATA 2022)", 1.438776877, kelvinPerWavenumber, 1e-9},
		{"B·I, MHz u Å² (CODATA 2022)", 505379.009, megahertzTimesMoment, 1e-3},
	} {
		require.InDelta(t, c.want, c.got, c.withinOneUnit, c.name)
	}
}

func TestFunctionsOfGases(t *testing.T) {
	file, err := os.Open("testdata/gases.tsv")
	require.NoError(t, err)
	defer file.Close()
	rows := 0
	for lines := bufio.NewScanner(file); lines.Scan(); {
		f := strings.Split(lines.Text(), "\t")
		if len(f) != 8 || f[0] == "formula" {
			continue
		}
		rows++
		gas := Gas{MassU: number(t, f[2]), SymmetryNumber: int(number(t, f[1]))}
		for _, b := range strings.Fields(f[3]) {
			gas.RotationalConstantsMHz = append(gas.RotationalConstantsMHz, number(t, b)*megahertzPerCM1)
		}
		if len(gas.RotationalConstantsMHz) == 1 {
			gas.RotationalConstantsMHz = append(gas.RotationalConstantsMHz, gas.RotationalConstantsMHz[0])
		}
		for _, w := range strings.Fields(f[4]) {
			wavenumber, times, _ := strings.Cut(w, "x")
			for range int(number(t, times)) {
				gas.WavenumbersCM1 = append(gas.WavenumbersCM1, number(t, wavenumber))
			}
		}
		functions, err := gas.Functions(room, StandardPressure)
		require.NoError(t, err)
		require.InDelta(t, number(t, f[5]), functions.Entropy*joulePerKcal, 0.002, "entropy of %s", f[0])
		require.InDelta(t, number(t, f[6]), functions.Enthalpy*joulePerKcal/1000, 0.002, "enthalpy of %s", f[0])
		require.InDelta(t, number(t, f[7]), functions.Entropy*joulePerKcal, 0.15, "tabulated entropy of %s", f[0])
		require.InDelta(t, functions.ZeroPoint+functions.Enthalpy-room*functions.Entropy, functions.FreeEnergy(room), 1e-12)
	}
	require.Equal(t, 18, rows)
}

// The entropy of a monatomic gas has no parts but translation: argon 154.846 J/mol/K at 298.15 K and 1 bar (CODATA Key Values,
// 1989), neon 146.328.
func TestFunctionsOfAtoms(t *testing.T) {
	for _, atom := range []struct {
		symbol        string
		mass, entropy float64
	}{{"Ar", 39.948, 154.846}, {"Ne", 20.1797, 146.328}} {
		functions, err := Gas{MassU: atom.mass}.Functions(room, StandardPressure)
		require.NoError(t, err)
		require.InDelta(t, atom.entropy, functions.Entropy*joulePerKcal, 0.003, atom.symbol)
		require.Zero(t, functions.ZeroPoint)
	}
}

func TestFunctionsRefuse(t *testing.T) {
	good := Gas{MassU: 18, RotationalConstantsMHz: []float64{3, 2, 1}, WavenumbersCM1: []float64{100, 200}}
	_, err := good.Functions(room, StandardPressure)
	require.NoError(t, err)
	for _, temperature := range []float64{0, -300, math.NaN(), math.Inf(1)} {
		_, err = good.Functions(temperature, StandardPressure)
		require.ErrorContains(t, err, "temperature")
	}
	_, err = good.Functions(room, 0)
	require.ErrorContains(t, err, "pressure")
	bad := good
	bad.WavenumbersCM1 = []float64{100, -50}
	_, err = bad.Functions(room, StandardPressure)
	require.ErrorContains(t, err, "mode 2 is imaginary (-50.0 cm⁻¹)")
	bad = good
	bad.RotationalConstantsMHz = []float64{3, 2, 0}
	_, err = bad.Functions(room, StandardPressure)
	require.ErrorContains(t, err, "rotational constant")
	_, err = FreeEnergies([]State{{}, {WavenumbersCM1: []float64{-2}}}, room)
	require.ErrorContains(t, err, "state 2: mode 1 is imaginary")
}

// A mode without curvature must not carry away the free energy, and its sign is an accident.
func TestFlatModeIsBounded(t *testing.T) {
	states := []State{{WavenumbersCM1: []float64{0.3}}, {WavenumbersCM1: []float64{-0.3}}, {WavenumbersCM1: []float64{0}}}
	energies, err := FreeEnergies(states, room)
	require.NoError(t, err)
	require.Equal(t, []float64{0, 0, 0}, energies)
}

// Degeneracy and symmetry number are two ways to count the same thing: a D3 form of a molecule with 18 permutations has 3 versions
// and symmetry number 6 where a C1 form has 18 and 1, so that their free energies differ by RT ln 6 either way.
func TestFreeEnergyCountsSymmetryOnce(t *testing.T) {
	constants, wavenumbers := []float64{3000, 2000, 1000}, []float64{80, 900}
	energies, err := FreeEnergies([]State{
		{Degeneracy: 3, RotationalConstantsMHz: constants, WavenumbersCM1: wavenumbers},
		{Degeneracy: 18, RotationalConstantsMHz: constants, WavenumbersCM1: wavenumbers},
	}, room)
	require.NoError(t, err)
	d3, err := Gas{MassU: 126, SymmetryNumber: 6, RotationalConstantsMHz: constants, WavenumbersCM1: wavenumbers}.Functions(room, StandardPressure)
	require.NoError(t, err)
	c1, err := Gas{MassU: 126, SymmetryNumber: 1, RotationalConstantsMHz: constants, WavenumbersCM1: wavenumbers}.Functions(room, StandardPressure)
	require.NoError(t, err)
	require.Zero(t, energies[1])
	require.InDelta(t, energies[0], d3.FreeEnergy(room)-c1.FreeEnergy(room), 1e-12)
	require.InDelta(t, 0.59248495*math.Log(6), energies[0], 1e-8)
}

// Mirror images add R ln 2 = 1.3774 cal/mol/K of entropy (any textbook).
func TestFreeEnergyOfMirrorImages(t *testing.T) {
	energies, err := FreeEnergies([]State{{Degeneracy: 1}, {Degeneracy: 2}}, room)
	require.NoError(t, err)
	require.InDelta(t, 1.377425e-3*room, energies[0], 1e-8)
}

func number(t *testing.T, s string) float64 {
	v, err := strconv.ParseFloat(s, 64)
	require.NoError(t, err)
	return v
}
