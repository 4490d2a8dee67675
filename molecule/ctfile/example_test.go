package ctfile_test

import (
	"io"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/molecule"
	"tarn/molecule/ctfile"
	"tarn/molecule/smiles"
)

// readOne reads the only record of a file.
func readOne(t *testing.T, file string) *ctfile.Record {
	t.Helper()
	r := ctfile.NewReader(strings.NewReader(file))
	record, err := r.Read()
	require.NoError(t, err)
	_, err = r.Read()
	require.ErrorIs(t, err, io.EOF)
	return record
}

func canonical(t *testing.T, notation string) string {
	t.Helper()
	m, err := smiles.Parse(notation)
	require.NoError(t, err)
	return smiles.Canonical(m)
}

// The worked example of the published CTfile description: L-alanine labelled with 13C, as a zwitterion, drawn with one wedge.
const alanine2000 = `L-Alanine (13C)
  Example           2D

  6  5  0  0  1  0              3 V2000
   -0.6622    0.5342    0.0000 C   0  0  2  0  0  0
    0.6622   -0.3000    0.0000 C   0  0  0  0  0  0
   -0.7207    2.0817    0.0000 C   1  0  0  0  0  0
   -1.8622   -0.3695    0.0000 N   0  3  0  0  0  0
    0.6220   -1.8037    0.0000 O   0  0  0  0  0  0
    1.9464    0.4244    0.0000 O   0  5  0  0  0  0
  1  2  1  0  0  0
  1  3  1  1  0  0
  1  4  1  0  0  0
  2  5  2  0  0  0
  2  6  1  0  0  0
M  CHG  2   4   1   6  -1
M  ISO  1   3  13
M  END
`

// The same example in V3000, with one line continued.
const alanine3000 = `L-Alanine (13C)
  Example           2D

  0  0  0     0  0            999 V3000
M  V30 BEGIN CTAB
M  V30 COUNTS 6 5 0 0 1
M  V30 BEGIN ATOM
M  V30 1 C -0.6622 0.5342 0 0 CFG=2
M  V30 2 C 0.6622 -0.3 0 0
M  V30 3 C -0.7207 2.0817 0 0 MASS=13
M  V30 4 N -1.8622 -0.3695 0 -
M  V30 0 CHG=1
M  V30 5 O 0.622 -1.8037 0 0
M  V30 6 O 1.9464 0.4244 0 0 CHG=-1
M  V30 END ATOM
M  V30 BEGIN BOND
M  V30 1 1 1 2
M  V30 2 1 1 3 CFG=1
M  V30 3 1 1 4
M  V30 4 2 2 5
M  V30 5 1 2 6
M  V30 END BOND
M  V30 END CTAB
M  END
`

// lAlanine is L-alanine: seen from nitrogen, H, CH3 and COO⁻ run clockwise (the CORN rule: CO, R, N clockwise seen from H).
const lAlanine = "[NH3+][C@@H]([13CH3])C([O-])=O"

func TestPublishedExample(t *testing.T) {
	// The wedge and, without coordinates, the parity say the same as the name of the compound.
	withoutCoordinates := func(file string) string {
		for _, at := range []string{
			"-0.6622    0.5342", "0.6622   -0.3000", "-0.7207    2.0817", "-1.8622   -0.3695", "0.6220   -1.8037", "1.9464    0.4244",
			"-0.6622 0.5342", "0.6622 -0.3", "-0.7207 2.0817", "-1.8622 -0.3695", "0.622 -1.8037", "1.9464 0.4244",
		} {
			zero := "0.0000" + strings.Repeat(" ", max(1, len(at)-12)) + "0.0000"
			file = strings.Replace(file, at, zero+strings.Repeat(" ", max(0, len(at)-len(zero))), 1)
		}
		return strings.NewReplacer("  1  3  1  1", "  1  3  1  0", " CFG=1\n", "\n").Replace(file)
	}
	for name, file := range map[string]string{
		"V2000 wedge": alanine2000, "V3000 wedge": alanine3000,
		"V2000 parity": withoutCoordinates(alanine2000), "V3000 parity": withoutCoordinates(alanine3000),
	} {
		t.Run(name, func(t *testing.T) {
			r := readOne(t, file)
			require.Equal(t, "L-Alanine (13C)", r.Name)
			require.Nil(t, r.Geometry)
			require.Equal(t, canonical(t, lAlanine), smiles.Canonical(r.Molecule))
			require.Equal(t, molecule.Element(6), r.Molecule.Atoms[0].Element)
			require.Len(t, r.Molecule.Atoms, 13)
			require.Empty(t, r.Notes)
		})
	}
}
