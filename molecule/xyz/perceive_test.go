package xyz_test

import (
	"fmt"
	"math"
	"math/rand/v2"
	"os"
	"strconv"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/molecule"
	"tarn/molecule/smiles"
	"tarn/molecule/xyz"
)

// example is one frame of testdata/molecules.xyz: MMFF94 minima (Å, four decimals) of molecules given as SMILES. The title
// holds name, charge and SMILES; only elements, coordinates and charge go into the perception.
type example struct {
	name, smiles string
	charge       int
	frame        string
}

func examples(t *testing.T) []example {
	t.Helper()
	text, err := os.ReadFile("testdata/molecules.xyz")
	require.NoError(t, err)
	lines := strings.Split(string(text), "\n")
	var all []example
	for at := 0; at+1 < len(lines); {
		n, err := strconv.Atoi(lines[at])
		require.NoError(t, err)
		parts := strings.Split(lines[at+1], " | ")
		require.Len(t, parts, 3)
		charge, err := strconv.Atoi(parts[1])
		require.NoError(t, err)
		all = append(all, example{parts[0], parts[2], charge, strings.Join(lines[at:at+n+2], "\n")})
		at += n + 2
	}
	require.GreaterOrEqual(t, len(all), 60)
	return all
}

func TestPerceiveExamples(t *testing.T) {
	for _, e := range examples(t) {
		t.Run(e.name, func(t *testing.T) {
			f, err := xyz.NewReader(strings.NewReader(e.frame), xyz.Options{Charge: e.charge}).Read()
			require.NoError(t, err)
			want, err := smiles.Parse(e.smiles)
			require.NoError(t, err)
			require.Equal(t, smiles.Canonical(want), smiles.Canonical(f.Molecule))
			require.Empty(t, f.Notes)
		})
	}
}

// With one electron too many or too few there is no closed shell, whatever the molecule.
func TestWrongChargeIsRefused(t *testing.T) {
	for _, e := range examples(t) {
		for _, off := range []int{-1, 1} {
			_, err := xyz.NewReader(strings.NewReader(e.frame), xyz.Options{Charge: e.charge + off}).Read()
			var reason *xyz.PerceptionError
			require.ErrorAs(t, err, &reason, e.name)
			require.ErrorContains(t, err, fmt.Sprintf("fit a total charge of %d,", e.charge), e.name)
		}
	}
}

func TestMissingHydrogenIsNamed(t *testing.T) {
	methyl := "4\nmethyl radical\nC 0 0 0\nH 1.08 0 0\nH -0.54 0.935 0\nH -0.54 -0.935 0\n"
	_, err := xyz.NewReader(strings.NewReader(methyl), xyz.Options{}).Read()
	var reason *xyz.PerceptionError
	require.ErrorAs(t, err, &reason)
	require.Equal(t, []int{0}, reason.Atoms)
	require.ErrorContains(t, err, "the total charge 0 leaves a free valence at atom 1 (C)")
}

func TestUnusualChargeIsNoted(t *testing.T) {
	methyl := "4\nmethyl cation\nC 0 0 0\nH 1.08 0 0\nH -0.54 0.935 0\nH -0.54 -0.935 0\n"
	f, err := xyz.NewReader(strings.NewReader(methyl), xyz.Options{Charge: 1}).Read()
	require.NoError(t, err)
	require.Equal(t, 1, f.Molecule.Atoms[0].Charge)
	require.Len(t, f.Notes, 1)
	require.Contains(t, f.Notes[0], "atom 1 (C) carries the charge +1")
}

// Small molecules from their experimental structures (bond lengths in Å rounded to 0.01, from memory).
func TestSmallMolecules(t *testing.T) {
	for _, c := range []struct {
		name, atoms, want string
		charge            int
	}{
		{"hydrogen", "H 0 0 0\nH 0.74 0 0", "[H][H]", 0},
		{"nitrogen", "N 0 0 0\nN 1.10 0 0", "N#N", 0},
		{"carbon monoxide", "C 0 0 0\nO 1.13 0 0", "[C-]#[O+]", 0},
		{"carbon dioxide", "C 0 0 0\nO 1.16 0 0\nO -1.16 0 0", "O=C=O", 0},
		{"hydrogen cyanide", "C 0 0 0\nN 1.16 0 0\nH -1.07 0 0", "C#N", 0},
		{"cyanide ion", "C 0 0 0\nN 1.18 0 0", "[C-]#N", -1},
		{"dinitrogen oxide", "N 0 0 0\nN 1.13 0 0\nO 2.31 0 0", "[N-]=[N+]=O", 0},
		{"ozone", "O 0 0 0\nO 1.09 0.67 0\nO -1.09 0.67 0", "O=[O+][O-]", 0},
		{"nitrite ion", "N 0 0 0\nO 1.08 0.60 0\nO -1.08 0.60 0", "N(=O)[O-]", -1},
		{"nitrate ion", "N 0 0 0\nO 1.25 0 0\nO -0.625 1.083 0\nO -0.625 -1.083 0", "[N+](=O)([O-])[O-]", -1},
		{"carbonate ion", "C 0 0 0\nO 1.29 0 0\nO -0.645 1.117 0\nO -0.645 -1.117 0", "C(=O)([O-])[O-]", -2},
		{"sulfur dioxide", "S 0 0 0\nO 1.24 0.72 0\nO -1.24 0.72 0", "O=S=O", 0},
		{"sulfate ion", "S 0 0 0\nO 0.86 0.86 0.86\nO -0.86 -0.86 0.86\nO -0.86 0.86 -0.86\nO 0.86 -0.86 -0.86", "S(=O)(=O)([O-])[O-]", -2},
		{"perchlorate ion", "Cl 0 0 0\nO 0.83 0.83 0.83\nO -0.83 -0.83 0.83\nO -0.83 0.83 -0.83\nO 0.83 -0.83 -0.83", "Cl(=O)(=O)(=O)[O-]", -1},
		{"ammonium ion", "N 0 0 0\nH 0.59 0.59 0.59\nH -0.59 -0.59 0.59\nH -0.59 0.59 -0.59\nH 0.59 -0.59 -0.59", "[NH4+]", 1},
		{"hydronium ion", "O 0 0 0\nH 0.94 0 -0.27\nH -0.47 0.81 -0.27\nH -0.47 -0.81 -0.27", "[OH3+]", 1},
		{"tetrafluoroborate ion", "B 0 0 0\nF 0.81 0.81 0.81\nF -0.81 -0.81 0.81\nF -0.81 0.81 -0.81\nF 0.81 -0.81 -0.81", "[B-](F)(F)(F)F", -1},
		{"sulfur hexafluoride", "S 0 0 0\nF 1.56 0 0\nF -1.56 0 0\nF 0 1.56 0\nF 0 -1.56 0\nF 0 0 1.56\nF 0 0 -1.56", "S(F)(F)(F)(F)(F)F", 0},
		{"sodium and chloride ions", "Na 0 0 0\nCl 2.36 0 0", "[Na+].[Cl-]", 0},
		{"zinc ion and water", "Zn 0 0 0\nO 2.0 0 0\nH 2.6 0.75 0\nH 2.6 -0.75 0", "[Zn+2].O", 2},
		{"cyclopentadienyl ion", fivefold(1.19, 2.27), "[cH-]1cccc1", -1},
		{"neon", "Ne 0 0 0", "[Ne]", 0},
	} {
		t.Run(c.name, func(t *testing.T) {
			file := fmt.Sprintf("%d\n\n%s\n", strings.Count(c.atoms, "\n")+1, c.atoms)
			f, err := xyz.NewReader(strings.NewReader(file), xyz.Options{Charge: c.charge}).Read()
			require.NoError(t, err)
			want, err := smiles.Parse(c.want)
			require.NoError(t, err)
			require.Equal(t, smiles.Canonical(want), smiles.Canonical(f.Molecule))
		})
	}
}

// fivefold is a ring of five CH with the given distances of C and H from the middle, Å.
func fivefold(carbon, hydrogen float64) string {
	var lines []string
	for k := range 5 {
		s, c := math.Sincos(2 * math.Pi * float64(k) / 5)
		lines = append(lines, fmt.Sprintf("C %.4f %.4f 0\nH %.4f %.4f 0", carbon*c, carbon*s, hydrogen*c, hydrogen*s))
	}
	return strings.Join(lines, "\n")
}

// What is perceived does not depend on the order of the atoms, on where the molecule lies, or on coordinates off by 0.02 Å.
func TestPerceptionIsRobust(t *testing.T) {
	for _, e := range examples(t) {
		rng := rand.New(rand.NewPCG(7, 11))
		f, err := xyz.NewReader(strings.NewReader(e.frame), xyz.Options{Charge: e.charge}).Read()
		require.NoError(t, err)
		n := len(f.Molecule.Atoms)
		s, c := math.Sincos(rng.Float64() * 2 * math.Pi)
		order := rng.Perm(n)
		var elements []molecule.Element
		var g molecule.Geometry
		for _, i := range order {
			elements = append(elements, f.Molecule.Atoms[i].Element)
			at := f.Geometry.At(i)
			off := func() float64 { return 0.02 * (2*rng.Float64() - 1) }
			g = append(g, c*at[0]-s*at[1]+5+off(), at[2]-3+off(), -(s*at[0]+c*at[1])+off())
		}
		// The axes are exchanged and one is inverted, which together is a rotation.
		m, _, err := xyz.Perceive(elements, g, e.charge)
		require.NoError(t, err, e.name)
		require.Equal(t, smiles.Key(f.Molecule), smiles.Key(m), e.name)
	}
}

func TestAtomsInOnePlace(t *testing.T) {
	_, err := xyz.NewReader(strings.NewReader("2\n\nC 0 0 0\nO 0.1 0 0\n"), xyz.Options{}).Read()
	require.ErrorContains(t, err, "atoms 1 (C) and 2 (O) are only 0.10 Å apart")
}

func TestCrowdedAtomLosesItsLongestBond(t *testing.T) {
	// A hydrogen between two oxygens, nearer to the first: water and hydroxide joined by a short hydrogen bond.
	file := "5\n\nO 0 0 0\nH 1.0 0 0\nO 2.1 0 0\nH -0.3 0.92 0\nH 2.4 0.92 0\n"
	f, err := xyz.NewReader(strings.NewReader(file), xyz.Options{Charge: -1}).Read()
	require.NoError(t, err)
	require.GreaterOrEqual(t, f.Molecule.BondBetween(0, 1), 0)
	require.Equal(t, -1, f.Molecule.BondBetween(1, 2))
	require.Equal(t, -1, f.Molecule.Atoms[2].Charge)
}

// Buckminsterfullerene, C60: the corners of a truncated icosahedron with edges of 1.42 Å; every carbon has one double bond.
func TestFullerene(t *testing.T) {
	golden := (1 + math.Sqrt(5)) / 2
	var g molecule.Geometry
	for _, corner := range [][3]float64{{0, 1, 3 * golden}, {1, 2 + golden, 2 * golden}, {golden, 2, 2*golden + 1}} {
		for signs := range 8 {
			at := corner
			for k := range at {
				if signs>>k&1 == 1 {
					at[k] = -at[k]
				}
			}
			if corner[0] == 0 && signs&1 == 1 {
				continue
			}
			for k := range 3 { // the cyclic permutations; edges of length 2
				g = append(g, 0.71*at[k], 0.71*at[(k+1)%3], 0.71*at[(k+2)%3])
			}
		}
	}
	carbon := make([]molecule.Element, 60)
	for i := range carbon {
		carbon[i] = 6
	}
	m, _, err := xyz.Perceive(carbon, g, 0)
	require.NoError(t, err)
	require.Len(t, m.Bonds, 90)
	doubles := make([]int, 60)
	for _, b := range m.Bonds {
		doubles[b.A] += b.Order - 1
		doubles[b.B] += b.Order - 1
	}
	for i, n := range doubles {
		require.Equal(t, 1, n, "double bonds at carbon %d", i+1)
	}
}

func BenchmarkPerceive(b *testing.B) {
	text, err := os.ReadFile("testdata/molecules.xyz")
	require.NoError(b, err)
	at := strings.Index(string(text), "caffeine")
	frame := string(text[strings.LastIndex(string(text[:at-1]), "\n")+1:])
	f, err := xyz.NewReader(strings.NewReader(frame), xyz.Options{}).Read()
	require.NoError(b, err)
	elements := make([]molecule.Element, len(f.Molecule.Atoms))
	for i, a := range f.Molecule.Atoms {
		elements[i] = a.Element
	}
	for b.Loop() {
		if _, _, err := xyz.Perceive(elements, f.Geometry, 0); err != nil {
			b.Fatal(err)
		}
	}
}
