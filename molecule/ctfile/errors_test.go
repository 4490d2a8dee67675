package ctfile_test

import (
	"errors"
	"fmt"
	"io"
	"runtime"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/molecule"
	"tarn/molecule/ctfile"
	"tarn/molecule/smiles"
)

// v2000 is a record of a hetero-diatomic with replaceable lines.
func v2000(counts, atom1, atom2, bond, rest string) string {
	return "x\n\n\n" + counts + "\n" + atom1 + "\n" + atom2 + "\n" + bond + "\n" + rest
}

const (
	counts = "  2  1  0  0  0  0            999 V2000"
	carbon = "    0.0000    0.0000    0.0000 C   0  0"
	oxygen = "    1.4000    0.0000    0.0000 O   0  0"
	single = "  1  2  1  0"
	end    = "M  END\n"
)

func v3000(body string) string {
	return "x\n\n\n  0  0  0     0  0            999 V3000\nM  V30 BEGIN CTAB\n" + body + "M  V30 END CTAB\nM  END\n"
}

const (
	atoms3000 = "M  V30 COUNTS 2 1 0 0 0\nM  V30 BEGIN ATOM\nM  V30 7 C 0 0 0 0\nM  V30 9 O 1.4 0 0 0\nM  V30 END ATOM\n"
	bonds3000 = "M  V30 BEGIN BOND\nM  V30 1 1 7 9\nM  V30 END BOND\n"
)

func TestBrokenRecords(t *testing.T) {
	for name, c := range map[string]struct {
		file   string
		line   int
		reason string
	}{
		"no counts":                   {v2000("hello", carbon, oxygen, single, end), 4, "counts line must begin"},
		"blank counts":                {"x\n\n\n\n" + carbon + "\n", 4, "it is blank"},
		"negative counts":             {v2000(" -2  1  0  0  0  0            999 V2000", carbon, oxygen, single, end), 4, "counts line must begin"},
		"header line missing":         {"x\n\n" + counts + "\n" + carbon + "\n", 3, "stands on line 3"},
		"no atoms":                    {"x\n\n\n  0  0  0  0  0  0            999 V2000\nM  END\n", 4, "no atoms"},
		"too many atoms announced":    {v2000("  9  1  0  0  0  0            999 V2000", carbon, oxygen, single, end), 7, `atom 3 has "0" where its symbol belongs`},
		"too many bonds announced":    {v2000("  2  3  0  0  0  0            999 V2000", carbon, oxygen, single, end), 8, "announces more lines"},
		"too few atoms announced":     {v2000("  1  1  0  0  0  0            999 V2000", carbon, oxygen, single, end), 6, "bond 1 needs"},
		"too few bonds announced":     {v2000("  2  0  0  0  0  0            999 V2000", carbon, oxygen, single, end), 7, "are the counts"},
		"cut in the atoms":            {"x\n\n\n" + counts + "\n" + carbon + "\n", 6, "ends in the atom block"},
		"cut in the header":           {"x\n\n", 3, "ends after 2 lines"},
		"no M  END":                   {v2000(counts, carbon, oxygen, single, ""), 8, "without M  END"},
		"NaN":                         {v2000(counts, "       nan    0.0000    0.0000 C   0  0", oxygen, single, end), 5, `coordinate "nan"`},
		"infinite":                    {v2000(counts, "       Inf    0.0000    0.0000 C   0  0", oxygen, single, end), 5, `coordinate "Inf"`},
		"overflowing":                 {v2000(counts, "     1e999    0.0000    0.0000 C   0  0", oxygen, single, end), 5, `coordinate "1e999"`},
		"stars":                       {v2000(counts, "**********    0.0000    0.0000 C   0  0", oxygen, single, end), 5, `coordinate "**********"`},
		"unknown element":             {v2000(counts, "    0.0000    0.0000    0.0000 Xq  0  0", oxygen, single, end), 5, `atom 1 is "Xq"`},
		"R group":                     {v2000(counts, carbon, "    0.0000    0.0000    0.0000 R#  0  0", single, end), 6, `atom 2 is "R#"`},
		"charge code":                 {v2000(counts, "    0.0000    0.0000    0.0000 C   0  9", oxygen, single, end), 5, "charge code 9"},
		"letters in a field":          {v2000(counts, "    0.0000    0.0000    0.0000 C   0  x", oxygen, single, end), 5, `"x" where a whole number belongs (column 37)`},
		"bond to nowhere":             {v2000(counts, carbon, oxygen, "  1  3  1  0", end), 7, "names atom 3, but there are 2"},
		"bond to itself":              {v2000(counts, carbon, oxygen, "  2  2  1  0", end), 7, "to itself"},
		"query bond":                  {v2000(counts, carbon, oxygen, "  1  2  8  0", end), 7, "query type 8"},
		"unknown bond":                {v2000(counts, carbon, oxygen, "  1  2  0  0", end), 7, "unknown type 0"},
		"wedge on a double bond":      {v2000(counts, carbon, oxygen, "  1  2  2  1", end), 7, "stereo mark 1"},
		"charge of a missing atom":    {v2000(counts, carbon, oxygen, single, "M  CHG  1   5   1\n"+end), 8, "names atom 5"},
		"charge list cut":             {v2000(counts, carbon, oxygen, single, "M  CHG  2   1   1\n"+end), 8, "number of entries"},
		"charge too large":            {v2000(counts, carbon, oxygen, single, "M  CHG  1   1  99\n"+end), 8, "the charge 99"},
		"atom list":                   {v2000(counts, carbon, oxygen, single, "M  ALS   1  2 F C   N\n"+end), 8, "query"},
		"valence":                     {v2000(counts, carbon, oxygen, "  1  2  3  0", end), 6, "oxygen"},
		"text before the data":        {v2000(counts, carbon, oxygen, single, end+"hello\n"), 9, "expected a data header"},
		"data without a name":         {v2000(counts, carbon, oxygen, single, end+"> 25\n1\n\n"), 9, "names no field"},
		"reaction":                    {"$RXN\n\n\n\n", 1, "$RXN files"},
		"V3000 counts":                {v3000(strings.Replace(atoms3000, "2 1 0", "3 1 0", 1) + bonds3000), 14, "announces 3 atoms and 1 bonds, the table has 2 and 1"},
		"V3000 without counts":        {v3000(atoms3000[strings.Index(atoms3000, "\n")+1:] + bonds3000), 13, "no COUNTS"},
		"V3000 number twice":          {v3000(strings.Replace(atoms3000, "V30 9", "V30 7", 1) + bonds3000), 9, "used twice"},
		"V3000 bond to nowhere":       {v3000(atoms3000 + strings.Replace(bonds3000, "7 9", "1 2", 1)), 12, "names atom 1, which"},
		"V3000 query":                 {v3000(strings.Replace(atoms3000, "C 0 0 0 0", "C 0 0 0 0 HCOUNT=1", 1) + bonds3000), 8, "HCOUNT, a query"},
		"V3000 NaN":                   {v3000(strings.Replace(atoms3000, "1.4", "NaN", 1) + bonds3000), 9, `coordinate "NaN"`},
		"V3000 cut":                   {"x\n\n\n  0  0  0     0  0            999 V3000\nM  V30 BEGIN CTAB\n" + atoms3000, 11, "the file was cut off"},
		"V3000 line without a prefix": {v3000(atoms3000 + "BEGIN BOND\n"), 11, "expected a line that begins with"},
		"aromatic bonds without ring": {v2000(counts, carbon, oxygen, "  1  2  4  0", end), 5, "no single and double bonds fit"},
	} {
		t.Run(name, func(t *testing.T) {
			next := v2000(counts, carbon, oxygen, single, end)
			r := ctfile.NewReader(strings.NewReader(next + "$$$$\n" + c.file + "$$$$\n" + next))
			_, err := r.Read()
			require.NoError(t, err)
			_, err = r.Read()
			var broken *ctfile.RecordError
			require.ErrorAs(t, err, &broken)
			require.Equal(t, 2, broken.Record)
			require.Equal(t, 9+c.line, broken.Line, broken.Reason) // of the delimiter, where the record ends too early
			require.Contains(t, broken.Reason, c.reason)
			third, err := r.Read()
			require.NoError(t, err, "the record after the broken one")
			require.Equal(t, 3, third.Number)
			_, err = r.Read()
			require.ErrorIs(t, err, io.EOF)
		})
	}
}

func TestCauseOfABrokenRecord(t *testing.T) {
	_, err := ctfile.NewReader(strings.NewReader(v2000(counts, carbon, oxygen, "  1  2  3  0", end))).Read()
	var valence *molecule.ValenceError
	require.ErrorAs(t, err, &valence)
	require.Equal(t, 1, valence.Atom)
}

func TestSloppyFiles(t *testing.T) {
	methanol := canonical(t, "CO")
	good := v2000(counts, carbon, oxygen, single, end)
	for name, file := range map[string]string{
		"as it should be":         good,
		"CRLF":                    strings.ReplaceAll(good, "\n", "\r\n"),
		"no end of line":          strings.TrimSuffix(good, "\n"),
		"byte order mark":         "\ufeff" + good,
		"blanks instead of cols":  v2000("2 1 V2000", "0 0 0 C", "1.4 0.0 0 O 0 0", "1 2 1", end),
		"tabs":                    v2000("2\t1", "0\t0\t0\tC", "1.4\t0\t0\tO", "1\t2\t1\t0", end),
		"lower-case symbols":      v2000(counts, strings.Replace(carbon, "C", "c", 1), oxygen, single, end),
		"no version":              v2000("  2  1", carbon, oxygen, single, end),
		"blank lines at the end":  good + "\n\n\n\n\n\n\n",
		"delimiter and blanks":    good + "$$$$\n\n\n",
		"labels and skipped":      v2000(counts, carbon, oxygen, single, "A    1\nMe\nV    1 text\nS  SKP  2\nx\ny\n"+end),
		"V3000 with free numbers": v3000(atoms3000 + bonds3000),
		"V3000 other blocks":      v3000(atoms3000 + bonds3000 + "M  V30 BEGIN OBJ3D\nM  V30 BEGIN X\nM  V30 1\nM  V30 END X\nM  V30 END OBJ3D\n"),
	} {
		t.Run(name, func(t *testing.T) {
			require.Equal(t, methanol, smiles.Canonical(readOne(t, file).Molecule))
		})
	}
}

// The published description: M  CHG and M  RAD supersede all charges and radicals of the atom block, M  ISO all its isotopes.
func TestPrecedence(t *testing.T) {
	charged := "    0.0000    0.0000    0.0000 O   0  5"
	heavy := "    0.0000    0.0000    0.0000 C   1  0"
	for name, c := range map[string]struct{ file, want string }{
		"charge of the atom block":    {v2000(counts, carbon, charged, single, end), "C[O-]"},
		"all charge codes":            {v2000(counts, "    0.0000    0.0000    0.0000 N   0  3", charged, single, end), "[NH3+][O-]"},
		"M  CHG clears the others":    {v2000(counts, carbon, charged, single, "M  CHG  1   1   0\n"+end), "CO"},
		"M  RAD clears charges":       {v2000(counts, carbon, charged, single, "M  RAD  1   1   0\n"+end), "CO"},
		"M  CHG and M  RAD together":  {v2000(counts, carbon, charged, single, "M  CHG  1   2  -1\nM  RAD  1   1   0\n"+end), "C[O-]"},
		"isotope of the atom block":   {v2000(counts, heavy, oxygen, single, end), "[13CH3]O"},
		"M  ISO clears the others":    {v2000(counts, heavy, oxygen, single, "M  ISO  1   2  18\n"+end), "C[18OH]"},
		"deuterium keeps its isotope": {v2000(counts, "    0.0000    0.0000    0.0000 D   0  0", oxygen, single, "M  ISO  1   2  18\n"+end), "[2H][18OH]"},
		"doublet":                     {v2000(counts, carbon, oxygen, single, "M  RAD  1   2   2\n"+end), "C[O]"},
		"triplet":                     {v2000(counts, carbon, oxygen, single, "M  RAD  1   1   3\n"+end), "[CH]O"},
		"doublet of the atom block":   {v2000(counts, carbon, "    0.0000    0.0000    0.0000 O   0  4", single, end), "C[O]"},
		"valence field":               {v2000(counts, carbon+"  0  0  0  3", oxygen, single, end), "[CH2]O"},
		"valence of none":             {v2000("  1  0", carbon+"  0  0  0 15", end, "", "")[:len("x\n\n\n  1  0\n"+carbon+"  0  0  0 15\n"+end)], "[C]"},
		"V3000 valence of none":       {strings.NewReplacer("COUNTS 2 1", "COUNTS 1 0", "M  V30 9 O 1.4 0 0 0\n", "", "C 0 0 0 0", "Cl 0 0 0 0 VAL=-1 CHG=-1").Replace(v3000(atoms3000)), "[Cl-]"},
	} {
		t.Run(name, func(t *testing.T) {
			require.Equal(t, canonical(t, c.want), smiles.Canonical(readOne(t, c.file).Molecule))
		})
	}
}

func TestDataFields(t *testing.T) {
	r := readOne(t, v2000(counts, carbon, oxygen, single, end)+
		"> <ENERGY>\n-1.5\n\n>  25  <NOTE> (A1)\nfirst\nsecond  \n\n> DT12\nx\n\n> <EMPTY>\n\n> <SPLIT>\na\n\nb\n\n> <LAST>\n> not a header\n$$$$\n")
	require.Equal(t, []ctfile.Field{
		{Name: "ENERGY", Value: "-1.5"},
		{Name: "NOTE", Value: "first\nsecond"},
		{Name: "DT12", Value: "x"},
		{Name: "EMPTY"},
		{Name: "SPLIT", Value: "a\n\nb"},
		{Name: "LAST", Value: "> not a header"},
	}, r.Data)
	require.Equal(t, []string{`the value of the data field "SPLIT" contains blank lines`}, r.Notes)
}

// repeated gives a text n times without holding it.
type repeated struct {
	text    string
	n, from int
	taken   int
}

func (r *repeated) Read(p []byte) (int, error) {
	if r.n == 0 {
		return 0, io.EOF
	}
	n := copy(p, r.text[r.from:])
	r.taken += n
	if r.from += n; r.from == len(r.text) {
		r.from = 0
		r.n--
	}
	return n, nil
}

func TestTenThousandRecordsInConstantMemory(t *testing.T) {
	record := alanine2000 + "> <NUMBER>\n1\n\n$$$$\n"
	r := ctfile.NewReader(&repeated{text: record, n: 10_000})
	var before, after runtime.MemStats
	for i := 1; ; i++ {
		_, err := r.Read()
		if errors.Is(err, io.EOF) {
			require.Equal(t, 10_001, i)
			break
		}
		require.NoError(t, err)
		if i == 100 {
			runtime.GC()
			runtime.ReadMemStats(&before)
		}
	}
	runtime.GC()
	runtime.ReadMemStats(&after)
	require.Less(t, int64(after.HeapAlloc)-int64(before.HeapAlloc), int64(1<<20), "bytes kept over 9,900 records of 800 bytes")
}

func TestEndlessLineIsRefusedEarly(t *testing.T) {
	for name, before := range map[string]string{
		"header": "", "atom": "x\n\n\n" + counts + "\n", "data": v2000(counts, carbon, oxygen, single, end) + "> <X>\n",
	} {
		t.Run(name, func(t *testing.T) {
			source := &repeated{text: strings.Repeat("x", 1<<16), n: 1 << 14} // 1 GB
			r := ctfile.NewReader(io.MultiReader(strings.NewReader(before), source))
			_, err := r.Read()
			var broken *ctfile.RecordError
			require.ErrorAs(t, err, &broken)
			require.Contains(t, broken.Reason, "longer than")
			require.Less(t, source.taken, 4<<20, "bytes read before the refusal")
		})
	}
}

func TestLongLineDoesNotHideTheNextRecord(t *testing.T) {
	long := strings.Repeat("x", 3<<20)
	good := v2000(counts, carbon, oxygen, single, end) + "$$$$\n"
	r := ctfile.NewReader(strings.NewReader(long + "\n\n\n\n$$$$\n" + good))
	_, err := r.Read()
	require.ErrorContains(t, err, "record 1, line 1")
	record, err := r.Read()
	require.NoError(t, err)
	require.Equal(t, 6, record.Line)
}

func TestEndlessRecordIsRefused(t *testing.T) {
	r := ctfile.NewReader(io.MultiReader(strings.NewReader(v2000(counts, carbon, oxygen, single, end)+"> <X>\n"),
		&repeated{text: strings.Repeat("x", 1<<15) + "\n", n: 1 << 15}))
	_, err := r.Read()
	require.ErrorContains(t, err, "larger than 64 MB")
}

func TestErrorsOfTheFileItself(t *testing.T) {
	lost := fmt.Errorf("disk gone")
	r := ctfile.NewReader(io.MultiReader(strings.NewReader("x\n\n"), failing{lost}))
	_, err := r.Read()
	require.ErrorIs(t, err, lost)
	var broken *ctfile.RecordError
	require.False(t, errors.As(err, &broken))
}

type failing struct{ err error }

func (f failing) Read([]byte) (int, error) { return 0, f.err }

func TestEmptyFiles(t *testing.T) {
	for _, file := range []string{"", "\n", "\n\n\n\n\n\n", "\r\n"} {
		_, err := ctfile.NewReader(strings.NewReader(file)).Read()
		require.ErrorIs(t, err, io.EOF, "%q", file)
	}
}

func BenchmarkRead(b *testing.B) {
	record := alanine2000 + "> <NUMBER>\n1\n\n$$$$\n"
	r := ctfile.NewReader(&repeated{text: record, n: 1 << 40})
	b.SetBytes(int64(len(record)))
	for b.Loop() {
		if _, err := r.Read(); err != nil {
			b.Fatal(err)
		}
	}
}
