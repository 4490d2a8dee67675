package server

import (
	"bytes"
	"context"
	"encoding/json"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"github.com/stretchr/testify/require"
	"go.uber.org/goleak"

	"tarn/ensemble/report"
	"tarn/molecule/notation"
	"tarn/search"
)

const programSwitch = "TARN_TEST_PROGRAM" // set: this process is the program itself

func TestMain(m *testing.M) {
	if os.Getenv(programSwitch) != "" {
		os.Exit(Main(os.Args[1:], os.Stdin, os.Stdout, os.Stderr))
	}
	goleak.VerifyTestMain(m)
}

// outcome of a command that ran within the test.
type outcome struct {
	status   int
	out, err string
}

func tarn(t *testing.T, stdin string, arguments ...string) outcome {
	t.Helper()
	return tarnUntil(t.Context(), stdin, arguments...)
}

func tarnUntil(ctx context.Context, stdin string, arguments ...string) outcome {
	var out, errOut bytes.Buffer
	status := run(ctx, arguments, strings.NewReader(stdin), &out, &errOut)
	return outcome{status, out.String(), errOut.String()}
}

func file(t *testing.T, name, content string) string {
	t.Helper()
	path := filepath.Join(t.TempDir(), name)
	require.NoError(t, os.WriteFile(path, []byte(content), 0o600))
	return path
}

func into[T any](t *testing.T, text string) (v T) {
	t.Helper()
	require.NoError(t, json.Unmarshal([]byte(text), &v), text)
	return v
}

// molfile of water; the x coordinate of the first hydrogen and the element of the oxygen are to be filled in.
func molfile(name, x, element string) string {
	return fmt.Sprintf("%s\n  handmade12012612003D\n\n  3  2  0  0  0  0  0  0  0  0999 V2000\n"+
		"    0.0000    0.0000    0.0000 %-3s 0  0\n%10s    0.0000    0.0000 H   0  0\n   -0.2400    0.9300    0.0000 H   0  0\n"+
		"  1  2  1  0\n  1  3  1  0\nM  END\n", name, element, x)
}

func TestSearchPrintsTheRankedTable(t *testing.T) {
	o := tarn(t, "", "search", "CCCC")
	require.Equal(t, exitDone, o.status, o.err)
	require.Empty(t, o.err, "no progress bar where there is no terminal")
	for _, part := range []string{
		"C4H10", "2 minima within 6 kcal/mol in MMFF94", "95 % interval", "minima unseen", "the target coverage was reached",
		"Populations at 298.15 K", "no basis for", "clinical",
	} {
		require.Contains(t, o.out, part)
	}
}

// The values are those that the issue of the main job asks for; 0.78 kcal/mol is the published MMFF94 difference: Halgren and
// Nachbar, J. Comput. Chem. 17, 587 (1996).
func TestSearchOfButaneAsJSON(t *testing.T) {
	o := tarn(t, "", "search", "CCCC", "--json", "--seed", "5")
	require.Equal(t, exitDone, o.status, o.err)
	d := into[report.Document](t, o.out)
	require.Len(t, d.Minima, 2)
	require.InDelta(t, 0.78, d.Minima[1].Relative, 0.02)
	require.Equal(t, []int{1, 2}, []int{d.Minima[0].Degeneracy, d.Minima[1].Degeneracy})
	require.InDelta(t, 0.65, d.Minima[0].Population, 0.01)
	require.InDelta(t, 0.35, d.Minima[1].Population, 0.01)
	require.Equal(t, uint64(5), *d.Seed)
	raw := into[map[string]any](t, o.out)
	for _, name := range []string{
		"molecule", "field", "method", "seed", "settings", "quenches", "energy_evaluations", "wall_s", "coverage", "minima", "elements",
	} {
		require.Contains(t, raw, name, "a name of the contract")
	}
	row := raw["minima"].([]any)[0].(map[string]any)
	for _, name := range []string{
		"rank", "energy_kcal_mol", "relative_kcal_mol", "hits", "degeneracy", "symmetry_number", "population", "free_energy_relative_kcal_mol",
		"population_free_energy", "rotational_constants_mhz", "dipole_debye", "lowest_mode_cm1", "xyz",
	} {
		require.Contains(t, row, name, "a name of the contract")
	}
}

func TestSameSeedSameResultWhateverTheWorkers(t *testing.T) {
	timeless := func(o outcome) report.Document {
		require.Equal(t, exitDone, o.status, o.err)
		d := into[report.Document](t, o.out)
		d.WallSeconds = 0
		return d
	}
	one := timeless(tarn(t, "", "search", "CCCCC", "--json", "--workers", "1", "--method", "mixed"))
	three := timeless(tarn(t, "", "search", "CCCCC", "--json", "--workers", "3", "--method", "mixed"))
	require.Equal(t, one, three)
}

func TestSearchReadsEveryNotation(t *testing.T) {
	built := tarn(t, "", "build", "CCCC", "--format", "xyz")
	require.Equal(t, exitDone, built.status, built.err)
	sdf := tarn(t, "", "build", "CCCC")
	require.Equal(t, exitDone, sdf.status, sdf.err)
	key := into[report.Understood](t, tarn(t, "", "molecule", "CCCC", "--json").out).Key
	for _, c := range []struct{ argument, stdin string }{
		{"C(C)CC", ""},
		{file(t, "butane.smi", "CCCC butane\n"), ""},
		{file(t, "butane.xyz", built.out), ""},
		{file(t, "butane.sdf", sdf.out), ""},
		{file(t, "butane.mol", sdf.out), ""},
		{"-", "CCCC butane\n"},
		{"-", built.out},
		{"-", sdf.out},
	} {
		o := tarn(t, c.stdin, "search", c.argument, "--json", "--quenches", "1")
		require.Equal(t, exitDone, o.status, "%s: %s", c.argument, o.err)
		d := into[report.Document](t, o.out)
		require.Equal(t, key, d.Molecule.Key, c.argument)
		require.NotEmpty(t, d.Minima)
	}
}

func TestSearchWritesTheFileAskedFor(t *testing.T) {
	folder := t.TempDir()
	for _, ending := range []string{".sdf", ".xyz", ".csv", ".json"} {
		path := filepath.Join(folder, "butane"+ending)
		require.NoError(t, os.WriteFile(path, []byte("what was there before"), 0o600))
		o := tarn(t, "", "search", "CCCC", "--quenches", "60", "-o", path)
		require.Equal(t, exitDone, o.status, o.err)
		require.Contains(t, o.out, "rank", "the table is printed as well")
		written, err := os.ReadFile(path)
		require.NoError(t, err)
		require.NotContains(t, string(written), "what was there before")
		switch ending {
		case ".json":
			require.NotEmpty(t, into[report.Document](t, string(written)).Minima)
		case ".csv":
			require.True(t, strings.HasPrefix(string(written), "rank,"))
		default:
			source, err := notation.NewSource(bytes.NewReader(written), notation.FormatOf(path), 0)
			require.NoError(t, err)
			r, err := source.Read()
			require.NoError(t, err)
			require.Len(t, r.Geometry, 42)
		}
	}
	left, err := os.ReadDir(folder)
	require.NoError(t, err)
	require.Len(t, left, 4, "no drafts are left behind")
}

func TestInterruptedSearchPrintsWhatItHasFound(t *testing.T) {
	ctx, cancel := context.WithCancel(t.Context())
	time.AfterFunc(2*time.Second, cancel)                                                           // any moment will do
	o := tarnUntil(ctx, "", "search", "CCCCCCCCCCC", "--json", "--coverage", "1", "--window", "20") // far from done by then
	require.Equal(t, exitPartial, o.status)
	require.Contains(t, o.err, "interrupted")
	if o.out == "" {
		require.Contains(t, o.err, "before there was anything to show", "a very slow machine")
		return
	}
	d := into[report.Document](t, o.out)
	require.NotEmpty(t, d.Minima)
	require.Empty(t, d.StopReason)
	require.Equal(t, search.Settings{
		Method: search.Anneal, Seed: 1, WindowKcal: 20, Coverage: 1, MaxQuenches: 200_000, TemperatureK: 298.15,
	}, d.Settings, "the settings are those asked for")
	sum := 0.0
	for _, m := range d.Minima {
		sum += m.Population
		require.Positive(t, m.Degeneracy)
	}
	require.InDelta(t, 1, sum, 1e-9)
}

func TestStereoisomersAreOfferedAndSearchedInTurn(t *testing.T) {
	o := tarn(t, "", "search", "CC(O)C=C", "--quenches", "1")
	require.Equal(t, exitUnusable, o.status)
	require.Contains(t, o.err, "--all-stereoisomers")
	require.Contains(t, o.err, "@")
	o = tarn(t, "", "search", "CC(O)C=C", "--quenches", "1", "--all-stereoisomers", "--json")
	require.Equal(t, exitDone, o.status, o.err)
	both := into[[]report.Document](t, o.out)
	require.Len(t, both, 2)
	require.NotEqual(t, both[0].Molecule.Key, both[1].Molecule.Key)
}

func TestMoleculeSaysWhatItUnderstood(t *testing.T) {
	o := tarn(t, "", "molecule", "C[C@@H]1CCCCCCCCCCCCC(=O)C1", "--json")
	require.Equal(t, exitDone, o.status, o.err)
	u := into[report.Understood](t, o.out)
	require.Equal(t, "C16H30O", u.Formula)
	require.Equal(t, []report.Stereocentre{{Atom: 2, Label: "R"}}, u.Stereocentres) // (R)-muscone
	require.Equal(t, u.Key, into[report.Understood](t, tarn(t, "", "molecule", "O=C1C[C@H](C)CCCCCCCCCCCC1", "--json").out).Key)
	salt := tarn(t, "", "molecule", "[Na+].CC([O-])=O")
	require.Equal(t, exitDone, salt.status, salt.err)
	require.Contains(t, salt.out, "[Na+]")
}

func TestVersion(t *testing.T) {
	require.Equal(t, outcome{exitDone, "tarn " + Version + "\n", ""}, tarn(t, "", "version"))
}
