package search_test

import (
	"context"
	"fmt"
	"math/rand/v2"
	"os"
	"runtime"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/dedupe"
	"tarn/forcefield"
	"tarn/molecule"
	"tarn/molecule/embed"
	"tarn/molecule/smiles"
	"tarn/search"
	"tarn/search/enumerate"
)

// recallSet holds molecules with up to six rotatable bonds and cycloalkanes, small enough to be enumerated.
var recallSet = []struct{ name, smiles string }{
	{"butane", "CCCC"},
	{"pentane", "CCCCC"},
	{"hexane", "CCCCCC"},
	{"heptane", "CCCCCCC"},
	{"octane", "CCCCCCCC"},
	{"3-methylpentane", "CCC(C)CC"},
	{"2,3-dimethylbutane", "CC(C)C(C)C"},
	{"1-hexene", "C=CCCCC"},
	{"1,5-hexadiene", "C=CCCC=C"},
	{"1-butanol", "CCCCO"},
	{"1,2-ethanediol", "OCCO"},
	{"glycerol", "OCC(O)CO"},
	{"(2S)-2-butanol", "CC[C@H](C)O"},
	{"diethyl ether", "CCOCC"},
	{"1,2-dimethoxyethane", "COCCOC"},
	{"1,2-ethanediamine", "NCCN"},
	{"butylamine", "CCCCN"},
	{"2-aminoethanol", "NCCO"},
	{"butanal", "CCCC=O"},
	{"2-pentanone", "CCCC(C)=O"},
	{"butanoic acid", "CCCC(=O)O"},
	{"ethyl propanoate", "CCOC(=O)CC"},
	{"L-lactic acid", "C[C@H](O)C(=O)O"},
	{"L-alanine", "C[C@H](N)C(=O)O"},
	{"N-acetylglycine N'-methylamide", "CC(=O)NCC(=O)NC"},
	{"N-acetyl-L-alanine N'-methylamide", "CC(=O)N[C@@H](C)C(=O)NC"},
	{"1,3-dichloropropane", "ClCCCCl"},
	{"methyl propyl sulfide", "CCCSC"},
	{"2-phenylethanol", "OCCc1ccccc1"},
	{"2-phenylethylamine", "NCCc1ccccc1"},
	{"cyclopentane", "C1CCCC1"},
	{"cyclohexane", "C1CCCCC1"},
	{"cycloheptane", "C1CCCCCC1"},
	{"cyclooctane", "C1CCCCCCC1"},
	{"cyclononane", "C1CCCCCCCC1"},
	{"cyclodecane", "C1CCCCCCCCC1"},
	{"ethylcyclohexane", "CCC1CCCCC1"},
	{"menthol", "CC(C)[C@@H]1CC[C@@H](C)C[C@H]1O"},
	{"limonene", "CC(=C)[C@@H]1CCC(C)=CC1"},
	{"2-methoxytetrahydropyran", "CO[C@H]1CCCCO1"},
	{"N-methylpiperidine", "CN1CCCCC1"},
	{"cis-decalin", "C1CC[C@H]2CCCC[C@H]2C1"},
}

// verifyOnly skips long checks unless they are asked for.
func verifyOnly(t *testing.T) {
	t.Helper()
	if os.Getenv("TARN_VERIFY") != "1" {
		t.Skip("a long check: set TARN_VERIFY=1 (make verify) to run it")
	}
}

func problem(t testing.TB, text string) *search.Problem {
	t.Helper()
	m, err := smiles.Parse(text)
	require.NoError(t, err)
	p, err := search.NewMoleculeProblem(context.Background(), m, "mmff94", nil, 1)
	require.NoError(t, err)
	return p
}

// reference collects minima of one molecule from all sources.
type reference struct {
	index    *dedupe.Index
	energies []float64
}

func newReference(p *search.Problem) *reference {
	return &reference{index: dedupe.NewIndex(p.Symmetry, dedupe.Tolerance{})}
}

func (r *reference) add(x []float64, energy float64) (id int, fresh bool) {
	if id, ok := r.index.Find(x, energy); ok {
		return id, false
	}
	r.energies = append(r.energies, energy)
	return r.index.Add(x, energy), true
}

func (r *reference) lowest() float64 {
	lowest := r.energies[0]
	for _, e := range r.energies {
		lowest = min(lowest, e)
	}
	return lowest
}

// recall returns how many reference minima there are up to a height above the lowest, and how many of them minima hold.
func (r *reference) recall(minima []search.Minimum, height float64) (known, found int) {
	have := map[int]bool{}
	for i := range minima {
		if id, ok := r.index.Find(minima[i].X, minima[i].Energy); ok {
			have[id] = true
		}
	}
	top := r.lowest() + height
	for id, e := range r.energies {
		if e <= top {
			known++
			if have[id] {
				found++
			}
		}
	}
	return known, found
}

func enumerated(t testing.TB, p *search.Problem, most int) *reference {
	t.Helper()
	e, err := embed.New(p.Molecule, p.Field.(*forcefield.MMFF94))
	require.NoError(t, err)
	draw := func(rng *rand.Rand) (molecule.Geometry, error) { return e.Draw(context.Background(), rng) }
	minima, err := enumerate.Minima(context.Background(), p.Molecule, p.Field, p.Symmetry, draw,
		enumerate.Settings{MostQuenches: most, RingDraws: 400, Workers: runtime.GOMAXPROCS(0), Seed: 5})
	require.NoError(t, err)
	ref := newReference(p)
	for _, m := range minima {
		ref.add(m.X, m.Energy)
	}
	return ref
}

// Default searches against exhaustive enumeration: at least 99 % of all minima within 5 kcal/mol and all within 2 kcal/mol, over three
// seeds; and the stated coverage interval must hold the true fraction in at least 85 % of the searches. What the searches find beyond the
// enumeration counts as known.
func TestVerifyRecall(t *testing.T) {
	verifyOnly(t)
	const seeds = 3
	totalKnown, totalFound, held, searches := 0, 0, 0, 0
	fmt.Println("| molecule | minima < 6 | beyond enumeration | quenches | recall < 2 | recall < 5 | recall < 6 | coverage |")
	fmt.Println("| --- | --- | --- | --- | --- | --- | --- | --- |")
	for _, row := range recallSet {
		t.Run(row.name, func(t *testing.T) {
			p := problem(t, row.smiles)
			ref := enumerated(t, p, 5000)
			var results []*search.Result
			beyond := 0
			for seed := range seeds {
				r, err := search.Run(context.Background(), p, search.Settings{Seed: uint64(seed + 1)}, nil, search.Hooks{})
				require.NoError(t, err)
				results = append(results, r)
				for i := range r.Minima {
					if _, fresh := ref.add(r.Minima[i].X, r.Minima[i].Energy); fresh {
						beyond++
					}
				}
			}
			for _, r := range results {
				known2, found2 := ref.recall(r.Minima, 2)
				known5, found5 := ref.recall(r.Minima, 5)
				known6, found6 := ref.recall(r.Minima, 6)
				truth := float64(found6) / float64(known6)
				searches++
				if r.Coverage.Low <= truth && truth <= r.Coverage.High {
					held++
				}
				totalKnown += known5
				totalFound += found5
				fmt.Printf("| %s | %d | %d | %d | %d/%d | %d/%d | %d/%d | %.3f (%.3f-%.3f) |\n", row.name, known6, beyond, r.Quenches,
					found2, known2, found5, known5, found6, known6, r.Coverage.Estimate, r.Coverage.Low, r.Coverage.High)
				require.Equal(t, known2, found2, "within 2 kcal/mol")
			}
		})
	}
	fmt.Printf("| all | recall < 5: %d of %d | interval holds the truth: %d of %d |\n", totalFound, totalKnown, held, searches)
	require.GreaterOrEqual(t, float64(totalFound), 0.99*float64(totalKnown))
	require.GreaterOrEqual(t, float64(held), 0.85*float64(searches))
}
