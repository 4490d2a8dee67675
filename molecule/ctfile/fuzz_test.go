package ctfile_test

import (
	"errors"
	"io"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/molecule/ctfile"
	"tarn/molecule/smiles"
)

// FuzzRead feeds arbitrary bytes: every record is a molecule, which comes back the same from what is written of it, or a
// *RecordError.
func FuzzRead(f *testing.F) {
	f.Add([]byte(alanine2000 + "> <A>\n1\n\n$$$$\n" + alanine3000))
	f.Add([]byte(v2000(counts, carbon, oxygen, single, "M  RAD  1   1   2\nS  SKP  1\nx\n"+end)))
	f.Add([]byte(v3000(atoms3000 + bonds3000)))
	for _, d := range drawings {
		f.Add([]byte(d.sketch.file(ctfile.V2000)))
	}
	f.Add([]byte(drawings[0].sketch.file(ctfile.V3000)))
	f.Fuzz(func(t *testing.T, data []byte) {
		r := ctfile.NewReader(strings.NewReader(string(data)))
		for {
			record, err := r.Read()
			if err == io.EOF {
				return
			}
			if err != nil {
				var broken *ctfile.RecordError
				require.True(t, errors.As(err, &broken), "%v", err)
				require.Positive(t, broken.Record)
				require.Positive(t, broken.Line)
				continue
			}
			require.True(t, record.Geometry == nil || len(record.Geometry) == 3*len(record.Molecule.Atoms))
			var file strings.Builder
			if ctfile.WriteMolfile(&file, record.Molecule, record.Geometry, ctfile.V3000) != nil {
				continue // names or double bonds that a molfile cannot hold
			}
			back, err := ctfile.NewReader(strings.NewReader(file.String())).Read()
			require.NoError(t, err, file.String())
			require.Equal(t, smiles.Canonical(record.Molecule), smiles.Canonical(back.Molecule), file.String())
		}
	})
}
