package search_test

import (
	"context"
	"fmt"
	"runtime"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/search"
)

// hardSet holds molecules with hundreds of minima and more.
var hardSet = []struct{ name, smiles string }{
	{"cycloheptadecane", "C1CCCCCCCCCCCCCCCC1"},
	{"(R)-muscone", "C[C@@H]1CCCCCCCCCCCCC(=O)C1"},
	{"capped hexaalanine", "CC(=O)N[C@@H](C)C(=O)N[C@@H](C)C(=O)N[C@@H](C)C(=O)N[C@@H](C)C(=O)N[C@@H](C)C(=O)N[C@@H](C)C(=O)NC"},
	{"zearalenone, a 14-membered macrolactone", "C[C@H]1CCCC(=O)CCC/C=C/c2cc(O)cc(O)c2C(=O)O1"},
	{"(6S)-dodecane-1,6,12-triol", "OCCCCC[C@H](O)CCCCCCO"},
	{"sucrose", "OC[C@H]1O[C@H](O[C@]2(CO)O[C@H](CO)[C@@H](O)[C@@H]2O)[C@H](O)[C@@H](O)[C@@H]1O"},
	{"a bis-sulfonamide of 62 atoms", "CCN(CC)S(=O)(=O)c1ccc(cc1)C(=O)NCCNS(=O)(=O)c1ccc(OC)c(OC)c1"},
}

// BenchmarkHard gives each molecule half a minute and reports what came of it.
func BenchmarkHard(b *testing.B) {
	for _, row := range hardSet {
		b.Run(row.name, func(b *testing.B) {
			for b.Loop() {
				p := problem(b, row.smiles)
				peak := uint64(0)
				r, err := search.Run(context.Background(), p, search.Settings{Seed: 1, MaxSeconds: 30}, nil, search.Hooks{
					Checkpoint: func(search.Checkpoint) error {
						var now runtime.MemStats
						runtime.ReadMemStats(&now)
						peak = max(peak, now.HeapInuse)
						return nil
					},
				})
				require.NoError(b, err)
				fmt.Printf("| %s | %d atoms | %d minima | coverage %.3f, %.0f unseen | %d quenches, %d evaluations each | %.0f s (%s) | %.0f MB |\n",
					row.name, p.Atoms(), len(r.Minima), r.Coverage.Estimate, r.Coverage.Unseen, r.Quenches, r.Evaluations/r.Quenches,
					r.ElapsedSeconds, r.StopReason, float64(peak)/1e6)
				b.ReportMetric(float64(len(r.Minima)), "minima")
				b.ReportMetric(100*r.Coverage.Estimate, "%coverage")
				b.ReportMetric(float64(r.Quenches)/r.ElapsedSeconds, "quenches/s")
			}
		})
	}
}
