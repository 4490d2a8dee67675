package notation_test

import (
	"errors"
	"io"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/molecule/notation"
	"tarn/molecule/smiles"
)

const (
	waterXYZ = "3\nwater\nO 0 0 0\nH 0.96 0 0\nH -0.24 0.93 0\n"
	waterMol = "water\n  handmade12012612003D\n\n  3  2  0  0  0  0  0  0  0  0999 V2000\n" +
		"    0.0000    0.0000    0.0000 O   0  0\n    0.9600    0.0000    0.0000 H   0  0\n   -0.2400    0.9300    0.0000 H   0  0\n" +
		"  1  2  1  0\n  1  3  1  0\nM  END\n"
)

// drain reads a source to its end: records and the errors between them.
func drain(t *testing.T, text string, format notation.Format) (records []*notation.Record, faults []*notation.RecordError) {
	t.Helper()
	source, err := notation.NewSource(strings.NewReader(text), format, 0)
	require.NoError(t, err)
	for {
		r, err := source.Read()
		var fault *notation.RecordError
		switch {
		case errors.Is(err, io.EOF):
			return records, faults
		case errors.As(err, &fault):
			faults = append(faults, fault)
		default:
			require.NoError(t, err)
			records = append(records, r)
		}
	}
}

func TestFormatIsFoundOutFromTheContent(t *testing.T) {
	for _, c := range []struct {
		name, text string
		geometry   bool
	}{
		{"SMILES", "O water\n", false},
		{"SMILES without end of line", "O", false},
		{"SMILES after blank lines", "\n\nO water\n", false},
		{"molfile", waterMol, true},
		{"molfile with CRLF", strings.ReplaceAll(waterMol, "\n", "\r\n"), true},
		{"SD file", waterMol + ">  <note>\nkept\n\n$$$$\n", true},
		{"molfile without name", strings.Replace(waterMol, "water", "", 1), true},
		{"XYZ", waterXYZ, true},
		{"XYZ with CRLF", strings.ReplaceAll(waterXYZ, "\n", "\r\n"), true},
		{"XYZ with spaces", "   " + waterXYZ, true},
	} {
		t.Run(c.name, func(t *testing.T) {
			records, faults := drain(t, c.text, "")
			require.Empty(t, faults)
			require.Len(t, records, 1)
			require.Equal(t, "O", smiles.Canonical(records[0].Molecule))
			require.Equal(t, c.geometry, records[0].Geometry != nil)
		})
	}
}

func TestFormatFollowsFromTheName(t *testing.T) {
	for name, want := range map[string]notation.Format{
		"a.sdf": notation.SDF, "A.MOL": notation.SDF, "dir.xyz/b.xyz": notation.XYZ, "c.smi": notation.SMILES,
		"d.pdf": "", "CCO": "", "-": "", "C.C": "",
	} {
		require.Equal(t, want, notation.FormatOf(name), name)
	}
}

func TestSmilesLinesHaveNamesAndNumbers(t *testing.T) {
	records, faults := drain(t, "CCO  ethyl alcohol\n\nC1CC ring left open\nO\twater\n  [Na+].[Cl-] salt\n", notation.SMILES)
	require.Len(t, records, 3)
	require.Equal(t, []string{"ethyl alcohol", "water", "salt"}, []string{records[0].Name, records[1].Name, records[2].Name})
	require.Equal(t, []int{1, 3, 4}, []int{records[0].Number, records[1].Number, records[2].Number})
	require.Equal(t, []int{1, 4, 5}, []int{records[0].Line, records[1].Line, records[2].Line})
	require.Len(t, faults, 1)
	require.Equal(t, 2, faults[0].Number)
	require.Equal(t, 3, faults[0].Line)
	var syntax *smiles.SyntaxError
	require.ErrorAs(t, faults[0], &syntax)
	_, err := records[2].Single()
	var parts *notation.FragmentsError
	require.ErrorAs(t, err, &parts)
	require.ElementsMatch(t, []string{"[Na+]", "[Cl-]"}, parts.SMILES)
}

func TestBrokenRecordLetsTheNextBeRead(t *testing.T) {
	broken := strings.Replace(waterMol, "0.9600", "  nan ", 1)
	records, faults := drain(t, waterMol+"$$$$\n"+broken+"$$$$\n"+waterMol+"$$$$\n", notation.SDF)
	require.Len(t, records, 2)
	require.Equal(t, []int{1, 3}, []int{records[0].Number, records[1].Number})
	require.Len(t, faults, 1)
	require.Equal(t, 2, faults[0].Number)
	require.Equal(t, 10+1+6, faults[0].Line, "the line of the number that is none")
	records, faults = drain(t, waterXYZ+"2\nbroken\nO 0 0 0\nH 0 zero 1\n"+waterXYZ, notation.XYZ)
	require.Len(t, records, 2)
	require.Len(t, faults, 1)
	require.Equal(t, 5+4, faults[0].Line)
}

func TestEndlessLineIsRefused(t *testing.T) {
	source, err := notation.NewSource(strings.NewReader("C"+strings.Repeat("C", 3<<20)), notation.SMILES, 0)
	require.NoError(t, err)
	_, err = source.Read()
	require.ErrorContains(t, err, "line 1")
}

func TestInputNamesItsPartInErrors(t *testing.T) {
	for _, c := range []struct {
		name string
		in   notation.Input
		part string
		says string
	}{
		{"nothing", notation.Input{}, "molecule", "exactly one"},
		{"blank", notation.Input{SMILES: " \n"}, "molecule", "exactly one"},
		{"two", notation.Input{SMILES: "C", XYZ: waterXYZ}, "molecule", "exactly one"},
		{"SMILES and cluster", notation.Input{SMILES: "C", LJ: 3}, "molecule", "exactly one"},
		{"SMILES", notation.Input{SMILES: "C("}, "smiles", "column 2"},
		{"molfile", notation.Input{Molfile: "water\n"}, "molfile", "line"},
		{"blank molfile", notation.Input{Molfile: "\n", SMILES: ""}, "molecule", "exactly one"},
		{"XYZ", notation.Input{XYZ: "2\n\nO 0 0 0\n"}, "xyz", "line"},
		{"salt", notation.Input{SMILES: "[Na+].[Cl-]"}, "molecule", "2 separate molecules"},
	} {
		t.Run(c.name, func(t *testing.T) {
			_, err := c.in.Read()
			var fault *notation.InputError
			require.ErrorAs(t, err, &fault)
			require.Equal(t, c.part, fault.Part)
			require.ErrorContains(t, err, c.says)
		})
	}
}

func TestInputIsReadWithItsNameAndCharge(t *testing.T) {
	r, err := notation.Input{SMILES: " CCO\n", Name: "ethanol"}.Read()
	require.NoError(t, err)
	require.Equal(t, "ethanol", r.Name)
	r, err = notation.Input{Molfile: waterMol}.Read()
	require.NoError(t, err)
	require.Equal(t, "water", r.Name, "the name in the file, where no other is given")
	require.Len(t, r.Geometry, 9)
	r, err = notation.Input{XYZ: "2\nhydroxide\nO 0 0 0\nH 0.96 0 0\n", Charge: -1}.Read()
	require.NoError(t, err)
	require.Equal(t, "[OH-]", smiles.Canonical(r.Molecule))
}

func TestManyFragmentsAreCountedNotNamed(t *testing.T) {
	_, err := notation.Input{SMILES: strings.TrimSuffix(strings.Repeat("C.", 1000), ".")}.Read()
	require.ErrorContains(t, err, "1000 separate molecules")
	require.Less(t, len(err.Error()), 200)
}
