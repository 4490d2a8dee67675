package forcefield

import (
	"math"
	"testing"

	"github.com/stretchr/testify/require"
	"gonum.org/v1/gonum/optimize"

	"tarn/forcefield/internal/sketch"
)

// relaxed returns the energy of the local minimum that is reached from x.
func relaxed(t *testing.T, f surface, x []float64) float64 {
	problem := optimize.Problem{
		Func: func(x []float64) float64 { return f.Energy(x, nil) },
		Grad: func(grad, x []float64) { f.Energy(x, grad) },
	}
	// Close to the minimum the line search may give up on rounding; the gradient decides whether the minimum was reached.
	result, _ := optimize.Minimize(problem, x, &optimize.Settings{GradientThreshold: 1e-6}, &optimize.BFGS{})
	require.NotNil(t, result)
	grad := make([]float64, len(x))
	f.Energy(result.X, grad)
	require.Less(t, norm(grad), 1e-4)
	return result.F
}

// internal is an atom given by internal coordinates: at a length (Å) from atom a, an angle at a towards b, and a torsion
// about a–b towards c (both in degrees). Atoms are counted from 1.
type internal struct {
	a, b, c                int
	length, angle, torsion float64
}

// cartesian returns the coordinates of atoms in internal coordinates. The first atom is the origin; the second and third
// have no full reference, so b and c of theirs are ignored.
func cartesian(atoms ...internal) []float64 {
	x := []float64{0, 0, 0}
	for n, z := range atoms {
		theta, phi := radians(z.angle), radians(z.torsion)
		switch n {
		case 0:
			x = append(x, z.length, 0, 0)
			continue
		case 1:
			from := place(x, offset(z.a-1))
			toB, _, _ := place(x, offset(z.b-1)).minus(from).direction()
			p := from.plus(vector{toB.x * math.Cos(theta), math.Sin(theta), 0}.times(z.length))
			x = append(x, p.x, p.y, p.z)
			continue
		}
		a, b, c := place(x, offset(z.a-1)), place(x, offset(z.b-1)), place(x, offset(z.c-1))
		axis, _, _ := a.minus(b).direction()
		normal, _, _ := b.minus(c).cross(axis).direction()
		side := normal.cross(axis)
		p := a.plus(axis.times(-z.length * math.Cos(theta))).
			plus(side.times(z.length * math.Sin(theta) * math.Cos(phi))).
			plus(normal.times(z.length * math.Sin(theta) * math.Sin(phi)))
		x = append(x, p.x, p.y, p.z)
	}
	return x
}

// methyl places three hydrogens on atom a next to b, staggered by the given torsion against c.
func methyl(a, b, c int, torsion float64) []internal {
	return []internal{{a, b, c, 1.09, 110, torsion}, {a, b, c, 1.09, 110, torsion + 120}, {a, b, c, 1.09, 110, torsion - 120}}
}

// TestPublishedConformers compares MMFF94 with J. Comput. Chem. 17, 587 (1996), Table II, and MMFF94s with J. Comput. Chem. 20,
// 720 (1999), Table IV: energy differences of conformers, kcal/mol.
func TestPublishedConformers(t *testing.T) {
	// Both amides: O=C–N with the N-methyl group syn (trans amide, the lower one) or anti to O.
	formamide := func(torsion float64) []float64 {
		return cartesian(append([]internal{
			{1, 0, 0, 1.22, 0, 0}, {1, 2, 0, 1.36, 124, 0}, {3, 1, 2, 1.45, 121, torsion}, // C O N C
		}, append(methyl(4, 3, 1, 180), internal{3, 1, 2, 1.01, 119, torsion + 175}, internal{1, 2, 3, 1.10, 122, 180})...)...)
	}
	acetamide := func(torsion float64) []float64 {
		atoms := []internal{
			{1, 0, 0, 1.22, 0, 0}, {1, 2, 0, 1.36, 123, 0}, {3, 1, 2, 1.45, 121, torsion}, {1, 2, 3, 1.51, 121, 180}, // C O N C C
		}
		atoms = append(atoms, methyl(4, 3, 1, 180)...)
		atoms = append(atoms, methyl(5, 1, 2, 0)...)
		return cartesian(append(atoms, internal{3, 1, 2, 1.01, 119, torsion + 175})...)
	}
	propenamide := func(torsion float64) []float64 {
		return cartesian(
			internal{1, 0, 0, 1.22, 0, 0}, internal{1, 2, 0, 1.36, 122, 0}, internal{1, 2, 3, 1.49, 121, 180}, // C O N C
			internal{4, 1, 2, 1.34, 122, torsion}, internal{4, 1, 2, 1.09, 117, torsion + 180}, // =C H
			internal{5, 4, 1, 1.09, 121, 0}, internal{5, 4, 1, 1.09, 121, 180},
			internal{3, 1, 2, 1.01, 118, 10}, internal{3, 1, 2, 1.01, 121, 170},
		)
	}
	formamidine := func(torsion float64) []float64 {
		return cartesian(
			internal{1, 0, 0, 1.28, 0, 0}, internal{1, 2, 0, 1.37, 125, 0}, internal{2, 1, 3, 1.02, 110, torsion}, // C N N H
			internal{1, 2, 3, 1.10, 117, 180}, internal{3, 1, 2, 1.01, 117, 10}, internal{3, 1, 2, 1.01, 119, 170},
		)
	}
	for _, c := range []struct {
		name, atoms, bonds string
		shape              func(torsion float64) []float64
		high, low          float64 // torsions of the two conformers
		standard, static   float64 // kcal/mol
	}{
		{"N-methylformamide, cis − trans", "C O N C H H H H H", "1=2 1-3 3-4 4-5 4-6 4-7 3-8 1-9", formamide, 175, 0, 1.28, 1.09},
		{"N-methylacetamide, cis − trans", "C O N C C H H H H H H H", "1=2 1-3 3-4 1-5 4-6 4-7 4-8 5-9 5-10 5-11 3-12", acetamide, 175, 0, 2.18, 1.97},
		{"propenamide, skew − cis", "C O N C C H H H H H", "1=2 1-3 1-4 4=5 4-6 5-7 5-8 3-9 3-10", propenamide, 155, 5, 0.60, 0.57},
		{"formamidine, cis − trans", "C N N H H H H", "1=2 1-3 2-4 1-5 3-6 3-7", formamidine, 0, 180, 2.27, 2.03},
	} {
		t.Run(c.name, func(t *testing.T) {
			m := sketch.Molecule(t, c.atoms, c.bonds)
			for static, expected := range map[bool]float64{false: c.standard, true: c.static} {
				f, err := NewMMFF94(m, Options{Static: static})
				require.NoError(t, err)
				difference := relaxed(t, f, c.shape(c.high)) - relaxed(t, f, c.shape(c.low))
				require.InDelta(t, expected, difference, 0.02, "static %v", static)
			}
		})
	}
}

// TestKnownClusters compares with the global minima of Lennard-Jones clusters: D. J. Wales and J. P. K. Doye, J. Phys. Chem.
// A 101, 5111 (1997).
func TestKnownClusters(t *testing.T) {
	golden := (1 + math.Sqrt(5)) / 2
	var icosahedron []float64
	for _, s := range []float64{1, -1} {
		for _, u := range []float64{golden, -golden} {
			icosahedron = append(icosahedron, 0, s, u, s, u, 0, u, 0, s)
		}
	}
	for i := range icosahedron {
		icosahedron[i] *= 0.57
	}
	bipyramid := []float64{0, 0, 0.6, 0, 0, -0.6}
	for i := range 5 {
		bipyramid = append(bipyramid, math.Cos(0.4*math.Pi*float64(i)), math.Sin(0.4*math.Pi*float64(i)), 0)
	}
	for _, c := range []struct {
		name   string
		x      []float64
		energy float64
	}{
		{"pair", []float64{0, 0, 0, 1, 0, 0}, -1},
		{"triangle", []float64{0, 0, 0, 1, 0, 0, 0.5, 0.9, 0}, -3},
		{"tetrahedron", []float64{0.4, 0.4, 0.4, 0.4, -0.4, -0.4, -0.4, 0.4, -0.4, -0.4, -0.4, 0.4}, -6},
		{"trigonal bipyramid", []float64{0.6, 0, 0, -0.3, 0.52, 0, -0.3, -0.52, 0, 0, 0, 0.9, 0, 0, -0.9}, -9.103852},
		{"octahedron", []float64{0.8, 0, 0, -0.8, 0, 0, 0, 0.8, 0, 0, -0.8, 0, 0, 0, 0.8, 0, 0, -0.8}, -12.712062},
		{"pentagonal bipyramid", bipyramid, -16.505384},
		{"centred icosahedron", append(icosahedron, 0, 0, 0), -44.326801},
	} {
		t.Run(c.name, func(t *testing.T) {
			f, err := NewLennardJones(len(c.x) / 3)
			require.NoError(t, err)
			require.InDelta(t, c.energy, relaxed(t, f, c.x), 1e-6)
		})
	}
}
