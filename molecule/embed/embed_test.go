package embed

import (
	"context"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/forcefield"
	"tarn/molecule"
	"tarn/molecule/smiles"
)

func parse(t testing.TB, s string) *molecule.Molecule {
	t.Helper()
	m, err := smiles.Parse(s)
	require.NoError(t, err, s)
	return m
}

// mmff returns MMFF94 as a Field.
func mmff(t testing.TB, m *molecule.Molecule) Field {
	t.Helper()
	field, err := forcefield.NewMMFF94(m, forcefield.Options{})
	require.NoError(t, err)
	return field
}

// draws returns n geometries of a molecule.
func draws(t testing.TB, s string, n int) (*molecule.Molecule, []molecule.Geometry) {
	t.Helper()
	m := parse(t, s)
	e, err := New(m, mmff(t, m))
	require.NoError(t, err, s)
	rng := rand.New(rand.NewPCG(3, 5))
	var list []molecule.Geometry
	for range n {
		g, err := e.Draw(context.Background(), rng)
		require.NoError(t, err, s)
		list = append(list, g)
	}
	return m, list
}

func TestRefusals(t *testing.T) {
	empty, err := molecule.New("", nil, nil, nil, nil)
	require.NoError(t, err)
	_, err = New(empty, covalent{})
	require.ErrorContains(t, err, "no atoms")

	_, err = New(parse(t, "CC(=O)[O-].[Na+]"), covalent{})
	require.ErrorContains(t, err, "2 fragments")

	_, err = New(parse(t, strings.Repeat("C", 340)), covalent{})
	require.ErrorContains(t, err, "1022 atoms")

	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	_, err = Embed(ctx, parse(t, "CCCC"), covalent{}, rand.New(rand.NewPCG(1, 1)))
	require.ErrorIs(t, err, context.Canceled)
}

// A trans double bond in a ring of five atoms cannot be built.
func TestImpossibleStereo(t *testing.T) {
	m := hydrocarbon(t, ringBonds(0, 5), 0)
	m.DoubleBonds = []molecule.DoubleBond{{A: 0, B: 1, RefA: 4, RefB: 2, Cis: false}}
	_, err := Embed(context.Background(), m, covalent{}, rand.New(rand.NewPCG(1, 1)))
	require.ErrorIs(t, err, ErrNoGeometry)
}

func TestSameSeedSameGeometry(t *testing.T) {
	m := parse(t, "C[C@@H]1CCCCCCCCCCCCC(=O)C1")
	field := mmff(t, m)
	draw := func(seed uint64) molecule.Geometry {
		g, err := Embed(context.Background(), m, field, rand.New(rand.NewPCG(seed, 0)))
		require.NoError(t, err)
		return g
	}
	require.Equal(t, draw(1), draw(1))
	require.NotEqual(t, draw(1), draw(2))
}

// Calls in a row give different conformers: the torsions of hexane take all three staggered positions.
func TestDrawsDiffer(t *testing.T) {
	_, list := draws(t, "CCCCCC", 60)
	seen := map[int]int{}
	for _, g := range list {
		seen[int(math.Round(g.Torsion(1, 2, 3, 4)/(120*degree)))]++ // −1: gauche−, 0: none, 1: gauche+ or anti
	}
	anti := 0
	for _, g := range list {
		if math.Abs(g.Torsion(1, 2, 3, 4)) > 150*degree {
			anti++
		}
	}
	require.Positive(t, anti, "anti")
	require.Positive(t, seen[-1], "gauche −")
	require.Positive(t, seen[1], "gauche +")
}

// An L-amino acid seen from the hydrogen on Cα shows CO, R and N clockwise (the CORN rule; Cahn, Ingold, Prelog, Angew. Chem.
// Int. Ed. 5, 385 (1966), for the descriptor S). L-alanine is N[C@@H](C)C(=O)O.
func TestHandOfAlanine(t *testing.T) {
	for notation, clockwise := range map[string]bool{"N[C@@H](C)C(=O)O": true, "N[C@H](C)C(=O)O": false} {
		m, list := draws(t, notation, 10)
		h := -1
		for _, n := range m.Neighbors(1) {
			if m.Atoms[n.Atom].Element == hydrogen {
				h = n.Atom
			}
		}
		const nitrogen, alpha, methyl, carboxyl = 0, 1, 2, 3
		for _, g := range list {
			toViewer := minus(g.At(h), g.At(alpha))
			co, r, n := minus(g.At(carboxyl), g.At(alpha)), minus(g.At(methyl), g.At(alpha)), minus(g.At(nitrogen), g.At(alpha))
			// seen along −toViewer, a clockwise turn co → r → n has its normal pointing away from the viewer
			normal := crossed(minus(r, co), minus(n, co))
			require.Equal(t, clockwise, dotted(normal, toViewer) < 0, notation)
		}
	}
}

// Fumaric acid is (E), maleic acid (Z); an unspecified double bond and an unspecified centre come out both ways.
func TestDoubleBonds(t *testing.T) {
	_, list := draws(t, "OC(=O)/C=C/C(=O)O", 10)
	for _, g := range list {
		require.Greater(t, math.Abs(g.Torsion(1, 3, 4, 5)), 150*degree)
	}
	_, list = draws(t, `OC(=O)/C=C\C(=O)O`, 10)
	for _, g := range list {
		require.Less(t, math.Abs(g.Torsion(1, 3, 4, 5)), 30*degree)
	}
	ways := map[bool]int{}
	_, list = draws(t, "CC=CC", 40)
	for _, g := range list {
		torsion := math.Abs(g.Torsion(0, 1, 2, 3))
		require.True(t, torsion < 30*degree || torsion > 150*degree, "planar")
		ways[torsion < 30*degree]++
	}
	require.Len(t, ways, 2)
	m, list := draws(t, "FC(Cl)Br", 40)
	hands := map[bool]int{}
	for _, g := range list {
		n := m.Neighbors(1)
		hands[signedVolume(g, [4]int{n[0].Atom, n[1].Atom, n[2].Atom, n[3].Atom}) > 0]++
	}
	require.Len(t, hands, 2)
}

// Trans double bonds fit into rings of eight and more.
func TestTransCycloalkenes(t *testing.T) {
	for n := 8; n <= 16; n++ {
		_, list := draws(t, "C1/C=C/"+strings.Repeat("C", n-4)+"C1", 3)
		for _, g := range list {
			require.Greater(t, math.Abs(g.Torsion(0, 1, 2, 3)), 120*degree, "ring of %d", n)
		}
	}
}

// Cumulenes: the end planes are crossed in allene (two double bonds) and pentatetraene (four), and the same in butatriene.
func TestCumulenes(t *testing.T) {
	for notation, angle := range map[string]float64{"C=C=C": 90, "C=C=C=C": 0, "C=C=C=C=C": 90} {
		m, list := draws(t, notation, 5)
		last := 0
		for i, a := range m.Atoms {
			if a.Element == carbon {
				last = i
			}
		}
		first := newGraph(m).others(0, 1)[0]
		end := newGraph(m).others(last, last-1)[0]
		for _, g := range list {
			torsion := math.Abs(g.Torsion(first, 0, last, end)) / degree
			require.InDelta(t, angle, min(torsion, 180-torsion), 20, notation)
			// a distance that is 1 % short, which the quench repairs, bends the chain by 16°
			require.InDelta(t, 180, g.Angle(0, 1, 2)/degree, 20, notation)
		}
	}
}

// Benzene, naphthalene and a peptide bond are planar; the bond lengths are those of the field.
func TestPlanarGroups(t *testing.T) {
	_, list := draws(t, "c1ccc2ccccc2c1", 5)
	for _, g := range list {
		for _, quad := range [][4]int{{0, 1, 2, 3}, {2, 3, 4, 5}, {3, 4, 5, 6}, {9, 0, 1, 2}} {
			torsion := math.Abs(g.Torsion(quad[0], quad[1], quad[2], quad[3]))
			require.Less(t, min(torsion, math.Pi-torsion), 15*degree)
		}
		require.InDelta(t, 1.40, g.Distance(0, 1), 0.05) // MMFF94 reference 1.374 Å, benzene 1.397 Å (handbook)
	}
	trans := 0
	_, list = draws(t, "CC(=O)NC", 40)
	for _, g := range list {
		torsion := math.Abs(g.Torsion(0, 1, 3, 4))
		require.Less(t, min(torsion, math.Pi-torsion), 25*degree)
		if torsion > math.Pi/2 {
			trans++
		}
	}
	require.Greater(t, trans, 20, "secondary amides are usually trans")
	require.Less(t, trans, 40, "but not always")
}

// The largest molecules: a peptide of 252 atoms and a ring of 40 carbons.
func TestLarge(t *testing.T) {
	for _, notation := range []string{polyalanine(24), "C1" + strings.Repeat("C", 38) + "C1"} {
		m, list := draws(t, notation, 1)
		require.NoError(t, m.CheckStereo(list[0]))
	}
}

func TestDrawIsConcurrent(t *testing.T) {
	m := parse(t, "C1C2CC3CC1CC(C2)C3")
	e, err := New(m, mmff(t, m))
	require.NoError(t, err)
	results := make(chan molecule.Geometry)
	for range 4 {
		go func() {
			g, _ := e.Draw(context.Background(), rand.New(rand.NewPCG(9, 9)))
			results <- g
		}()
	}
	first := <-results
	require.NotNil(t, first)
	for range 3 {
		require.Equal(t, first, <-results)
	}
}
