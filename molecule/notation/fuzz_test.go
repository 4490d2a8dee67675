package notation_test

import (
	"bytes"
	"errors"
	"io"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/molecule/notation"
)

// FuzzNewSource feeds arbitrary bytes whose format has to be found out: every record is a molecule or a *RecordError with a place that
// never goes back, and the source comes to its end.
func FuzzNewSource(f *testing.F) {
	for _, seed := range []string{
		"O water\n\nCCO\tethanol\r\nC1CC open\n[Na+].[Cl-] salt", waterMol, waterMol + "> <note>\nkept\n\n$$$$\n" + waterMol, waterXYZ + waterXYZ,
		"2\nbroken\nO 0 0 0\n" + waterXYZ, "\n\n\n  0  0  0     0  0            999 V3000\nM  V30 BEGIN CTAB\nM  END\n", "\ufeffO\n", "12\n", "",
	} {
		f.Add([]byte(seed), 0)
	}
	f.Fuzz(func(t *testing.T, text []byte, charge int) {
		source, err := notation.NewSource(bytes.NewReader(text), "", charge)
		require.NoError(t, err)
		last := 0
		for reads := 0; ; reads++ {
			require.LessOrEqual(t, reads, len(text), "more records than bytes")
			record, err := source.Read()
			if errors.Is(err, io.EOF) {
				return
			}
			if err != nil {
				var fault *notation.RecordError
				if !errors.As(err, &fault) {
					return // the stream itself is unusable, such as a SMILES line without end
				}
				require.Greater(t, fault.Number, last)
				require.Positive(t, fault.Line)
				last = fault.Number
				continue
			}
			require.Greater(t, record.Number, last)
			require.Positive(t, record.Line)
			require.NotEmpty(t, record.Molecule.Atoms)
			require.True(t, record.Geometry == nil || len(record.Geometry) == 3*len(record.Molecule.Atoms))
			last = record.Number
		}
	})
}
