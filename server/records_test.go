package server

import (
	"bufio"
	"bytes"
	"encoding/json"
	"os"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"
)

func lines[T any](t *testing.T, text string) (all []T) {
	t.Helper()
	scanner := bufio.NewScanner(strings.NewReader(text))
	for scanner.Scan() {
		var v T
		require.NoError(t, json.Unmarshal(scanner.Bytes(), &v), scanner.Text())
		all = append(all, v)
	}
	return all
}

// The charges of water in MMFF94 are -0.860 and 0.430: Halgren, J. Comput. Chem. 17, 520 (1996), from the bond charge increments.
func TestEnergyTakesCoordinatesAsTheyAre(t *testing.T) {
	path := file(t, "water.sdf", molfile("water", "0.9600", "O"))
	o := tarn(t, "", "energy", path, "--json")
	require.Equal(t, exitDone, o.status, o.err)
	all := lines[energyRecord](t, o.out)
	require.Len(t, all, 1)
	e := all[0]
	require.Equal(t, "water", e.Name)
	require.Equal(t, []int{70, 31, 31}, e.AtomTypes) // OH2 and HOH of the published table of symbols
	require.InDeltaSlice(t, []float64{-0.86, 0.43, 0.43}, e.PartialCharges, 1e-12)
	require.InDelta(t, *e.Energy, e.Terms.Sum(), 1e-9)
	require.Positive(t, *e.GradientRMS)
	require.Equal(t, 1.0, e.Options.Dielectric)
	raw := into[map[string]any](t, o.out)
	for _, name := range []string{"name", "energy_kcal_mol", "terms", "partial_charges", "atom_types", "gradient_rms", "options"} {
		require.Contains(t, raw, name, "a name of the contract")
	}
	for _, name := range []string{"bond", "angle", "stretch_bend", "out_of_plane", "torsion", "vdw", "electrostatic"} {
		require.Contains(t, raw["terms"], name, "a name of the contract")
	}
	plain := tarn(t, "", "energy", path)
	require.Equal(t, 1, strings.Count(plain.out, "\n"), "one line a record")
	require.Contains(t, plain.out, "kcal/mol")
	require.Equal(t, o, tarn(t, molfile("water", "0.9600", "O"), "energy", "-", "--json"), "from standard input")
}

func TestRecordsThatFailLetTheOthersGoOn(t *testing.T) {
	many := molfile("first", "0.9600", "O") + "$$$$\n" +
		molfile("no number", "nan", "O") + "$$$$\n" +
		molfile("selenium", "1.4600", "Se") + "$$$$\n" +
		molfile("last", "0.9700", "O") + "$$$$\n"
	path := file(t, "many.sdf", many)
	o := tarn(t, "", "energy", path, "--json")
	require.Equal(t, exitPartial, o.status)
	require.Equal(t, "tarn: 2 of 4 records failed\n", o.err)
	all := lines[energyRecord](t, o.out)
	require.Len(t, all, 4)
	require.NotNil(t, all[0].Energy)
	require.NotNil(t, all[3].Energy)
	require.NotEqual(t, *all[0].Energy, *all[3].Energy)
	require.Equal(t, 2, all[1].Record)
	require.Nil(t, all[1].Energy)
	require.NotEmpty(t, all[1].Error)
	require.Contains(t, all[2].Error, "atom 1 (Se")
	plain := tarn(t, "", "energy", path)
	require.Equal(t, 4, strings.Count(plain.out, "\n"))
	require.Equal(t, 2, strings.Count(plain.out, "error:"))

	alone := tarn(t, "", "energy", file(t, "se.sdf", molfile("selenium", "1.4600", "Se")))
	require.Equal(t, exitPartial, alone.status, "it could be read, but not be typed")
	require.Contains(t, alone.out, "atom 1 (Se")
}

func TestQuenchFindsTheMinimumAndWritesIt(t *testing.T) {
	path := file(t, "water.sdf", molfile("water", "1.3000", "O"))
	out := strings.TrimSuffix(path, "water.sdf") + "relaxed.xyz"
	o := tarn(t, "", "quench", path, "--json", "-o", out)
	require.Equal(t, exitDone, o.status, o.err)
	q := lines[quenchRecord](t, o.out)[0]
	require.LessOrEqual(t, *q.GradientRMS, 1e-6)
	// MMFF94: r(O-H) = 0.969 Å, the reference length, as nothing strains it: Halgren, J. Comput. Chem. 17, 553 (1996).
	dx, dy, dz := q.XYZ[1][0]-q.XYZ[0][0], q.XYZ[1][1]-q.XYZ[0][1], q.XYZ[1][2]-q.XYZ[0][2]
	require.InDelta(t, 0.969*0.969, dx*dx+dy*dy+dz*dz, 0.002)
	require.Greater(t, *q.LowestModeCM1, 1500.0, "three vibrations, the bend the lowest")
	again := tarn(t, "", "energy", out, "--json")
	require.Equal(t, exitDone, again.status, again.err)
	require.InDelta(t, *q.Energy, *lines[energyRecord](t, again.out)[0].Energy, 1e-6)
}

func TestOutputMayReplaceTheInputButNeverDestroysIt(t *testing.T) {
	stretched := molfile("water", "1.3000", "O")
	path := file(t, "water.sdf", stretched)
	o := tarn(t, "", "quench", path, "-o", path)
	require.Equal(t, exitDone, o.status, o.err)
	relaxed, err := os.ReadFile(path)
	require.NoError(t, err)
	require.NotEqual(t, stretched, string(relaxed))
	require.Equal(t, exitDone, tarn(t, "", "energy", path).status)

	broken := file(t, "broken.sdf", molfile("broken", "nan", "O"))
	before, err := os.ReadFile(broken)
	require.NoError(t, err)
	require.Equal(t, exitUnusable, tarn(t, "", "quench", broken, "-o", broken).status)
	after, err := os.ReadFile(broken)
	require.NoError(t, err)
	require.True(t, bytes.Equal(before, after))
}

func TestBuildKeepsTheStereochemistry(t *testing.T) {
	const menthol = "C[C@@H]1CC[C@H]([C@@H](C1)O)C(C)C"
	path := strings.TrimSuffix(file(t, "x", ""), "x") + "menthol.sdf"
	o := tarn(t, "", "build", menthol, "-o", path)
	require.Equal(t, exitDone, o.status, o.err)
	key := into[map[string]any](t, tarn(t, "", "molecule", menthol, "--json").out)["key"]
	require.Equal(t, key, into[map[string]any](t, tarn(t, "", "molecule", path, "--json").out)["key"])
	require.Equal(t, exitDone, tarn(t, "", "energy", path).status)
}
