package smiles

import (
	_ "embed"
	"math/rand/v2"
	"os"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/molecule"
)

// renumbered returns the same molecule with its atoms and bonds in another order, each descriptor written from another
// neighbour.
func renumbered(t *testing.T, m *molecule.Molecule, rng *rand.Rand) *molecule.Molecule {
	t.Helper()
	place := rng.Perm(len(m.Atoms))
	at := func(i int) int {
		if i < 0 {
			return i
		}
		return place[i]
	}
	atoms := make([]molecule.Atom, len(m.Atoms))
	for i, a := range m.Atoms {
		atoms[place[i]] = a
	}
	bonds := make([]molecule.Bond, len(m.Bonds))
	for i, k := range rng.Perm(len(m.Bonds)) {
		b := m.Bonds[i]
		bonds[k] = molecule.Bond{A: at(b.A), B: at(b.B), Order: b.Order}
		if rng.IntN(2) == 0 {
			bonds[k].A, bonds[k].B = bonds[k].B, bonds[k].A
		}
	}
	var centers []molecule.Center
	for _, c := range m.Centers {
		n := c.Neighbors
		switch rng.IntN(3) {
		case 0: // an even permutation that keeps the pairs of an allene
			n = [4]int{n[2], n[3], n[0], n[1]}
		case 1:
			n = [4]int{n[1], n[0], n[2], n[3]}
			c.Clockwise = !c.Clockwise
		}
		for k := range n {
			n[k] = at(n[k])
		}
		centers = append(centers, molecule.Center{Atom: at(c.Atom), Neighbors: n, Clockwise: c.Clockwise})
	}
	rng.Shuffle(len(centers), func(i, j int) { centers[i], centers[j] = centers[j], centers[i] })
	var doubleBonds []molecule.DoubleBond
	for _, b := range m.DoubleBonds {
		b = molecule.DoubleBond{A: at(b.A), B: at(b.B), RefA: at(b.RefA), RefB: at(b.RefB), Cis: b.Cis}
		if rng.IntN(2) == 0 {
			b.A, b.B, b.RefA, b.RefB = b.B, b.A, b.RefB, b.RefA
		}
		doubleBonds = append(doubleBonds, b)
	}
	out, err := molecule.New(m.Name, atoms, bonds, centers, doubleBonds)
	require.NoError(t, err)
	return out
}

func parse(t *testing.T, s string) *molecule.Molecule {
	t.Helper()
	m, err := Parse(s)
	require.NoError(t, err, s)
	return m
}

// checkInvariance renumbers a molecule and reads back what is written, and wants one canonical SMILES from all.
func checkInvariance(t *testing.T, s string, times int, rng *rand.Rand) {
	t.Helper()
	m := parse(t, s)
	want := Canonical(m)
	require.Equal(t, want, Canonical(parse(t, want)), "canonical SMILES of %s read back", s)
	require.Equal(t, want, Canonical(parse(t, Write(m))), "%s written as %s and read back", s, Write(m))
	for range times {
		other := renumbered(t, m, rng)
		require.Equal(t, want, Canonical(other), "renumbered %s", s)
		require.Equal(t, want, Canonical(parse(t, Write(other))), "renumbered %s, written as %s", s, Write(other))
		require.True(t, m.Same(other))
	}
}

//go:embed testdata/molecules.smi
var moleculeList string

func molecules() []string {
	var list []string
	for line := range strings.Lines(moleculeList) {
		if !strings.HasPrefix(line, "#") {
			list = append(list, strings.TrimSpace(line))
		}
	}
	return list
}

func TestCanonicalSMILESIsInvariant(t *testing.T) {
	rng := rand.New(rand.NewPCG(5, 6))
	for _, s := range molecules() {
		checkInvariance(t, s, 3, rng)
	}
}

func TestVerifyCanonicalSMILES(t *testing.T) {
	if os.Getenv("TARN_VERIFY") == "" {
		t.Skip("1,000 renumberings of 200 molecules take minutes; set TARN_VERIFY=1 to run them")
	}
	list := molecules()
	require.GreaterOrEqual(t, len(list), 200)
	rng := rand.New(rand.NewPCG(7, 8))
	for _, s := range list {
		checkInvariance(t, s, 1000, rng)
	}
}

// All stereoisomers of a molecule have keys of their own, and a renumbering of one keeps its key.
func TestStereoisomersKeepTheirKeys(t *testing.T) {
	rng := rand.New(rand.NewPCG(9, 10))
	for _, s := range []string{
		"OC1C(O)C(O)C(O)C(O)C1O", "OC(=O)C(O)C(O)C(O)C(=O)O", "CC1CC(C)CC(C)C1", "CC=CC=CC=CC", "CC(F)C(C(C)F)(C(C)F)C(C)F",
		"OC1CC2CCC1C2", "CC1CCC2CC(C)CCC2C1", "CC=C1CC(=CC)C1", "CC=C=CC(O)C=C=CC",
	} {
		isomers, err := parse(t, s).Stereoisomers()
		require.NoError(t, err)
		keys := map[string]bool{}
		for _, isomer := range isomers {
			checkInvariance(t, Write(isomer), 5, rng)
			keys[Key(renumbered(t, isomer, rng))] = true
		}
		require.Len(t, keys, len(isomers), s)
	}
}

func TestKeyIsShortAndSafe(t *testing.T) {
	for _, s := range molecules() {
		require.Regexp(t, "^[a-z2-7]{20}$", Key(parse(t, s)))
	}
}

func BenchmarkCanonical(b *testing.B) {
	for name, s := range map[string]string{
		"hexane": "CCCCCC", "cholesterol": "C[C@H](CCCC(C)C)[C@H]1CC[C@@H]2[C@@]1(CC[C@H]3[C@H]2CC=C4[C@@]3(CC[C@@H](C4)O)C)C",
		"dodecahedrane": "C12C3C4C5C1C6C7C2C8C3C9C4C%10C5C6C%11C7C8C9C%10%11",
	} {
		b.Run(name, func(b *testing.B) {
			for b.Loop() {
				m, err := Parse(s)
				if err != nil {
					b.Fatal(err)
				}
				Canonical(m)
			}
		})
	}
}
