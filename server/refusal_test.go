package server

import (
	"path/filepath"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/store"
)

func TestUnusableInputAndOptionsAreRefused(t *testing.T) {
	truncated := molfile("water", "0.9600", "O")
	truncated = truncated[:strings.Index(truncated, "  1  3")]
	two := file(t, "two.sdf", molfile("one", "0.9600", "O")+"$$$$\n"+molfile("two", "0.9600", "O")+"$$$$\n")
	data := t.TempDir()
	s, err := store.Open(data)
	require.NoError(t, err)
	defer func() { require.NoError(t, s.Close()) }()
	for _, c := range []struct {
		name      string
		says      string
		arguments []string
	}{
		{"no SMILES", "column 5", []string{"search", "CCCCX"}},
		{"branch not closed", "^", []string{"search", "C1CC("}},
		{"nothing", "empty", []string{"search", ""}},
		{"valence", "atom 2", []string{"search", "CC(C)(C)(C)C"}},
		{"salt", "2 separate molecules", []string{"search", "[Na+].CC(=O)[O-]"}},
		{"element that MMFF94 lacks", "atom 2 (Se", []string{"search", "C[Se]C"}},
		{"5,000 atoms", "5000 atoms", []string{"search", strings.Repeat("C", 1666)}},
		{"NaN", "line 6", []string{"search", file(t, "nan.mol", molfile("water", "nan", "O"))}},
		{"truncated", "line", []string{"search", file(t, "cut.sdf", truncated)}},
		{"truncated, energy", "line", []string{"energy", file(t, "cut.sdf", truncated)}},
		{"empty file", "no record", []string{"search", file(t, "empty.sdf", "")}},
		{"0 atoms", "0 atoms", []string{"search", file(t, "none.xyz", "0\n\n")}},
		{"no such file", "no such file", []string{"search", filepath.Join(t.TempDir(), "absent.sdf")}},
		{"two records", "--record", []string{"search", two}},
		{"third of two records", "no record 3", []string{"search", two, "--record", "3"}},
		{"unknown method", "anneal, dynamics or mixed", []string{"search", "CC", "--method", "guess"}},
		{"unknown field", "mmff94", []string{"search", "CC", "--field", "uff"}},
		{"field of clusters", "clusters", []string{"search", "CC", "--field", "lj"}},
		{"negative temperature", "temperature", []string{"search", "CC", "--temperature", "-1"}},
		{"0 K", "temperature", []string{"search", "CC", "--temperature", "0"}},
		{"NaN kelvin", "temperature", []string{"search", "CC", "--temperature", "NaN"}},
		{"negative window", "window", []string{"search", "CC", "--window", "-2"}},
		{"coverage above 1", "coverage", []string{"search", "CC", "--coverage", "1.01"}},
		{"no quenches", "quenches", []string{"search", "CC", "--quenches", "0"}},
		{"no time", "time", []string{"search", "CC", "--time", "-3s"}},
		{"negative workers", "workers", []string{"search", "CC", "--workers", "-1"}},
		{"unknown option", "--fast", []string{"search", "CC", "--fast"}},
		{"no input", "1 arg", []string{"search"}},
		{"output of no format", ".json", []string{"search", "CC", "-o", "minima.pdf"}},
		{"output nowhere", "cannot be written", []string{"search", "CC", "-o", filepath.Join(t.TempDir(), "no", "such.sdf")}},
		{"cluster as SD file", "no bonds", []string{"search", "lj:5", "-o", filepath.Join(t.TempDir(), "lj.sdf")}},
		{"cluster of words", "lj:13", []string{"search", "lj:many"}},
		{"cluster of one", "cluster of 1", []string{"search", "lj:1"}},
		{"energy of a SMILES", "no such file", []string{"energy", "CCCC"}},
		{"energy without coordinates", "no 3D coordinates", []string{"energy", file(t, "flat.smi", "CC\n")}},
		{"energy in no field", "mmff94s", []string{"energy", two, "--field", "uff"}},
		{"no dielectric", "dielectric", []string{"energy", two, "--dielectric", "0"}},
		{"build to no format", ".sdf", []string{"build", "CC", "-o", "x.csv"}},
		{"data folder in use", "in use by another", []string{"serve", "--data", data, "--listen", "127.0.0.1:0"}},
		{"no address", "--listen", []string{"serve", "--data", t.TempDir(), "--listen", "nowhere:99999"}},
	} {
		t.Run(c.name, func(t *testing.T) {
			o := tarn(t, "", c.arguments...)
			require.Equal(t, exitUnusable, o.status, o.out)
			require.True(t, strings.HasPrefix(o.err, "tarn: "), o.err)
			require.Contains(t, o.err, c.says)
			lines := strings.Count(o.err, "\n")
			if strings.Contains(o.err, "^") {
				lines -= 2 // the excerpt and its caret
			}
			require.Equal(t, 1, lines, "one clear line: %s", o.err)
		})
	}
}
