package search_test

import (
	"context"
	"errors"
	"fmt"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/search"
)

// methodSet is a dozen flexible molecules on which the methods are compared: chains, hydrogen bonds, peptides, rings small and large.
var methodSet = []struct{ name, smiles string }{
	{"octane", "CCCCCCCC"},
	{"glycerol", "OCC(O)CO"},
	{"1,2-dimethoxyethane", "COCCOC"},
	{"linalool", "CC(C)=CCC[C@](C)(O)C=C"},
	{"menthol", "CC(C)[C@@H]1CC[C@@H](C)C[C@H]1O"},
	{"ibuprofen", "CC(C)Cc1ccc(cc1)[C@H](C)C(=O)O"},
	{"N-acetyl-L-alanine N'-methylamide", "CC(=O)N[C@@H](C)C(=O)NC"},
	{"N-acetyl-di-L-alanine N'-methylamide", "CC(=O)N[C@@H](C)C(=O)N[C@@H](C)C(=O)NC"},
	{"cyclodecane", "C1CCCCCCCCC1"},
	{"cyclododecane", "C1CCCCCCCCCCC1"},
	{"cyclotridecane", "C1CCCCCCCCCCCC1"},
	{"2-methylcyclononanone", "C[C@@H]1CCCCCCCC1=O"},
}

// errSpent ends a search at a budget of evaluations.
var errSpent = errors.New("the budget of evaluations is spent")

// after runs a search and returns what it had found each time a budget of evaluations was passed, at the end of a round.
func after(tb testing.TB, p *search.Problem, method search.Method, seed uint64, budgets []int) [][]search.Minimum {
	tb.Helper()
	var found [][]search.Minimum
	result, err := search.Run(context.Background(), p, search.Settings{Method: method, Seed: seed, Coverage: 1, MaxQuenches: 1 << 40}, nil,
		search.Hooks{Checkpoint: func(c search.Checkpoint) error {
			for len(found) < len(budgets) && c.Evaluations >= budgets[len(found)] {
				found = append(found, c.Minima)
			}
			if len(found) == len(budgets) {
				return errSpent
			}
			return nil
		}})
	if err != nil {
		require.ErrorIs(tb, err, errSpent)
		return found
	}
	for len(found) < len(budgets) { // it was sure that it had everything
		found = append(found, result.Checkpoint.Minima)
	}
	return found
}

// BenchmarkMethods compares the methods at equal numbers of energy evaluations: the recall of all minima within 5 kcal/mol that any of the
// searches found, in per cent. docs/search.md shows the table.
func BenchmarkMethods(b *testing.B) {
	budgets := []int{50_000, 150_000, 300_000}
	seeds := []uint64{1, 2}
	sums := map[search.Method][]float64{}
	for _, row := range methodSet {
		p := problem(b, row.smiles)
		ref := newReference(p)
		found := map[search.Method][][][]search.Minimum{}
		for _, method := range search.Methods {
			for _, seed := range seeds {
				stages := after(b, p, method, seed, budgets)
				found[method] = append(found[method], stages)
				for _, minima := range stages {
					for i := range minima {
						ref.add(minima[i].X, minima[i].Energy)
					}
				}
			}
		}
		for _, method := range search.Methods {
			line := ""
			for k := range budgets {
				recall := 0.0
				for _, stages := range found[method] {
					at := stages[min(k, len(stages)-1)]
					known, have := ref.recall(at, 5)
					recall += 100 * float64(have) / float64(known) / float64(len(seeds))
				}
				if len(sums[method]) <= k {
					sums[method] = append(sums[method], 0)
				}
				sums[method][k] += recall / float64(len(methodSet))
				line += fmt.Sprintf(" %.1f |", recall)
			}
			fmt.Printf("| %s | %s |%s\n", row.name, method, line)
		}
	}
	for _, method := range search.Methods {
		for k, budget := range budgets {
			b.ReportMetric(sums[method][k], fmt.Sprintf("%%recall/%s/%dk", method, budget/1000))
		}
	}
}
