package embed

import (
	"context"
	_ "embed"
	"math/rand/v2"
	"os"
	"strings"
	"testing"

	"github.com/stretchr/testify/assert"
	"github.com/stretchr/testify/require"

	"tarn/forcefield"
	"tarn/minimize"
	"tarn/molecule"
	"tarn/molecule/smiles"
)

// The test set: names and isomeric SMILES of real molecules, written down from general chemical knowledge.
//
//go:embed testdata/molecules.tsv
var testSet string

type entry struct {
	name, smiles string
	formula      string // Hill order; "" if not given
}

func entries(t testing.TB) []entry {
	t.Helper()
	var list []entry
	for line := range strings.Lines(testSet) {
		line = strings.TrimSpace(line)
		if line == "" || strings.HasPrefix(line, "#") {
			continue
		}
		fields := strings.Split(line, "\t")
		require.GreaterOrEqual(t, len(fields), 2, "no tab in %q", line)
		list = append(list, entry{fields[0], fields[1], strings.Join(fields[2:], "")})
	}
	return list
}

// prepare parses an entry and gives it MMFF94 where that covers it, otherwise covalent radii and ideal angles.
func (e entry) prepare(t testing.TB) (*molecule.Molecule, *Embedder, *forcefield.MMFF94) {
	t.Helper()
	m, err := smiles.Parse(e.smiles)
	require.NoError(t, err, e.name)
	var ref Field
	field, err := forcefield.NewMMFF94(m, forcefield.Options{})
	if err == nil {
		ref = field
	}
	embedder, err := New(m, ref)
	require.NoError(t, err, e.name)
	return m, embedder, field
}

// requireSound checks a geometry against the graph and the descriptors, independently of what was aimed at.
func requireSound(t testing.TB, e entry, m *molecule.Molecule, g molecule.Geometry) {
	t.Helper()
	require.Len(t, g, 3*len(m.Atoms), e.name)
	require.NoError(t, m.CheckStereo(g), e.name)
	require.NoError(t, newGraph(m).penetration(g), e.name)
	for i := range m.Atoms {
		for j := range i {
			d := g.Distance(i, j)
			if b := m.BondBetween(i, j); b >= 0 {
				longest := 1.3 * (m.Atoms[i].Element.CovalentRadius() + m.Atoms[j].Element.CovalentRadius())
				require.Less(t, d, longest, "%s: bond of atoms %d and %d", e.name, i+1, j+1)
			} else {
				require.Greater(t, d, 1.2, "%s: atoms %d and %d are not bonded", e.name, i+1, j+1)
			}
		}
	}
}

// The formulas, written down from memory and apart from the SMILES, agree with them.
func TestSetFormulas(t *testing.T) {
	checked := 0
	for _, e := range entries(t) {
		if e.formula == "" {
			continue
		}
		m := parse(t, e.smiles)
		require.Equal(t, e.formula, m.Formula(), e.name)
		checked++
	}
	require.Greater(t, checked, 200)
}

// Every tenth molecule of the set, and those that are hard, come out right at the first call.
func TestSubset(t *testing.T) {
	hard := map[string]bool{
		"strychnine": true, "cubane": true, "adamantane": true, "taxadiene": true, "cyclotetracontane": true,
		"(E)-cyclooctene": true, "cyclosporin A": true, "pentatetraene": true, "morphine": true, "dodecahedrane": true,
		"hydrogen": true, "sodium ion": true, "methane": true, "acetylene": true, "carbon dioxide": true,
	}
	ctx := context.Background()
	for i, e := range entries(t) {
		if i%10 != 0 && !hard[e.name] {
			continue
		}
		m, embedder, _ := e.prepare(t)
		g, err := embedder.Draw(ctx, rand.New(rand.NewPCG(7, uint64(i))))
		require.NoError(t, err, e.name)
		requireSound(t, e, m, g)
	}
}

// All molecules of the set come out right with several seeds, and an MMFF94 quench keeps what was asked for.
func TestVerifySet(t *testing.T) {
	if os.Getenv("TARN_VERIFY") != "1" {
		t.Skip("embeds and quenches the whole test set; set TARN_VERIFY=1 to run it")
	}
	const draws = 3
	ctx := context.Background()
	set := entries(t)
	require.GreaterOrEqual(t, len(set), 300)
	embedded, kept, quenched := 0, 0, 0
	for i, e := range set {
		m, embedder, field := e.prepare(t)
		for draw := range draws {
			g, err := embedder.Draw(ctx, rand.New(rand.NewPCG(uint64(draw), uint64(i))))
			if !assert.NoError(t, err, e.name) {
				continue
			}
			requireSound(t, e, m, g)
			embedded++
			if field == nil || freeAxis[e.name] {
				continue
			}
			quenched++
			result, err := minimize.Quench(ctx, field, g, minimize.Settings{GradientRMS: 1e-4})
			if assert.NoError(t, err, e.name) && assert.NoError(t, m.CheckStereo(result.X), "%s after the quench", e.name) {
				kept++
			}
		}
	}
	t.Logf("| first geometry | %d molecules, %d draws each | %d of %d sound | stereo kept in %d of %d quenches |",
		len(set), draws, embedded, draws*len(set), kept, quenched)
}

// freeAxis names cumulenes with descriptors. MMFF94 has no torsion term about a linear atom, so only contacts between the ends
// keep their planes crossed or together, and a quench may turn one end.
var freeAxis = map[string]bool{
	"2,3-pentadiene": true, "2,3-pentadiene, mirror image": true, "laballenic acid": true,
	"(E)-2,3,4-hexatriene": true, "(Z)-2,3,4-hexatriene": true,
}
