package xyz_test

import (
	"errors"
	"io"
	"math"
	"runtime"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/molecule"
	"tarn/molecule/smiles"
	"tarn/molecule/xyz"
)

const water = "3\nwater\nO 0 0 0.117\nH 0 0.757 -0.469\nH 0 -0.757 -0.469\n"

func TestReadFrames(t *testing.T) {
	for name, file := range map[string]string{
		"plain":                 water + water,
		"CRLF":                  strings.ReplaceAll(water+water, "\n", "\r\n"),
		"blank lines between":   "\n" + water + "\n\n" + water + "\n\n",
		"no last end of line":   water + strings.TrimSuffix(water, "\n"),
		"any case":              strings.ToLower(water) + strings.ToUpper(strings.Replace(water, "water", "x", 1)),
		"atomic numbers":        water + "3\n\n8 0 0 0.117\n1 0 0.757 -0.469\n1 0 -0.757 -0.469\n",
		"more columns and tabs": water + "  3  \n\nO\t0\t0\t0.117\t-0.8 x\nH 0 0.757 -0.469 0.4 y\n  H 0 -7.57e-1 -.469\n",
		"byte order mark":       "\ufeff" + water + water,
	} {
		t.Run(name, func(t *testing.T) {
			r := xyz.NewReader(strings.NewReader(file), xyz.Options{})
			for i := range 2 {
				f, err := r.Read()
				require.NoError(t, err)
				require.Equal(t, i+1, f.Number)
				require.Equal(t, "O", smiles.Canonical(f.Molecule))
				require.InDeltaSlice(t, []float64{0, 0, 0.117, 0, 0.757, -0.469, 0, -0.757, -0.469}, []float64(f.Geometry), 1e-12)
			}
			for range 2 {
				_, err := r.Read()
				require.ErrorIs(t, err, io.EOF)
			}
		})
	}
}

func TestTitleAndIsotope(t *testing.T) {
	f, err := xyz.NewReader(strings.NewReader("3\n heavy water 20 \nO 0 0 0.117\nD 0 0.757 -0.469\nd 0 -0.757 -0.469\n"), xyz.Options{}).Read()
	require.NoError(t, err)
	require.Equal(t, "heavy water 20", f.Title)
	require.Equal(t, "heavy water 20", f.Molecule.Name)
	require.Equal(t, []int{0, 2, 2}, []int{f.Molecule.Atoms[0].Isotope, f.Molecule.Atoms[1].Isotope, f.Molecule.Atoms[2].Isotope})
}

func TestBrokenFrames(t *testing.T) {
	for name, c := range map[string]struct {
		file   string
		line   int
		reason string
	}{
		"no number of atoms":    {"hello\nO 0 0 0\n", 1, "must begin with its number of atoms"},
		"fraction of atoms":     {"2.5\n\nO 0 0 0\n", 1, "must begin with its number of atoms"},
		"no atoms":              {"0\n\n", 1, "at least one"},
		"negative atoms":        {"-3\n\n", 1, "at least one"},
		"too many atoms":        {"100001\n\n", 1, "at most 100000"},
		"beyond any integer":    {"99999999999999999999\n\n", 1, "must begin with its number of atoms"},
		"unknown symbol":        {"1\n\nXq 0 0 0\n", 3, `atom 1 is "Xq"`},
		"unknown number":        {"1\n\n119 0 0 0\n", 3, `atom 1 is "119"`},
		"placeholder":           {"1\n\nX 0 0 0\n", 3, `atom 1 is "X"`},
		"coordinate missing":    {"1\n\nO 0 0\n", 3, "atom 1 needs a symbol and three coordinates"},
		"NaN":                   {"1\n\nO 0 nan 0\n", 3, `coordinate "nan"`},
		"infinite":              {"1\n\nO 0 0 -inf\n", 3, `coordinate "-inf"`},
		"overflowing":           {"1\n\nO 0 0 1e400\n", 3, `coordinate "1e400"`},
		"fewer atoms than said": {"4\n\nO 0 0 0\nH 0 0 1\nH 0 1 0\n", 6, "is the number of atoms right?"},
		"more atoms than said":  {"1\n\nNe 0 0 0\nH 0 0 1\n", 4, "must begin with its number of atoms"},
		"radical":               {"2\n\nO 0 0 0\nH 0 0 0.97\n", 1, "free valence at atom 1 (O)"},
	} {
		t.Run(name, func(t *testing.T) {
			r := xyz.NewReader(strings.NewReader(water+c.file+water), xyz.Options{})
			first, err := r.Read()
			require.NoError(t, err)
			require.Equal(t, 1, first.Line)
			_, err = r.Read()
			if err == nil && strings.HasPrefix(name, "more atoms") {
				_, err = r.Read()
			}
			var broken *xyz.FrameError
			require.ErrorAs(t, err, &broken)
			require.Equal(t, 5+c.line, broken.Line, broken.Reason)
			require.Contains(t, broken.Reason, c.reason)
			last, err := r.Read()
			require.NoError(t, err, "the frame after the broken one")
			require.Equal(t, broken.Frame+1, last.Number)
			_, err = r.Read()
			require.ErrorIs(t, err, io.EOF)
		})
	}
}

func TestCutFrame(t *testing.T) {
	for cut, atoms := range map[string]string{"3\nwater\nO 0 0 0\n": "1 of 3", "3\nwater\n": "0 of 3", "3\n": "0 of 3"} {
		r := xyz.NewReader(strings.NewReader(cut), xyz.Options{})
		_, err := r.Read()
		var broken *xyz.FrameError
		require.ErrorAs(t, err, &broken)
		require.Contains(t, broken.Reason, "the file ends after "+atoms+" atoms")
		_, err = r.Read()
		require.ErrorIs(t, err, io.EOF)
	}
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

func TestManyFramesInConstantMemory(t *testing.T) {
	r := xyz.NewReader(&repeated{text: water, n: 10_000}, xyz.Options{})
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
	require.Less(t, int64(after.HeapAlloc)-int64(before.HeapAlloc), int64(1<<20))
}

func TestEndlessLineIsRefusedEarly(t *testing.T) {
	source := &repeated{text: strings.Repeat("x", 1<<16), n: 1 << 14} // 1 GB
	_, err := xyz.NewReader(source, xyz.Options{}).Read()
	require.ErrorContains(t, err, "longer than 65536 bytes")
	require.Less(t, source.taken, 1<<20)
}

func TestErrorsOfTheFileItself(t *testing.T) {
	lost := errors.New("disk gone")
	_, err := xyz.NewReader(io.MultiReader(strings.NewReader("3\nwater\nO 0 0 0\n"), failing{lost}), xyz.Options{}).Read()
	require.ErrorIs(t, err, lost)
	var broken *xyz.FrameError
	require.False(t, errors.As(err, &broken))
}

type failing struct{ err error }

func (f failing) Read([]byte) (int, error) { return 0, f.err }

func TestWriteAndReadBack(t *testing.T) {
	for _, e := range examples(t) {
		f, err := xyz.NewReader(strings.NewReader(e.frame), xyz.Options{Charge: e.charge}).Read()
		require.NoError(t, err)
		var elements []molecule.Element
		for _, a := range f.Molecule.Atoms {
			elements = append(elements, a.Element)
		}
		g := f.Geometry.Clone()
		for i := range g {
			g[i] += 1.0 / 3
		}
		var file strings.Builder
		require.NoError(t, xyz.Write(&file, "a title", elements, g))
		back, err := xyz.NewReader(strings.NewReader(file.String()), xyz.Options{Charge: e.charge}).Read()
		require.NoError(t, err)
		require.Equal(t, "a title", back.Title)
		require.Equal(t, smiles.Canonical(f.Molecule), smiles.Canonical(back.Molecule))
		require.InDeltaSlice(t, []float64(g), []float64(back.Geometry), 0.5000001e-8)
	}
}

func TestWriteRefuses(t *testing.T) {
	for reason, write := range map[string]func() error{
		"has several lines": func() error { return xyz.Write(io.Discard, "a\nb", []molecule.Element{2}, make(molecule.Geometry, 3)) },
		"coordinates for":   func() error { return xyz.Write(io.Discard, "", []molecule.Element{2}, make(molecule.Geometry, 4)) },
		"has the coordinate N": func() error {
			return xyz.Write(io.Discard, "", []molecule.Element{2}, molecule.Geometry{0, math.NaN(), 0})
		},
	} {
		require.ErrorContains(t, write(), reason)
	}
}
