package report_test

import (
	"bytes"
	"encoding/csv"
	"encoding/json"
	"io"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/ensemble/report"
	"tarn/molecule"
	"tarn/molecule/ctfile"
	"tarn/molecule/notation"
	"tarn/molecule/smiles"
	"tarn/molecule/xyz"
	"tarn/search"
)

// butane returns the document of a short search of butane.
func butane(t *testing.T) (report.Document, *molecule.Molecule) {
	m, err := smiles.Parse("CCCC")
	require.NoError(t, err)
	p, err := search.NewMoleculeProblem(t.Context(), m, "mmff94", nil, 1)
	require.NoError(t, err)
	r, err := search.Run(t.Context(), p, search.Settings{Seed: 1, MaxQuenches: 100}, nil, search.Hooks{})
	require.NoError(t, err)
	return report.Document{
		Molecule: report.Molecule{Name: "butane", SMILES: "CCCC", Formula: "C4H10", Key: smiles.Key(m)}, Field: "mmff94",
		Settings: r.Settings, TemperatureK: 298.15, Coverage: r.Coverage, StopReason: string(r.StopReason),
		Elements: report.Symbols(m, len(m.Atoms)), Minima: report.Ranked(r.Minima, 298.15),
	}, m
}

// MMFF94: gauche lies 0.78 kcal/mol above anti (J. Comput. Chem. 17, 587 (1996), Table I). With two gauche versions the populations
// follow from exp(−E/RT): 65 % and 35 % at 298.15 K.
func TestRankedButane(t *testing.T) {
	d, _ := butane(t)
	require.Len(t, d.Minima, 2)
	require.InDelta(t, 0.78, d.Minima[1].Relative, 0.02)
	require.Equal(t, []int{1, 2}, []int{d.Minima[0].Degeneracy, d.Minima[1].Degeneracy})
	require.InDelta(t, 0.65, d.Minima[0].Population, 0.01)
	require.InDelta(t, 0.35, d.Minima[1].Population, 0.01)
	require.InDelta(t, 1, *d.Minima[0].PopulationFreeEnergy+*d.Minima[1].PopulationFreeEnergy, 1e-12)
}

func TestWrittenFilesReadBack(t *testing.T) {
	d, m := butane(t)
	write := func(f report.Format) *bytes.Buffer {
		var b bytes.Buffer
		require.NoError(t, report.Write(&b, f, d, m))
		return &b
	}
	sdf, frames := ctfile.NewReader(write(report.SDF)), xyz.NewReader(write(report.XYZ), xyz.Options{})
	for i, row := range d.Minima {
		record, err := sdf.Read()
		require.NoError(t, err)
		require.True(t, record.Molecule.Same(m))
		frame, err := frames.Read()
		require.NoError(t, err)
		require.True(t, frame.Molecule.Same(m))
		for a, p := range row.XYZ {
			for k := range 3 {
				require.InDelta(t, p[k], record.Geometry[3*a+k], 5.1e-5, "SDF V2000 holds four decimals")
				require.InDelta(t, p[k], frame.Geometry[3*a+k], 5.1e-9)
			}
		}
		require.Contains(t, record.Data, ctfile.Field{Name: "degeneracy", Value: []string{"1", "2"}[i]})
	}
	_, err := sdf.Read()
	require.ErrorIs(t, err, io.EOF)

	rows, err := csv.NewReader(write(report.CSV)).ReadAll()
	require.NoError(t, err)
	require.Len(t, rows, 3)
	require.Equal(t, "energy_kcal_mol", rows[0][1])
	require.Len(t, rows[1], len(rows[0]))

	var back report.Document
	require.NoError(t, json.Unmarshal(write(report.JSON).Bytes(), &back))
	back.Settings.Workers = d.Settings.Workers // no part of the result
	require.Equal(t, d, back)
}

func TestClusterHasNoSDF(t *testing.T) {
	d := report.Document{Field: "lj"}
	require.ErrorContains(t, report.Write(io.Discard, report.SDF, d, nil), "xyz")
	require.ErrorContains(t, report.Write(io.Discard, "pdf", d, nil), "no format")
}

func TestTableSaysWhatAReaderMustKnow(t *testing.T) {
	d, _ := butane(t)
	var b strings.Builder
	require.NoError(t, report.WriteTable(&b, d))
	for _, text := range []string{"coverage", "95 % interval", "298.15 K", "0.78", "clinical"} {
		require.Contains(t, b.String(), text)
	}
}

func TestSymbols(t *testing.T) {
	m, err := smiles.Parse("[2H]OCl")
	require.NoError(t, err)
	require.Equal(t, []string{"H", "O", "Cl"}, report.Symbols(m, 0), "a molecule knows its own atoms, even before a minimum is found")
	require.Equal(t, []string{"X", "X"}, report.Symbols(nil, 2))
}

func TestWarnings(t *testing.T) {
	require.Empty(t, report.Warnings(search.Counted{}))
	w := report.Warnings(search.Counted{Inverted: 3, InvertedAtoms: []int{2, 5}, Broken: 1, Failed: 2})
	require.Len(t, w, 3)
	require.Contains(t, w[0], "2, 5")
}

// Tartaric acid left open has three stereoisomers (textbook); (R)-muscone's centre is the atom beside the methyl group.
func TestUnderstand(t *testing.T) {
	understand := func(text string) report.Understood {
		r, err := notation.Input{SMILES: text}.Parse()
		require.NoError(t, err)
		u, err := report.Understand(r)
		require.NoError(t, err)
		return u
	}
	u := understand("OC(=O)C(O)C(O)C(=O)O")
	require.Len(t, u.Stereoisomers, 3)
	require.Equal(t, []report.Stereocentre{{Atom: 4, Label: "?"}, {Atom: 6, Label: "?"}}, u.Stereocentres)
	require.Equal(t, "C4H6O6", u.Formula)

	u = understand("C[C@@H]1CCCCCCCCCCCCC(=O)C1")
	require.Equal(t, []report.Stereocentre{{Atom: 2, Label: "R"}}, u.Stereocentres)
	require.InDelta(t, 238.415, u.MassU, 0.01) // C16H30O from standard atomic weights
	require.Empty(t, u.ForceField)

	u = understand("[Na+].CC(=O)[O-]")
	require.Len(t, u.Fragments, 2)
	u = understand("CB(O)O")
	require.Contains(t, u.ForceField, "B")
}
