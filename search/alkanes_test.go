package search_test

import (
	"fmt"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/search"
)

// Unbranched alkanes at all energies. Published numbers of distinct minima: G. Tasi et al., J. Phys. Chem. A 102, 7698 (1998), from
// memory; they count idealised words of torsions. An exhaustive enumeration decides how many of them MMFF94 has: all up to hexane,
// a few less after that.
func TestVerifyAlkaneCounts(t *testing.T) {
	verifyOnly(t)
	fmt.Println("| alkane | published, idealised | enumerated in MMFF94 | found by search |")
	fmt.Println("| --- | --- | --- | --- |")
	for _, row := range []struct {
		smiles    string
		published int
		exact     bool
	}{{"CCCC", 2, true}, {"CCCCC", 4, true}, {"CCCCCC", 12, true}, {"CCCCCCC", 32, false}, {"CCCCCCCC", 102, false}} {
		p := problem(t, row.smiles)
		ref := enumerated(t, p, 60_000)
		enumerated := len(ref.energies)
		r := run(t, p, search.Settings{Seed: 2, WindowKcal: 60, Coverage: 0.9999})
		for i := range r.Minima {
			_, fresh := ref.add(r.Minima[i].X, r.Minima[i].Energy)
			require.False(t, fresh, "a minimum of %s that the enumeration does not have", row.smiles)
		}
		fmt.Printf("| %s | %d | %d | %d |\n", row.smiles, row.published, enumerated, len(r.Minima))
		require.Len(t, r.Minima, enumerated)
		if row.exact {
			require.Equal(t, row.published, enumerated)
		} else {
			require.LessOrEqual(t, enumerated, row.published)
		}
	}
}
