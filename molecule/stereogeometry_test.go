package molecule_test

import (
	"math"
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/molecule"
)

// bromochlorofluoromethane with the hydrogen away from a viewer on the positive z axis, for whom Br, Cl and F run
// clockwise: the R enantiomer by definition.
func rightHandedGeometry() molecule.Geometry {
	at := func(degrees, z float64) []float64 {
		a := degrees * math.Pi / 180
		return []float64{math.Cos(a), math.Sin(a), z}
	}
	g := molecule.Geometry{0, 0, 0}             // C
	g = append(g, at(210, 0.3)...)              // F
	g = append(g, at(330, 0.3)...)              // Cl
	g = append(g, at(90, 0.3)...)               // Br
	return append(g, []float64{0, 0, -1.09}...) // H
}

func reflected(g molecule.Geometry) molecule.Geometry {
	out := g.Clone()
	for i := 0; i < len(out); i += 3 {
		out[i] = -out[i]
	}
	return out
}

func TestConfigurationFromGeometry(t *testing.T) {
	m := parse(t, "C(F)(Cl)Br")
	g := rightHandedGeometry()
	right, err := m.StereoFromGeometry(g)
	require.NoError(t, err)
	require.Equal(t, []string{"R"}, right.Labels().Centers)
	left, err := m.StereoFromGeometry(reflected(g))
	require.NoError(t, err)
	require.Equal(t, []string{"S"}, left.Labels().Centers)
	require.True(t, right.Same(left.Mirror()))
	require.NoError(t, right.CheckStereo(g))
	var wrong *molecule.StereoError
	require.ErrorAs(t, right.CheckStereo(reflected(g)), &wrong)
	require.Equal(t, 0, wrong.Atom)
	require.False(t, wrong.Undecided)
	require.NoError(t, m.CheckStereo(g), "nothing is specified, nothing is checked")
}

func TestFlatCenterIsUndecided(t *testing.T) {
	g := rightHandedGeometry()
	for i := 1; i <= 3; i++ {
		g[3*i+2] = 0
	}
	g[14] = 0
	g[12] = 0.5 // the hydrogen in the plane too
	var undecided *molecule.StereoError
	_, err := parse(t, "C(F)(Cl)Br").StereoFromGeometry(g)
	require.ErrorAs(t, err, &undecided)
	require.True(t, undecided.Undecided)
	require.ErrorContains(t, err, "atom 1")
	require.ErrorContains(t, err, "planar")
}

func TestLonePairTakesTheFourthPlace(t *testing.T) {
	// (R)-Ethyl methyl sulfoxide: O, ethyl, methyl clockwise with the lone pair away from the viewer on the positive z axis.
	m := parse(t, "S(=O)(CC)C")
	g := make(molecule.Geometry, 3*len(m.Atoms))
	for i, degrees := range map[int]float64{1: 90, 2: 330, 4: 210} {
		a := degrees * math.Pi / 180
		g[3*i], g[3*i+1], g[3*i+2] = math.Cos(a), math.Sin(a), 0.5
	}
	// With S in the origin and its neighbours above it, the lone pair points down.
	got, err := m.StereoFromGeometry(g)
	require.NoError(t, err)
	require.Equal(t, []string{"R"}, got.Labels().Centers)
}

func TestDoubleBondFromGeometry(t *testing.T) {
	m := parse(t, "FC=CF") // F C C F H H
	build := func(degrees float64) molecule.Geometry {
		a := degrees * math.Pi / 180
		return molecule.Geometry{
			-0.6, 1, 0, 0, 0, 0, 1.3, 0, 0, 1.9, math.Cos(a), math.Sin(a), -0.6, -1, 0, 1.9, -math.Cos(a), -math.Sin(a),
		}
	}
	for degrees, label := range map[float64]string{0: "Z", 180: "E", 25: "Z", -150: "E"} {
		got, err := m.StereoFromGeometry(build(degrees))
		require.NoError(t, err)
		require.Equal(t, []string{label}, got.Labels().DoubleBonds)
		require.NoError(t, got.CheckStereo(build(degrees)))
		require.Error(t, got.CheckStereo(build(degrees+180)))
	}
	var undecided *molecule.StereoError
	_, err := m.StereoFromGeometry(build(88))
	require.ErrorAs(t, err, &undecided)
	require.True(t, undecided.Undecided)
	require.ErrorContains(t, err, "88°")
}

func TestAlleneFromGeometry(t *testing.T) {
	// 1,3-Difluoroallene, H–C=C=C–H with the fluorine atoms at right angles. Seen along the axis, F in front points up and F
	// behind to the right: clockwise, P (P-93.5.3.1: helicity from the near to the far fluorine).
	m := parse(t, "FC=C=CF") // F C C C F H H
	g := molecule.Geometry{
		0, 1, 1.9, 0, 0, 1.3, 0, 0, 0, 0, 0, -1.3, 1, 0, -1.9, 0, -1, 1.9, -1, 0, -1.9,
	}
	got, err := m.StereoFromGeometry(g)
	require.NoError(t, err)
	require.Equal(t, []string{"P"}, got.Labels().Centers)
	require.NoError(t, got.CheckStereo(g))
	require.Error(t, got.CheckStereo(reflected(g)))
}

func TestGeometryMustFit(t *testing.T) {
	m := parse(t, "C(F)(Cl)Br")
	require.ErrorContains(t, m.CheckStereo(molecule.Geometry{0, 0, 0}), "5 atoms need 15")
	g := rightHandedGeometry()
	g[4] = math.NaN()
	_, err := m.StereoFromGeometry(g)
	require.ErrorContains(t, err, "atom 2")
}

// The configuration does not depend on place, orientation or moderate distortion.
func TestConfigurationIsInvariant(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 4))
	m := parse(t, "C(F)(Cl)Br")
	for range 200 {
		g := rotated(rightHandedGeometry(), rng)
		for i := range g {
			g[i] += 0.1 * rng.NormFloat64()
		}
		got, err := m.StereoFromGeometry(g)
		require.NoError(t, err)
		require.Equal(t, []string{"R"}, got.Labels().Centers)
	}
}

// rotated turns a geometry by a random rotation and moves it.
func rotated(g molecule.Geometry, rng *rand.Rand) molecule.Geometry {
	var q [4]float64
	length := 0.0
	for i := range q {
		q[i] = rng.NormFloat64()
		length += q[i] * q[i]
	}
	length = math.Sqrt(length)
	w, x, y, z := q[0]/length, q[1]/length, q[2]/length, q[3]/length
	r := [3][3]float64{
		{1 - 2*(y*y+z*z), 2 * (x*y - w*z), 2 * (x*z + w*y)},
		{2 * (x*y + w*z), 1 - 2*(x*x+z*z), 2 * (y*z - w*x)},
		{2 * (x*z - w*y), 2 * (y*z + w*x), 1 - 2*(x*x+y*y)},
	}
	out := g.Clone()
	for i := range g.Atoms() {
		p := g.At(i)
		for k := range 3 {
			out[3*i+k] = r[k][0]*p[0] + r[k][1]*p[1] + r[k][2]*p[2] + 7*float64(k)
		}
	}
	return out
}
