package minimize

import (
	"context"
	"math"
	"testing"

	"github.com/stretchr/testify/require"
	"gonum.org/v1/gonum/floats"
	"pgregory.net/rapid"
)

// The conversion from CODATA 2022: sqrt(kcal/mol/Å²/u) is 108.591359 cm⁻¹.
func TestWavenumberUnit(t *testing.T) {
	require.InDelta(t, 108.591359, wavenumberUnit, 1e-5)
}

// A diatomic has one wavenumber, sqrt(k/μ)/2πc. HCl: 516.3 N/m from 2990.946 cm⁻¹ (K. P. Huber, G. Herzberg, Constants of Diatomic
// Molecules (1979)); 1 N/m is 1.439326 kcal/mol/Å².
func TestModesOfDiatomic(t *testing.T) {
	f := &valence{atoms: 2, bonds: []stretch{{0, 1, 516.3 * 1.439326, 1.2746}}}
	x := []float64{0.3, -0.2, 0.1, 0.3, -0.2 + 1.2746*0.6, 0.1 + 1.2746*0.8}
	masses := []float64{1.00782503, 34.96885269}
	modes, err := NormalModes(HessianAt(f, x), masses, x)
	require.NoError(t, err)
	require.Len(t, modes.WavenumbersCM1, 1)
	require.InDelta(t, 2990.9, modes.WavenumbersCM1[0], 0.5)
	// The atoms move as m₂ and -m₁; brought to unit length that gives the mass below.
	m, n := masses[0], masses[1]
	require.InEpsilon(t, m*n*(m+n)/(m*m+n*n), modes.ReducedMasses[0], 1e-9)
}

// Valence-force formulas of symmetric XY2 molecules. Source: G. Herzberg, Infrared and Raman Spectra (1945), section II.4. Here the
// bending force constant multiplies the square of the angle and bonds are 1 Å long.
func TestModesOfTriatomics(t *testing.T) {
	const (
		x, y         = 15.9949, 1.00783
		bond, bendK  = 1100.0, 110.0
		halfAngle    = 52.25 * degree
		carbon, oxid = 12.0, 15.9949
	)
	f := bentTriatomic(bond, bendK, 2*halfAngle)
	bent := []float64{0, 0, 0, math.Sin(halfAngle), math.Cos(halfAngle), 0, -math.Sin(halfAngle), math.Cos(halfAngle), 0}
	modes, err := NormalModes(HessianAt(f, bent), []float64{x, y, y}, bent)
	require.NoError(t, err)
	sin2, cos2 := math.Sin(halfAngle)*math.Sin(halfAngle), math.Cos(halfAngle)*math.Cos(halfAngle)
	asymmetric := (1 + 2*y/x*sin2) * bond / y
	sum := (1+2*y/x*cos2)*bond/y + 2*(1+2*y/x*sin2)*bendK/y
	product := 2 * (1 + 2*y/x) * bond * bendK / (y * y)
	root := math.Sqrt(sum*sum/4 - product)
	requireWavenumbers(t, []float64{sum/2 - root, sum/2 + root, asymmetric}, modes.WavenumbersCM1)

	f = &valence{atoms: 3, bonds: f.bonds, angles: []bend{{1, 0, 2, straight(bendK)}}}
	linear := []float64{0, 0, 0, 0.6, 0, 0.8, -0.6, 0, -0.8}
	modes, err = NormalModes(HessianAt(f, linear), []float64{carbon, oxid, oxid}, linear)
	require.NoError(t, err)
	bending := 2 * (1 + 2*oxid/carbon) * bendK / oxid
	requireWavenumbers(t, []float64{bending, bending, bond / oxid, (1 + 2*oxid/carbon) * bond / oxid}, modes.WavenumbersCM1)
}

func requireWavenumbers(t *testing.T, eigenvalues, wavenumbers []float64) {
	t.Helper()
	require.Len(t, wavenumbers, len(eigenvalues))
	for i, v := range eigenvalues {
		require.InEpsilon(t, math.Sqrt(v)*wavenumberUnit, wavenumbers[i], 1e-6, "mode %d", i+1)
	}
}

// At a linear geometry that wants to be bent the bending modes are imaginary.
func TestImaginaryModesAreNegative(t *testing.T) {
	f := &valence{atoms: 3, bonds: []stretch{{0, 1, 1000, 1}, {0, 2, 1000, 1}}, angles: []bend{{1, 0, 2, straight(-50)}}}
	x := []float64{0, 0, 0, 1, 0, 0, -1, 0, 0}
	modes, err := NormalModes(HessianAt(f, x), []float64{16, 1, 1}, x)
	require.NoError(t, err)
	want := -math.Sqrt(2*(1+2.0/16)*50) * wavenumberUnit
	require.InEpsilon(t, want, modes.WavenumbersCM1[0], 1e-6)
	require.InEpsilon(t, want, modes.WavenumbersCM1[1], 1e-6)
	require.Positive(t, modes.WavenumbersCM1[2])
}

func TestModesRefuse(t *testing.T) {
	h, x := make([]float64, 36), make([]float64, 6)
	_, err := NormalModes(h, []float64{1, 0}, x)
	require.ErrorContains(t, err, "mass of atom 2")
	_, err = NormalModes(h, []float64{1}, x)
	require.ErrorIs(t, err, ErrLength)
	_, err = NormalModes(h[:9], []float64{1, 1}, x)
	require.ErrorIs(t, err, ErrLength)
	_, err = NormalModes(nil, nil, nil)
	require.ErrorIs(t, err, ErrLength)
	h[3] = math.NaN()
	_, err = NormalModes(h, []float64{1, 1}, x)
	require.ErrorIs(t, err, ErrDiverged)
}

func TestModesOfAtom(t *testing.T) {
	modes, err := NormalModes(make([]float64, 9), []float64{4}, []float64{1, 2, 3})
	require.NoError(t, err)
	require.Empty(t, modes.WavenumbersCM1)
}

// Wavenumbers do not depend on where the molecule stands, and modes move neither its centre of mass nor its orientation.
func TestModesAreInvariant(t *testing.T) {
	f := chain(cosineTwist(2, 3))
	minimum, err := Quench(context.Background(), f, chainGeometry(1), Settings{})
	require.NoError(t, err)
	masses := []float64{1.00783, 15.9949, 12, 18.9984}
	reference, err := NormalModes(HessianAt(f, minimum.X), masses, minimum.X)
	require.NoError(t, err)
	require.Len(t, reference.WavenumbersCM1, 6)
	rapid.Check(t, func(t *rapid.T) {
		s, c := math.Sincos(rapid.Float64Range(0, 2*math.Pi).Draw(t, "angle"))
		shift := rapid.Float64Range(-20, 20).Draw(t, "shift")
		x := make([]float64, 12)
		for i := range 4 {
			a, b, z := minimum.X[3*i], minimum.X[3*i+1], minimum.X[3*i+2]
			x[3*i], x[3*i+1], x[3*i+2] = z+shift, c*a-s*b, s*a+c*b-shift
		}
		modes, err := NormalModes(HessianAt(f, x), masses, x)
		require.NoError(t, err)
		require.InDeltaSlice(t, reference.WavenumbersCM1, modes.WavenumbersCM1, 0.01)
		for _, v := range modes.Vectors {
			require.InDelta(t, 1, floats.Norm(v, 2), 1e-12)
			var momentum, spin vector
			for i, m := range masses {
				d := vector{v[3*i], v[3*i+1], v[3*i+2]}
				turned := vector{x[3*i], x[3*i+1], x[3*i+2]}.cross(d)
				for k := range 3 {
					momentum[k] += m * d[k]
					spin[k] += m * turned[k]
				}
			}
			require.InDelta(t, 0, momentum.dot(momentum), 1e-18)
			require.InDelta(t, 0, spin.dot(spin), 1e-14)
		}
	})
}
