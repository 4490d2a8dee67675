package ctfile_test

import (
	"fmt"
	"io"
	"math"
	"os"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/molecule"
	"tarn/molecule/ctfile"
	"tarn/molecule/smiles"
	"tarn/molecule/xyz"
)

// structures returns molecules with geometries: the frames of the examples of package xyz.
func structures(t *testing.T) []*xyz.Frame {
	t.Helper()
	text, err := os.ReadFile("../xyz/testdata/molecules.xyz")
	require.NoError(t, err)
	byCharge := map[int]*strings.Builder{-1: {}, 0: {}, 1: {}}
	lines := strings.Split(string(text), "\n")
	for at := 0; at+1 < len(lines); {
		end := at + 2
		for end < len(lines)-1 && !strings.Contains(lines[min(end+1, len(lines)-1)], "|") {
			end++
		}
		charge := map[string]int{"0": 0, "1": 1, "-1": -1}[strings.Split(lines[at+1], " | ")[1]]
		byCharge[charge].WriteString(strings.Join(lines[at:end], "\n") + "\n")
		at = end
	}
	var all []*xyz.Frame
	for charge, file := range byCharge {
		r := xyz.NewReader(strings.NewReader(file.String()), xyz.Options{Charge: charge})
		for {
			f, err := r.Read()
			if err == io.EOF {
				break
			}
			require.NoError(t, err)
			all = append(all, f)
		}
	}
	require.GreaterOrEqual(t, len(all), 60)
	return all
}

func TestRoundTrip(t *testing.T) {
	for _, f := range structures(t) {
		g := f.Geometry.Clone()
		for i := range g {
			g[i] += math.Pi / 1000
		}
		for _, version := range []ctfile.Version{ctfile.V2000, ctfile.V3000} {
			var file strings.Builder
			record := &ctfile.Record{
				Name: f.Title, Comment: "a comment", Molecule: f.Molecule, Geometry: g, Version: version,
				Data: []ctfile.Field{{Name: "ENERGY", Value: "1.5"}, {Name: "LINES", Value: "a\nb"}, {Name: "EMPTY"}},
			}
			require.NoError(t, ctfile.WriteRecord(&file, record))
			back := readOne(t, file.String())
			require.Equal(t, smiles.Canonical(f.Molecule), smiles.Canonical(back.Molecule), f.Title)
			require.Equal(t, f.Title, back.Name)
			require.Equal(t, "a comment", back.Comment)
			require.Equal(t, record.Data, back.Data)
			require.Equal(t, version, back.Version)
			require.Empty(t, back.Notes)
			if version == ctfile.V3000 {
				require.Equal(t, g, back.Geometry, "all digits")
			} else {
				require.InDeltaSlice(t, []float64(g), []float64(back.Geometry), 0.500001e-4)
			}
			for i, a := range f.Molecule.Atoms {
				require.Equal(t, a.Element, back.Molecule.Atoms[i].Element, "order of the atoms")
				require.Equal(t, a.Charge, back.Molecule.Atoms[i].Charge)
			}
		}
	}
}

// Only the heavy atoms have coordinates: the configuration is read from them, the geometry is not used.
func TestHeavyAtomsInSpace(t *testing.T) {
	withStereo := 0
	for _, f := range structures(t) {
		m := f.Molecule
		heavy := map[int]int{}
		var table, bonds strings.Builder
		for i, a := range m.Atoms {
			if a.Element > 1 {
				heavy[i] = len(heavy) + 1
				at := f.Geometry.At(i)
				charge := map[int]int{0: 0, 1: 3, -1: 5}[a.Charge]
				line(&table, "%10.4f%10.4f%10.4f %-3s 0%3d", at[0], at[1], at[2], a.Element, charge)
			}
		}
		count := 0
		for _, b := range m.Bonds {
			if heavy[b.A] > 0 && heavy[b.B] > 0 {
				line(&bonds, "%3d%3d%3d  0", heavy[b.A], heavy[b.B], b.Order)
				count++
			}
		}
		var file strings.Builder
		line(&file, "x\n\n\n%3d%3d  0  0  0  0            999 V2000", len(heavy), count)
		r := readOne(t, file.String()+table.String()+bonds.String()+"M  END\n")
		require.Equal(t, smiles.Canonical(m), smiles.Canonical(r.Molecule), f.Title)
		if len(m.Centers)+len(m.DoubleBonds) > 0 {
			withStereo++
		}
		flat := true
		for i := range heavy {
			flat = flat && math.Abs(f.Geometry.At(i)[2]) < 0.00005
		}
		if len(heavy) < len(m.Atoms) && !flat {
			require.Nil(t, r.Geometry)
			require.NotEmpty(t, r.Notes)
			require.Contains(t, r.Notes[0], "hydrogens have no coordinates")
		}
	}
	require.GreaterOrEqual(t, withStereo, 12)
}

func TestParityRoundTrip(t *testing.T) {
	for _, notation := range []string{
		"C[C@H](O)[C@@H](N)C(=O)O", "C[C@@H](O)[C@@H](N)C(=O)O", "F[C@](Cl)(Br)I", "C[S@](=O)CC", "C[S@@](=O)CC", "[2H][C@H](C)O",
		"O[C@H]1CC[C@@H](C)CC1", "[13CH3][C@H](C)[NH3+]",
	} {
		m, err := smiles.Parse(notation)
		require.NoError(t, err)
		for _, version := range []ctfile.Version{0, ctfile.V3000} {
			var file strings.Builder
			require.NoError(t, ctfile.WriteMolfile(&file, m, nil, version))
			require.Equal(t, smiles.Canonical(m), smiles.Canonical(readOne(t, file.String()).Molecule), notation)
		}
	}
}

// What a reader would complete differently is stated: radicals, isotopes, charges, open valences.
func TestUnusualAtomsRoundTrip(t *testing.T) {
	for _, notation := range []string{
		"[CH3]", "[CH2]", "[CH]", "[C]", "C[O]", "[O][O]", "[H+]", "[H-]", "[Na+].[Cl-]", "[Fe+3]", "[2H]C([3H])[18OH]", "[13C]", "[Na]", "[B-](F)(F)(F)F",
		"[NH4+].[O-]Cl(=O)(=O)=O", "S(F)(F)(F)(F)(F)F", "[C-]#[O+]", "C[Se]C", "[Xe]",
		"[O-]C(=O)C([O-])=O.[Ca+2]", "[NH3+]C.[NH3+]C.[NH3+]C.[NH3+]C.[NH3+]C.[NH3+]C.[NH3+]C.[NH3+]C.[NH3+]C.[O-]C",
	} {
		m, err := smiles.Parse(notation)
		require.NoError(t, err, notation)
		for _, version := range []ctfile.Version{ctfile.V2000, ctfile.V3000} {
			var file strings.Builder
			require.NoError(t, ctfile.WriteMolfile(&file, m, nil, version))
			back := readOne(t, file.String()).Molecule
			require.Equal(t, smiles.Canonical(m), smiles.Canonical(back), "%s\n%s", notation, file.String())
			require.Equal(t, m.Atoms, back.Atoms, notation)
		}
	}
}

// The columns of the published description: aaabbblllfffcccsssxxxrrrpppiiimmmvvvvvv, xxxxx.xxxxyyyyy.yyyyzzzzz.zzzz aaaddccc…,
// 111222tttsss, M  CHGnn8 aaa vvv.
func TestColumnsOfV2000(t *testing.T) {
	m, err := smiles.Parse("[18OH-]")
	require.NoError(t, err)
	var file strings.Builder
	g := molecule.Geometry{-1234.56789, 0.00004, 0, 12345.6, -0.96, 0.5}
	require.NoError(t, ctfile.WriteMolfile(&file, m, g, ctfile.V2000))
	lines := strings.Split(file.String(), "\n")
	require.Equal(t, []string{
		"  2  1  0  0  0  0  0  0  0  0999 V2000",
		"-1234.5679    0.0000    0.0000 O   0  0  0  0  0  0  0  0  0  0  0  0",
		"12345.6000   -0.9600    0.5000 H   0  0  0  0  0  0  0  0  0  0  0  0",
		"  1  2  1  0",
		"M  CHG  1   1  -1",
		"M  ISO  1   1  18",
		"M  END",
		"",
	}, lines[3:])
	require.Equal(t, "3D", lines[1][20:22])
	require.Len(t, lines[1], 22)
}

func TestLargeMoleculesAreV3000(t *testing.T) {
	m, err := smiles.Parse(strings.Repeat("C", 340))
	require.NoError(t, err)
	var file strings.Builder
	require.NoError(t, ctfile.WriteMolfile(&file, m, nil, 0))
	back := readOne(t, file.String())
	require.Equal(t, ctfile.V3000, back.Version)
	require.Len(t, back.Molecule.Atoms, 1022)
	require.ErrorContains(t, ctfile.WriteMolfile(io.Discard, m, nil, ctfile.V2000), "1022 atoms do not fit a V2000 molfile")
}

func TestWriterRefuses(t *testing.T) {
	ethene, err := smiles.Parse("F/C=C/F")
	require.NoError(t, err)
	allene, err := smiles.Parse("CC=[C@]=CC")
	require.NoError(t, err)
	water, err := smiles.Parse("O")
	require.NoError(t, err)
	dicarbon, err := molecule.New("", []molecule.Atom{{Element: 6}, {Element: 6}}, []molecule.Bond{{A: 0, B: 1, Order: 4}}, nil, nil)
	require.NoError(t, err)
	for reason, r := range map[string]*ctfile.Record{
		"cis or trans geometry of the double bond between atoms 2 and 3": {Molecule: ethene},
		"configuration of the allene at atom 3":                          {Molecule: allene},
		"8 coordinates for 3 atoms":                                      {Molecule: water, Geometry: make(molecule.Geometry, 8)},
		"atom 2 has the coordinate NaN":                                  {Molecule: water, Geometry: molecule.Geometry{0, 0, 0, 0, math.NaN(), 0, 0, 0, 0}},
		"atom 3 has the coordinate +Inf":                                 {Molecule: water, Geometry: molecule.Geometry{0, 0, 0, 0, 0, 0, 0, 0, math.Inf(1)}, Version: ctfile.V3000},
		"do not fit a V2000 molfile":                                     {Molecule: water, Geometry: molecule.Geometry{0, 0, 0, 0, 0, 0, 0, 0, 1e5}, Version: ctfile.V2000},
		"the name":                                                       {Molecule: water, Name: "a\nb"},
		"the comment":                                                    {Molecule: water, Comment: "$$$$"},
		"the field name \"a>b\"":                                         {Molecule: water, Data: []ctfile.Field{{Name: "a>b"}}},
		"the field name \"\"":                                            {Molecule: water, Data: []ctfile.Field{{Value: "x"}}},
		"the value of the field \"BLANK\"":                               {Molecule: water, Data: []ctfile.Field{{Name: "BLANK", Value: "a\n\nb"}}},
		"the value of the field \"END\"":                                 {Molecule: water, Data: []ctfile.Field{{Name: "END", Value: "a\n$$$$"}}},
		"is quadruple":                                                   {Molecule: dicarbon},
		"no molfile version 1":                                           {Molecule: water, Version: 1},
	} {
		var out strings.Builder
		require.ErrorContains(t, ctfile.WriteRecord(&out, r), reason)
		require.Empty(t, out.String(), "nothing is written of a record that cannot be")
	}
}

func line(b *strings.Builder, format string, arguments ...any) {
	fmt.Fprintf(b, format+"\n", arguments...)
}
