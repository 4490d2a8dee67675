package dedupe_test

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"

	"tarn/dedupe"
	"tarn/forcefield"
	"tarn/minimize"
	"tarn/molecule"
	"tarn/molecule/embed"
	"tarn/molecule/smiles"
)

type minimum struct {
	x        []float64
	energy   float64
	versions dedupe.Versions
}

// minimaOf quenches many first geometries and returns the distinct minima by ascending energy.
func minimaOf(t testing.TB, text string, tries int) (*molecule.Molecule, *dedupe.Symmetry, []minimum) {
	m, err := smiles.Parse(text)
	require.NoError(t, err)
	field, err := forcefield.NewMMFF94(m, forcefield.Options{})
	require.NoError(t, err)
	s, err := dedupe.NewSymmetry(m)
	require.NoError(t, err)
	index := dedupe.NewIndex(s, dedupe.Tolerance{})
	rng := rand.New(rand.NewPCG(7, 11))
	var found []minimum
	for range tries {
		g, err := embed.Embed(t.Context(), m, field, rng)
		require.NoError(t, err)
		q, err := minimize.Quench(t.Context(), field, g, minimize.Settings{})
		require.NoError(t, err)
		if _, known := index.Find(q.X, q.Energy); known {
			continue
		}
		require.Equal(t, len(found), index.Add(q.X, q.Energy))
		v, err := s.Versions(q.X, dedupe.Tolerance{})
		require.NoError(t, err)
		found = append(found, minimum{q.X, q.Energy, v})
	}
	slices.SortFunc(found, func(a, b minimum) int {
		if a.energy < b.energy {
			return -1
		}
		return 1
	})
	return m, s, found
}

// Degeneracies follow from counting labelled structures by hand; for the alkanes they add up to the published numbers of all versions
// (butane 3, pentane 11: G. Tasi et al., J. Phys. Chem. A 102, 7698 (1998), from memory). Symmetry numbers of the rigid rotor are those
// of the point groups in any textbook of statistical mechanics.
func TestVersions(t *testing.T) {
	cases := []struct {
		name, smiles string
		tries        int
		degeneracies []int
		symmetry     []int
	}{
		{"methane Td", "C", 1, []int{1}, []int{12}},
		{"ethane D3d", "CC", 1, []int{1}, []int{6}},
		{"neopentane Td", "CC(C)(C)C", 1, []int{1}, []int{12}},
		{"benzene D6h", "c1ccccc1", 1, []int{1}, []int{12}},
		{"ammonia C3v", "N", 1, []int{1}, []int{3}},
		{"water C2v", "O", 1, []int{1}, []int{2}},
		{"carbon dioxide D∞h", "O=C=O", 1, []int{1}, []int{2}},
		{"butane anti C2h, gauche C2", "CCCC", 25, []int{1, 2}, []int{2, 2}},
		{"pentane tt, tg, g+g+, g+x−", "CCCCC", 60, []int{1, 4, 2, 4}, []int{2, 1, 2, 1}},
		{"cyclohexane chair D3d, twist-boat D2", "C1CCCCC1", 25, []int{2, 6}, []int{6, 4}},
		{"2,3-dimethylbutane gauche C2, anti C2h", "CC(C)C(C)C", 25, []int{2, 1}, []int{2, 2}},
		{"1,2-difluoroethane gauche C2, anti C2h", "FCCF", 25, []int{2, 1}, []int{2, 2}},
		{"ethanol anti Cs, gauche C1", "CCO", 40, []int{1, 2}, []int{1, 1}},
		{"hydrogen peroxide C2", "OO", 1, []int{2}, []int{2}},
		{"dimethyl sulfone C2v", "CS(C)(=O)=O", 1, []int{1}, []int{2}},
		{"dimethyl sulfoxide Cs", "CS(C)=O", 1, []int{1}, []int{1}},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			_, _, found := minimaOf(t, c.smiles, c.tries)
			var degeneracies, symmetry []int
			for _, m := range found {
				degeneracies = append(degeneracies, m.versions.Degeneracy)
				symmetry = append(symmetry, m.versions.SymmetryNumber)
			}
			require.Equal(t, c.degeneracies, degeneracies)
			require.Equal(t, c.symmetry, symmetry)
		})
	}
}

func TestMirrorImageIsSameMolecule(t *testing.T) {
	for text, same := range map[string]bool{
		"CCCC":                   true,
		"C[C@H](O)CC":            false,
		"C[C@H](O)[C@H](O)C":     true,  // meso
		"C[C@H](O)[C@@H](O)C":    false, // (R,R) or (S,S)
		"C[C@H]1CC[C@@H](C)CC1":  true,  // trans-1,4-dimethylcyclohexane
		"C[C@@H]1CCC[C@@H](C1)C": true,  // cis-1,3: meso
		"C[C@@H]1CCC[C@H](C1)C":  false, // trans-1,3
		"CC=[C@]=CC":             false, // an allene of one handedness
		"F[C@](Cl)(Br)[13CH3]":   false,
		"OC(=O)C[C@](O)(C)C":     true, // written with a mark, but the centre bears two like groups
	} {
		t.Run(text, func(t *testing.T) {
			m, err := smiles.Parse(text)
			require.NoError(t, err)
			s, err := dedupe.NewSymmetry(m)
			require.NoError(t, err)
			require.Equal(t, same, s.MirrorIsSame())
		})
	}
}

// Any rotation, reflection and exchange of equivalent atoms of a minimum is recognised as that minimum.
func TestCopiesAreRecognised(t *testing.T) {
	type copied struct {
		symmetry *dedupe.Symmetry
		index    *dedupe.Index
		found    []minimum
		mapping  [][]int
	}
	var systems []copied
	for _, text := range []string{"CCCCC", "CC(C)(C)c1ccccc1", "OC(=O)CC([O-])=O", "C[C@H](O)[C@H](O)C", "C1CCCCC1"} {
		m, s, found := minimaOf(t, text, 12)
		c := copied{symmetry: s, index: dedupe.NewIndex(s, dedupe.Tolerance{}), found: found}
		for _, f := range found {
			c.index.Add(f.x, f.energy)
		}
		for i, a := range m.Atoms { // hydrogens on one atom, in pairs
			for j := range i {
				if a.Element == 1 && m.Atoms[j].Element == 1 && m.Neighbors(i)[0].Atom == m.Neighbors(j)[0].Atom {
					c.mapping = append(c.mapping, []int{i, j})
				}
			}
		}
		systems = append(systems, c)
	}
	rapid.Check(t, func(t *rapid.T) {
		c := rapid.SampledFrom(systems).Draw(t, "system")
		id := rapid.IntRange(0, len(c.found)-1).Draw(t, "minimum")
		x := slices.Clone(c.found[id].x)
		for range rapid.IntRange(0, 6).Draw(t, "exchanges") {
			if len(c.mapping) > 0 {
				p := rapid.SampledFrom(c.mapping).Draw(t, "pair")
				for k := range 3 {
					x[3*p[0]+k], x[3*p[1]+k] = x[3*p[1]+k], x[3*p[0]+k]
				}
			}
		}
		turn := rapid.Float64Range(0, 6.28).Draw(t, "turn")
		flip := 1.0
		if c.symmetry.MirrorIsSame() && rapid.Bool().Draw(t, "mirrored") {
			flip = -1
		}
		for i := 0; i < len(x); i += 3 {
			u, v := x[i], x[i+1]
			x[i], x[i+1], x[i+2] = math.Cos(turn)*u-math.Sin(turn)*v+3, math.Sin(turn)*u+math.Cos(turn)*v-1, flip*x[i+2]
		}
		known, ok := c.index.Find(x, c.found[id].energy+1e-7)
		require.True(t, ok)
		require.Equal(t, id, known)
		require.Less(t, c.symmetry.Match(c.found[id].x, x).RMSD, 1e-6)
	})
}

func TestMirrorImageOfOneEnantiomerIsNotMerged(t *testing.T) {
	_, s, found := minimaOf(t, "C[C@H](O)CC", 1)
	mirrored := make([]float64, len(found[0].x))
	for i, v := range found[0].x {
		mirrored[i] = -v
	}
	require.True(t, s.Same(found[0].x, found[0].x, dedupe.Tolerance{}))
	require.False(t, s.Same(found[0].x, mirrored, dedupe.Tolerance{}))
}

// 1-Chloropropane anti and gauche differ by 0.00 kcal/mol in MMFF94 as published (J. Comput. Chem. 17, 587 (1996), Table I).
func TestNearlyEqualEnergiesAreNotMerged(t *testing.T) {
	_, s, found := minimaOf(t, "CCCCl", 30)
	require.Len(t, found, 2)
	require.InDelta(t, found[0].energy, found[1].energy, 0.01)
	require.False(t, s.Same(found[0].x, found[1].x, dedupe.Tolerance{}))
	index := dedupe.NewIndex(s, dedupe.Tolerance{})
	index.Add(found[0].x, found[0].energy)
	_, known := index.Find(found[1].x, found[0].energy)
	require.False(t, known, "energy alone must not decide")
}

func TestMatchMeasuresGaucheAgainstAnti(t *testing.T) {
	_, s, found := minimaOf(t, "CCCC", 25)
	m := s.Match(found[0].x, found[1].x)
	require.Greater(t, m.RMSD, 0.3)
	require.ElementsMatch(t, []int{0, 1, 2, 3}, m.Mapping[:4], "carbons go to carbons")
}

func TestClusterSymmetry(t *testing.T) {
	// The regular octahedron has 24 proper rotations, the tetrahedron 12, the trigonal bipyramid 6.
	octahedron := []float64{1, 0, 0, -1, 0, 0, 0, 1, 0, 0, -1, 0, 0, 0, 1, 0, 0, -1}
	tetrahedron := []float64{1, 1, 1, 1, -1, -1, -1, 1, -1, -1, -1, 1}
	for _, c := range []struct {
		x      []float64
		number int
	}{{octahedron, 24}, {tetrahedron, 12}, {icosahedron(), 60}} {
		v, err := dedupe.NewClusterSymmetry(len(c.x)/3).Versions(c.x, dedupe.Tolerance{Distance: 0.01})
		require.NoError(t, err)
		require.Equal(t, dedupe.Versions{Degeneracy: 1, SymmetryNumber: c.number}, v)
	}
}

// icosahedron is the thirteen-atom icosahedron with its centre.
func icosahedron() []float64 {
	golden := (1 + math.Sqrt(5)) / 2
	x := []float64{0, 0, 0}
	for _, a := range []float64{-1, 1} {
		for _, b := range []float64{-golden, golden} {
			x = append(x, 0, a, b, a, b, 0, b, 0, a)
		}
	}
	return x
}

func TestClusterCopiesUnderAnyPermutation(t *testing.T) {
	x := icosahedron()
	x[4] += 0.3 // no symmetry left
	x[12] -= 0.2
	s := dedupe.NewClusterSymmetry(13)
	rng := rand.New(rand.NewPCG(3, 4))
	for range 50 {
		y := make([]float64, len(x))
		for i, j := range rng.Perm(13) {
			y[3*i], y[3*i+1], y[3*i+2] = -x[3*j+1], x[3*j], -x[3*j+2]
		}
		require.True(t, s.Same(x, y, dedupe.Tolerance{Distance: 0.01}))
	}
	y := slices.Clone(x)
	y[20] += 0.2
	require.False(t, s.Same(x, y, dedupe.Tolerance{Distance: 0.01}))
}

func TestOrderOfLargeGroups(t *testing.T) {
	for text, order := range map[string]int64{
		"CC(C)(C)c1cc(C(C)(C)C)cc(C(C)(C)C)c1": 6 * 6 * 6 * 6, // three tert-butyl groups on D3
		"c1ccccc1":                             12,
		"C1CC1":                                6,
		"C12C3C4C1C5C4C3C25":                   48, // cubane
		"OS(=O)(=O)O":                          4,
		"[O-]S(=O)(=O)[O-]":                    24, // all oxygens alike, however the bonds are drawn
		"C1=CC=CC=CC=C1":                       8,  // cyclooctatetraene: the bonds do not shift
	} {
		t.Run(text, func(t *testing.T) {
			m, err := smiles.Parse(text)
			require.NoError(t, err)
			s, err := dedupe.NewSymmetry(m)
			require.NoError(t, err)
			got, err := s.Order()
			require.NoError(t, err)
			require.Equal(t, order, got.Int64())
		})
	}
}

func BenchmarkFindAmongHundredThousand(b *testing.B) {
	_, s, found := minimaOf(b, "CCCCC", 8)
	index := dedupe.NewIndex(s, dedupe.Tolerance{})
	rng := rand.New(rand.NewPCG(1, 1))
	for range 100_000 {
		x := slices.Clone(found[0].x)
		for k := range x {
			x[k] += 0.5 * rng.NormFloat64()
		}
		index.Add(x, found[0].energy+20*rng.Float64())
	}
	index.Add(found[0].x, found[0].energy+10)
	for b.Loop() {
		if _, ok := index.Find(found[0].x, found[0].energy+10); !ok {
			b.Fatal("not found")
		}
	}
}
