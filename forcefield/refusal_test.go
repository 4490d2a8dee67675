package forcefield

import (
	"math"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/forcefield/internal/sketch"
	"tarn/molecule"
)

// TestRefusals lists what MMFF94 does not cover. Each message names the atom (counted from 1) and the reason.
func TestRefusals(t *testing.T) {
	for _, c := range []struct {
		name, atoms, bonds string
		atom               int // from 1
		element            string
		reason             string
	}{
		{"borane", "BH2 CH3", "1-2", 1, "B", "does not cover the element B"},
		{"selenide", "CH3 Se CH3", "1-2 2-3", 2, "Se", "does not cover the element Se"},
		{"aluminium ion", "Al+3", "", 1, "Al", "does not cover the element Al"},
		{"neutral sodium", "Na", "", 1, "Na", "covers Na only as an ion without bonds, charge +1"},
		{"magnesium with a bond", "CH3 Mg+2", "1-2", 2, "Mg", "covers Mg only as an ion without bonds, charge +2"},
		{"iron(0)", "Fe", "", 1, "Fe", "charge +2 or +3"},
		{"iodide", "I-", "", 1, "I", "lone atom I with charge -1"},
		{"carbon atom", "C", "", 1, "C", "lone atom C"},
		{"methyl cation", "CH3+ ", "", 1, "C", "3 bonds, valence 3 and charge +1"},
		{"methanide", "CH3-", "", 1, "C", "valence 3 and charge -1"},
		{"carbene", "CH2", "", 1, "C", "valence 2"},
		{"five bonds to carbon", "CH4 CH3", "1-2", 1, "C", "valence 5"},
		{"carbon monoxide", "C- O+", "1#2", 1, "C", "no atom type"},
		{"cyanide", "C- N", "1#2", 1, "C", "no atom type"},
		{"five-valent nitrogen", "CH3 NH4", "1-2", 2, "N", "valence 5"},
		{"oxygen with three bonds, no charge", "OH3", "", 1, "O", "valence 3 and charge +0"},
		{"iodine(III)", "I Cl Cl Cl", "1-2 1-3 1-4", 1, "I", "valence 3"},
		{"chlorine dioxide group", "CH3 Cl O O", "1-2 2=3 2=4", 2, "Cl", "valence 5"},
		{"sulfur hexafluoride", "S F F F F F F", "1-2 1-3 1-4 1-5 1-6 1-7", 1, "S", "6 bonds"},
		{"sulfur dioxide", "S O O", "1=2 1=3", 1, "S", "no atom type"},
		{"sulfoxonium ylide", "S O CH3 CH3 CH2", "1=2 1-3 1-4 1=5", 1, "S", "no atom type"},
		{"sulfur trioxide", "S O O O", "1=2 1=3 1=4", 1, "S", "no atom type"},
		{"nitrilium", "CH3 C N+ CH3", "1-2 2#3 3-4", 3, "N", "formal charge"},
		{"oxygen molecule", "O O", "1=2", 1, "O", "no atom type"},
		{"ylide of nitrogen", "N+ CH3 CH3 CH3 CH2-", "1-2 1-3 1-4 1-5", 5, "C", "valence 3 and charge -1"},
		{"phosphorus pentafluoride", "P F F F F F", "1-2 1-3 1-4 1-5 1-6", 1, "P", "5 bonds"},
		{"sulfonium", "S+ CH3 CH3 CH3", "1-2 1-3 1-4", 1, "S", "formal charge"},
		{"aminosulfoxonium", "S+ O CH3 CH3 NH2", "1=2 1-3 1-4 1-5", 1, "S", "formal charge"},
		{"phosphonium", "P+ CH3 CH3 CH3 CH3", "1-2 1-3 1-4 1-5", 1, "P", "formal charge"},
		{"hydrogen molecule", "H H", "1-2", 1, "H", "no type for hydrogen"},
		{"proton", "H+", "", 1, "H", "lone atom H with charge +1"},
		{"hydrogen chloride", "ClH", "", 2, "H", "no type for hydrogen"},
		{"hydrogen bridge", "O H O", "1-2 2-3", 1, "O", "valence 1 and charge +0"},
		{"quadruple bond", "C C", "1-2", 1, "C", "valence 1"},
	} {
		t.Run(c.name, func(t *testing.T) {
			_, err := NewMMFF94(sketch.Molecule(t, c.atoms, c.bonds), Options{})
			var refused *UnsupportedError
			require.ErrorAs(t, err, &refused)
			require.Equal(t, c.atom-1, refused.Atom, refused.Error())
			require.Equal(t, c.element, refused.Element.String())
			require.Contains(t, refused.Error(), c.reason)
			require.Contains(t, refused.Error(), "atom ")
		})
	}
}

func TestRefusalOfRadicals(t *testing.T) {
	m := sketch.Molecule(t, "CH3", "")
	m.Atoms[0].Radical = 1
	_, err := NewMMFF94(m, Options{})
	require.ErrorContains(t, err, "atom 1 (C, bonded to -H2, -H3, -H4): MMFF94 does not cover radicals (unpaired electrons: 1)")
}

// TestMissingParameters needs a torsion about a bond from chlorine to oxygen, for which neither table nor rule exists.
func TestMissingParameters(t *testing.T) {
	_, err := NewMMFF94(sketch.Molecule(t, "Cl O O O OH", "1=2 1=3 1=4 1-5"), Options{})
	var refused *UnsupportedError
	require.ErrorAs(t, err, &refused)
	require.ErrorContains(t, err, "no torsion parameter for atoms")
	require.ErrorContains(t, err, "of types 32-77-6-21")
}

func TestUnusableArguments(t *testing.T) {
	empty, err := molecule.New("", nil, nil, nil, nil)
	require.NoError(t, err)
	_, err = NewMMFF94(empty, Options{})
	require.ErrorContains(t, err, "no atoms")
	for _, d := range []float64{-1, math.NaN(), math.Inf(1)} {
		_, err = NewMMFF94(sketch.Molecule(t, "CH4", ""), Options{Dielectric: d})
		require.ErrorContains(t, err, "dielectric constant")
	}
	for _, n := range []int{-1, 0, 1} {
		_, err = NewLennardJones(n)
		require.ErrorContains(t, err, "at least 2 atoms")
	}
}

func requireFinite(t *testing.T, values ...float64) {
	t.Helper()
	for i, v := range values {
		require.False(t, math.IsNaN(v) || math.IsInf(v, 0), "value %d is %g", i, v)
	}
}

// TestDegenerateGeometries puts atoms on top of each other and in line: energy, gradient and Hessian stay finite.
func TestDegenerateGeometries(t *testing.T) {
	surfaces := map[string]surface{}
	for _, p := range publishedChecks(t) {
		f, err := NewMMFF94(p.molecule(t), Options{})
		require.NoError(t, err)
		surfaces[p.name] = f
	}
	lj, err := NewLennardJones(5)
	require.NoError(t, err)
	surfaces["Lennard-Jones"] = lj
	for name, f := range surfaces {
		n := 3 * f.Atoms()
		coincident, line, twoCoincide := make([]float64, n), make([]float64, n), lattice(f.Atoms())
		for i := 0; i < n; i += 3 {
			line[i] = float64(i)
		}
		copy(twoCoincide[n-3:], twoCoincide[:3])
		for kind, x := range map[string][]float64{"coincident": coincident, "in line": line, "two coincide": twoCoincide} {
			t.Run(name+"/"+kind, func(t *testing.T) {
				grad, h := make([]float64, n), make([]float64, n*n)
				requireFinite(t, f.Energy(x, grad), f.Energy(x, nil))
				requireFinite(t, grad...)
				require.Less(t, norm(grad), 1e16, "a huge gradient is no direction")
				f.Hessian(x, h)
				requireFinite(t, h...)
			})
		}
	}
}

// TestCoordinatesThatAreNotNumbers must show in the energy or the gradient, so that a caller can tell.
func TestCoordinatesThatAreNotNumbers(t *testing.T) {
	f, err := NewMMFF94(peptide(t, 1), Options{})
	require.NoError(t, err)
	lj, err := NewLennardJones(f.Atoms())
	require.NoError(t, err)
	for _, s := range []surface{f, lj} {
		for i := range 3 * s.Atoms() {
			x, grad := lattice(s.Atoms()), make([]float64, 3*s.Atoms())
			x[i] = math.NaN()
			require.True(t, math.IsNaN(s.Energy(x, grad)), "coordinate %d", i)
			require.True(t, math.IsNaN(s.Energy(x, nil)), "coordinate %d", i)
			x[i] = math.Inf(1)
			s.Energy(x, grad)
			require.True(t, math.IsNaN(norm(grad)), "coordinate %d", i)
		}
	}
}
