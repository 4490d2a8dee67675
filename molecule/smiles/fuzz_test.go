package smiles

import (
	"errors"
	"testing"
	"time"

	"github.com/stretchr/testify/require"
)

// FuzzParse wants of any text: no panic, no hang, an error with a column inside the text, or a molecule that is still the
// same after writing and reading it in either order. Findings are kept under testdata/fuzz.
func FuzzParse(f *testing.F) {
	for _, seed := range []string{
		"CCO", "c1ccccc1", "N[C@@H](C)C(=O)O", "F/C=C\\C=C/F", "OC(Cl)=[C@]=C(C)F", "C[S@](=O)CC", "[13CH3:2][NH3+].[Cl-]",
		"C1CC%12CC1CC%12", "Cn1cnc2c1c(=O)n(C)c(=O)n2C", "CN=N#N", "C12C3C4C1C5C2C3C45", "CC[n+]1ccn(C)c1", "C(((", "[C@TH1H](F)(Cl)Br",
		"[Fe+2].[cH-]1cccc1", "[Pt](Cl)(Cl)$C", "O=S1(=O)NC(=O)c2ccccc12", "C/C=C/C=CC=C", "C[N-][N+]#N", "[se]1cccc1", "B1OBO1",
	} {
		f.Add(seed)
	}
	f.Fuzz(func(t *testing.T, text string) {
		if len(text) > 10_000 {
			return
		}
		begin := time.Now()
		m, err := Parse(text)
		if err != nil {
			var syntax *SyntaxError
			require.True(t, errors.As(err, &syntax), "%v", err)
			require.GreaterOrEqual(t, syntax.Column, 1)
			require.LessOrEqual(t, syntax.Column, len(text)+1)
			_ = err.Error()
			return
		}
		canonical := Canonical(m)
		m.Stereo()
		m.Rings()
		m.SymmetryClasses()
		require.Less(t, time.Since(begin), 3*time.Second, "hang") // the aim is 1 s; fuzzing slows the clock
		written := Write(m)
		again, err := Parse(written)
		require.NoError(t, err, "written as %q", written)
		require.Equal(t, canonical, Canonical(again), "written as %q", written)
		again, err = Parse(canonical)
		require.NoError(t, err, "canonical SMILES %q", canonical)
		require.Equal(t, canonical, Canonical(again))
	})
}
