package minimize_test

import (
	"slices"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/minimize"
)

// Wavenumbers within 2 cm⁻¹. Source: T. A. Halgren, J. Comput. Chem. 17, 553 (1996), Table II.
func TestPublishedWavenumbers(t *testing.T) {
	table := rows(t, "wavenumbers.tsv")
	require.Len(t, table, 15)
	for _, row := range table {
		s := newSubject(t, row["smiles"])
		r := s.conformer(t, row["conformer"])
		modes, err := minimize.NormalModes(minimize.HessianAt(s.field, r.X), s.Masses(), r.X)
		require.NoError(t, err)
		require.Len(t, modes.WavenumbersCM1, 3*len(s.Atoms)-6, row["molecule"])
		var distinct []float64
		for i, w := range modes.WavenumbersCM1 {
			if i == 0 || w-modes.WavenumbersCM1[i-1] > 0.01 {
				distinct = append(distinct, w)
			}
		}
		var printed []float64
		for _, w := range strings.Fields(row["wavenumbers"]) {
			printed = append(printed, number(t, w))
		}
		slices.Sort(printed)
		require.InDeltaSlice(t, printed, distinct, 2, row["molecule"])
	}
}
