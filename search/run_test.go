package search_test

import (
	"context"
	"encoding/json"
	"errors"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/molecule/smiles"
	"tarn/search"
)

func run(t *testing.T, p *search.Problem, s search.Settings) *search.Result {
	t.Helper()
	r, err := search.Run(t.Context(), p, s, nil, search.Hooks{})
	require.NoError(t, err)
	return r
}

// Published: butane gauche - anti 0.78 (Halgren & Nachbar 1996), cyclohexane twist-boat - chair 5.93 (same). Counts of minima and their
// degeneracies by hand: Tasi et al., J. Phys. Chem. A 102, 7698 (1998) has butane 2, pentane 4, hexane 12.
func TestAlkanes(t *testing.T) {
	for _, row := range []struct {
		name, smiles string
		window       float64
		degeneracies []int
		second       float64
	}{
		{"butane", "CCCC", 0, []int{1, 2}, 0.78},
		{"pentane", "CCCCC", 0, []int{1, 4, 2, 4}, 0},
		{"hexane", "CCCCCC", 12, []int{1, 4, 2, 4, 2, 2, 2, 4, 4, 4, 4, 2}, 0},
		{"cyclohexane", "C1CCCCC1", 0, []int{2, 6}, 5.93},
	} {
		t.Run(row.name, func(t *testing.T) {
			r := run(t, problem(t, row.smiles), search.Settings{Seed: 1, WindowKcal: row.window})
			require.Equal(t, search.StopCoverage, r.StopReason)
			require.GreaterOrEqual(t, r.Coverage.Low, 0.95)
			var degeneracies []int
			for i, m := range r.Minima {
				degeneracies = append(degeneracies, m.Degeneracy)
				require.Positive(t, m.LowestModeCM1)
				require.Positive(t, m.LowestEigenvalue)
				require.LessOrEqual(t, m.GradientRMS, 1e-6)
				require.Len(t, m.RotationalConstantsMHz, 3)
				require.Positive(t, m.Hits)
				require.True(t, i == 0 || m.Energy >= r.Minima[i-1].Energy)
			}
			require.ElementsMatch(t, row.degeneracies, degeneracies)
			if row.second > 0 {
				require.InDelta(t, row.second, r.Minima[1].Energy-r.Minima[0].Energy, 0.02)
			}
		})
	}
}

// Each method alone finds the four minima of pentane and the two of cyclohexane (published counts as above).
func TestEveryMethod(t *testing.T) {
	for _, method := range search.Methods {
		require.Len(t, run(t, problem(t, "CCCCC"), search.Settings{Method: method, Seed: 4, MaxQuenches: 240}).Minima, 4, method)
		require.Len(t, run(t, problem(t, "C1CCCCC1"), search.Settings{Method: method, Seed: 4, MaxQuenches: 240}).Minima, 2, method)
	}
}

// A molecule in which nothing moves ends with one minimum and full coverage at once.
func TestRigidMolecules(t *testing.T) {
	for _, text := range []string{"C", "c1ccccc1", "O", "C1CC1", "CC"} {
		r := run(t, problem(t, text), search.Settings{Seed: 3})
		require.Equal(t, search.StopRigid, r.StopReason, text)
		require.Len(t, r.Minima, 1, text)
		require.Equal(t, search.Coverage{Estimate: 1, Low: 1, High: 1}, r.Coverage, text)
		require.Less(t, r.Quenches, 100, text)
	}
}

// library is what must not depend on workers or interruptions.
func libraryOf(c search.Checkpoint) []search.Minimum { return c.Minima }

func TestWorkersDoNotMatter(t *testing.T) {
	p := problem(t, "OCCO")
	for _, method := range search.Methods {
		s := search.Settings{Method: method, Seed: 7, MaxQuenches: 150}
		s.Workers = 1
		one := run(t, p, s)
		s.Workers = 3
		three := run(t, p, s)
		require.Equal(t, libraryOf(one.Checkpoint), libraryOf(three.Checkpoint), method)
		require.Equal(t, one.Coverage, three.Coverage, method)
		require.Equal(t, one.Evaluations, three.Evaluations, method)
		s.Seed = 8
		require.NotEqual(t, libraryOf(one.Checkpoint), libraryOf(run(t, p, s).Checkpoint), "another seed, another walk")
	}
}

// A search that is stopped after any round, written to JSON, read back and continued ends with the same library.
func TestInterruptionsDoNotMatter(t *testing.T) {
	p := problem(t, "CCCCO")
	s := search.Settings{Method: search.Mixed, Seed: 5, MaxQuenches: 400}
	whole := run(t, p, s)
	stop := errors.New("killed")
	var from *search.Checkpoint
	for sittings := 0; ; sittings++ {
		require.Less(t, sittings, 30)
		r, err := search.Run(t.Context(), p, s, from, search.Hooks{Checkpoint: func(c search.Checkpoint) error {
			data, err := json.Marshal(c)
			require.NoError(t, err)
			from = &search.Checkpoint{}
			require.NoError(t, json.Unmarshal(data, from))
			return stop
		}})
		if err == nil {
			require.Greater(t, sittings, 1)
			require.Equal(t, libraryOf(whole.Checkpoint), libraryOf(r.Checkpoint))
			require.Equal(t, whole.Coverage, r.Coverage)
			require.Equal(t, whole.StopReason, r.StopReason)
			require.Equal(t, whole.Quenches, r.Quenches)
			return
		}
		require.ErrorIs(t, err, stop)
	}
}

func TestBudgets(t *testing.T) {
	p := problem(t, "CCCCCCCC")
	r := run(t, p, search.Settings{Seed: 1, MaxQuenches: 37})
	require.Equal(t, search.StopQuenches, r.StopReason)
	require.Equal(t, 37, r.Quenches)
	r = run(t, p, search.Settings{Seed: 1, MaxSeconds: 0.3, WindowKcal: 20})
	require.Equal(t, search.StopTime, r.StopReason)
	require.NotEmpty(t, r.Minima)
	require.Less(t, r.Coverage.Estimate, 0.99)
	require.Positive(t, r.Coverage.Unseen)
}

func TestCancelAndProgress(t *testing.T) {
	p := problem(t, "CCCCCC")
	ctx, cancel := context.WithCancel(t.Context())
	var last search.Progress
	reports := 0
	_, err := search.Run(ctx, p, search.Settings{Seed: 1}, nil, search.Hooks{Progress: func(now search.Progress) {
		reports++
		require.GreaterOrEqual(t, now.Quenches, last.Quenches)
		require.True(t, now.Fraction >= 0 && now.Fraction <= 1)
		last = now
		if now.Round == 1 {
			cancel()
		}
	}})
	require.ErrorIs(t, err, context.Canceled)
	require.Positive(t, reports)
	require.Positive(t, last.Quenches)
	require.Positive(t, last.Minima)
}

// The walks report what they did at each temperature.
func TestStages(t *testing.T) {
	r := run(t, problem(t, "CCCCC"), search.Settings{Seed: 2, MaxQuenches: 300, Method: search.Mixed})
	kinds := map[string]bool{}
	for _, s := range r.Checkpoint.Stages {
		kinds[s.Kind] = true
		require.True(t, s.TemperatureK >= 200 && s.TemperatureK <= 2000, "%+v", s)
		require.True(t, s.Acceptance >= 0 && s.Acceptance <= 1)
		require.Positive(t, s.Walks)
	}
	require.GreaterOrEqual(t, len(kinds), 2)
	require.Len(t, r.Checkpoint.Discovery, r.Checkpoint.Round)
}

func TestValidate(t *testing.T) {
	require.NoError(t, search.Settings{}.Validate())
	for name, s := range map[string]search.Settings{
		"method":          {Method: "tunnel"},
		"window_kcal_mol": {WindowKcal: -1},
		"coverage":        {Coverage: 1.5},
		"max_quenches":    {MaxQuenches: -5},
		"max_seconds":     {MaxSeconds: -0.1},
		"temperature_k":   {TemperatureK: -300},
		"workers":         {Workers: -1},
	} {
		err := s.Validate()
		var fault *search.SettingError
		require.ErrorAs(t, err, &fault, name)
		require.Equal(t, name, fault.Name)
		_, err = search.Run(t.Context(), problem(t, "CC"), s, nil, search.Hooks{})
		require.ErrorAs(t, err, &fault, name)
	}
	d := search.Settings{}.WithDefaults(false)
	require.Equal(t, 6.0, d.WindowKcal)
	require.Equal(t, 0.99, d.Coverage)
	require.Equal(t, 298.15, d.TemperatureK)
}

func TestProblemsThatAreRefused(t *testing.T) {
	for text, message := range map[string]string{
		"CC(=O)[O-].[Na+]":     "split the salt",
		"CCC(C)O":              "choose one of the stereoisomers: C[C@H](O)CC, C[C@@H](O)CC",
		"CC=CC":                "choose one of the stereoisomers: C/C=C",
		string(longChain(200)): "at most 500 can be searched",
	} {
		m, err := smiles.Parse(text)
		require.NoError(t, err, text)
		_, err = search.NewMoleculeProblem(t.Context(), m, "", nil, 1)
		require.ErrorContains(t, err, message, text)
	}
	m, err := smiles.Parse("CC")
	require.NoError(t, err)
	_, err = search.NewMoleculeProblem(t.Context(), m, "ljx", nil, 1)
	require.ErrorContains(t, err, "mmff94 or mmff94s")
	_, err = search.NewMoleculeProblem(t.Context(), m, "", make([]float64, 9), 1)
	require.ErrorContains(t, err, "3 atoms, the molecule 8")
	for _, n := range []int{-1, 0, 1, 501} {
		_, err = search.NewClusterProblem(n)
		require.ErrorContains(t, err, "give 2 to 500", n)
	}
}

func longChain(n int) []byte {
	chain := make([]byte, n)
	for i := range chain {
		chain[i] = 'C'
	}
	return chain
}

// What the molecule leaves open is read off given coordinates; what it states must be in them.
func TestGivenCoordinates(t *testing.T) {
	right := problem(t, "CC[C@H](C)O")
	open, err := smiles.Parse("CCC(C)O")
	require.NoError(t, err)
	p, err := search.NewMoleculeProblem(t.Context(), open, "mmff94s", right.Start[0], 1)
	require.NoError(t, err)
	require.Equal(t, smiles.Canonical(right.Molecule), smiles.Canonical(p.Molecule))
	wrong, err := smiles.Parse("CC[C@@H](C)O")
	require.NoError(t, err)
	_, err = search.NewMoleculeProblem(t.Context(), wrong, "", right.Start[0], 1)
	require.ErrorContains(t, err, "atom 3")
}
