package ensemble

import (
	"math"
	"testing"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"
)

// Masses in u: J. Meija et al., Pure Appl. Chem. 88, 265 (2016) and AME 2020 for the isotopes.
const (
	carbon12   = 12.0
	oxygen16   = 15.99491462
	hydrogen1  = 1.00782503
	chlorine35 = 34.96885269
)

// Equilibrium distances and rotational constants of K. P. Huber, G. Herzberg, Constants of Diatomic Molecules (1979).
func TestRotationalConstantsOfDiatomics(t *testing.T) {
	for _, d := range []struct {
		name                   string
		a, b, distance, perCM1 float64
		lastDigit              float64
	}{
		{"CO", carbon12, oxygen16, 1.128323, 1.93128, 1e-5},
		{"HCl", hydrogen1, chlorine35, 1.274552, 10.59341, 1e-4},
	} {
		x := []float64{0, 0, 0, d.distance / math.Sqrt2, 0, d.distance / math.Sqrt2}
		constants := RotationalConstants(x, []float64{d.a, d.b})
		require.Len(t, constants, 2, d.name)
		require.InDelta(t, d.perCM1, constants[0]/megahertzPerCM1, d.lastDigit, d.name)
		require.InEpsilon(t, constants[0], constants[1], 1e-9, d.name)
	}
}

// Moments of regular figures by hand: a tetrahedral XY4 has 8/3·m·r² about every axis; a hexagon of masses m has 3·m·r² about an axis
// in its plane and twice that about its normal.
func TestPrincipalMomentsOfRegularFigures(t *testing.T) {
	const r = 1.09
	s := r / math.Sqrt(3)
	methane := []float64{0, 0, 0, s, s, s, s, -s, -s, -s, s, -s, -s, -s, s}
	masses := []float64{carbon12, hydrogen1, hydrogen1, hydrogen1, hydrogen1}
	want := 8.0 / 3 * hydrogen1 * r * r
	moments := PrincipalMoments(methane, masses)
	require.InDeltaSlice(t, []float64{want, want, want}, moments[:], 1e-12)
	require.Len(t, RotationalConstants(methane, masses), 3)

	var benzene, heavy []float64
	for k := range 6 {
		angle := float64(k) * math.Pi / 3
		for _, ring := range []struct{ mass, radius float64 }{{carbon12, 1.397}, {hydrogen1, 2.481}} {
			benzene = append(benzene, 5, ring.radius*math.Cos(angle), ring.radius*math.Sin(angle))
			heavy = append(heavy, ring.mass)
		}
	}
	want = 3 * (carbon12*1.397*1.397 + hydrogen1*2.481*2.481)
	moments = PrincipalMoments(benzene, heavy)
	require.InDeltaSlice(t, []float64{want, want, 2 * want}, moments[:], 1e-9)
	constants := RotationalConstants(benzene, heavy)
	require.InEpsilon(t, 505379.009/want, constants[0], 1e-8)
	require.InEpsilon(t, 505379.009/(2*want), constants[2], 1e-8)
}

func TestRotationalConstantsOfAtom(t *testing.T) {
	constants := RotationalConstants([]float64{1, 2, 3}, []float64{40})
	require.NotNil(t, constants)
	require.Empty(t, constants)
}

// Two unit charges 1 Å apart have 4.80320 debye (any textbook of physical chemistry).
func TestDipole(t *testing.T) {
	x := []float64{1, 1, 1, 1, 2, 1}
	require.InDelta(t, 4.80320, Dipole(x, []float64{1, -1}, []float64{1, 35}), 5e-6)
	require.Zero(t, Dipole(x, []float64{0, 0}, []float64{1, 35}))
	// An ion: all charge on one of two equal masses, half the distance from their centre.
	require.InDelta(t, 4.80320/2, Dipole(x, []float64{1, 0}, []float64{3, 3}), 5e-6)
}

func TestInvariance(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		coordinate := rapid.Float64Range(-5, 5)
		n := rapid.IntRange(2, 12).Draw(t, "atoms")
		x := rapid.SliceOfN(coordinate, 3*n, 3*n).Draw(t, "x")
		masses := rapid.SliceOfN(rapid.Float64Range(1, 130), n, n).Draw(t, "masses")
		charges := rapid.SliceOfN(rapid.Float64Range(-1, 1), n, n).Draw(t, "charges")
		angle := rapid.Float64Range(0, 2*math.Pi).Draw(t, "angle")
		shift := rapid.Float64Range(-100, 100).Draw(t, "shift")
		moved := make([]float64, len(x))
		c, s := math.Cos(angle), math.Sin(angle)
		for i := range n {
			a, b, z := x[3*i], x[3*i+1], x[3*i+2]
			moved[3*i], moved[3*i+1], moved[3*i+2] = z+shift, c*a-s*b-shift, s*a+c*b+2*shift
		}
		before, after := PrincipalMoments(x, masses), PrincipalMoments(moved, masses)
		require.InDeltaSlice(t, before[:], after[:], 1e-9*(1+before[2])*(1+shift*shift))
		require.InDelta(t, Dipole(x, charges, masses), Dipole(moved, charges, masses), 1e-9)
		require.GreaterOrEqual(t, before[0]+before[1], before[2]*(1-1e-12), "triangle inequality of the moments")
	})
}
