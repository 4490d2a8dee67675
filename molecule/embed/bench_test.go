package embed

import (
	"context"
	"math/rand/v2"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/forcefield"
	"tarn/molecule/smiles"
)

// BenchmarkEmbed measures a whole call, bounds and smoothing included. The number to reach is 50 ms for 50 atoms.
func BenchmarkEmbed(b *testing.B) {
	for _, c := range []struct{ name, smiles string }{
		{"50atoms/hexadecane", "CCCCCCCCCCCCCCCC"},
		{"47atoms/muscone", "C[C@@H]1CCCCCCCCCCCCC(=O)C1"},
		{"49atoms/testosterone", "C[C@]12CC[C@H]3[C@H]([C@@H]1CC[C@@H]2O)CCC4=CC(=O)CC[C@]34C"},
		{"47atoms/strychnine", "C1CN2CC3=CCO[C@H]4CC(=O)N5[C@H]6[C@H]4[C@H]3C[C@H]2[C@@]61C7=CC=CC=C75"},
		{"120atoms/cyclotetracontane", "C1" + strings.Repeat("C", 38) + "C1"},
		{"252atoms/polyalanine", polyalanine(24)},
	} {
		b.Run(c.name, func(b *testing.B) {
			m, err := smiles.Parse(c.smiles)
			require.NoError(b, err)
			field, err := forcefield.NewMMFF94(m, forcefield.Options{})
			require.NoError(b, err)
			rng := rand.New(rand.NewPCG(1, 2))
			b.ReportMetric(float64(len(m.Atoms)), "atoms")
			for b.Loop() {
				_, err := Embed(context.Background(), m, field, rng)
				require.NoError(b, err)
			}
		})
	}
}

// polyalanine returns a capped chain of n L-alanines with 10n + 12 atoms.
func polyalanine(n int) string {
	return "CC(=O)" + strings.Repeat("N[C@@H](C)C(=O)", n) + "NC"
}
