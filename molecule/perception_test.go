package molecule_test

import (
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/molecule"
)

const (
	cubane        = "C12C3C4C1C5C2C3C45"
	dodecahedrane = "C12C3C4C5C1C6C7C2C8C3C9C4C%10C5C6C%11C7C8C9C%10%11"
	fullerene     = "c12c3c4c5c1c1c6c7c2c2c8c3c3c9c4c4c%10c5c5c1c1c6c6c%11c7c2c2c7c8c3c3c8c9c4c4c9c%10c5c5c1c1c6c6c%11c2c2c7c3c3c8c4c4c9c5c1c1c6c2c3c41"
)

// Ring sizes follow from the drawings; their number is bonds - atoms + parts (Euler).
func TestSmallestRings(t *testing.T) {
	for _, row := range []struct {
		name, smiles string
		sizes        map[int]int
	}{
		{"hexane", "CCCCCC", map[int]int{}},
		{"cyclopropane", "C1CC1", map[int]int{3: 1}},
		{"naphthalene", "c1ccc2ccccc2c1", map[int]int{6: 2}},
		{"norbornane", "C1CC2CCC1C2", map[int]int{5: 2}},
		{"bicyclo[2.2.2]octane", "C1CC2CCC1CC2", map[int]int{6: 2}},
		{"adamantane", "C1C2CC3CC1CC(C2)C3", map[int]int{6: 3}},
		{"cubane", cubane, map[int]int{4: 5}},
		{"dodecahedrane", dodecahedrane, map[int]int{5: 11}},
		{"fullerene", fullerene, map[int]int{5: 12, 6: 19}},
		{"spiro[4.5]decane", "C1CCC2(C1)CCCCC2", map[int]int{5: 1, 6: 1}},
		{"muscone", "CC1CCCCCCCCCCCCC(=O)C1", map[int]int{15: 1}},
		{"steroid", "C1CCC2C(C1)CCC3C2CCC4C3CCC4", map[int]int{5: 1, 6: 3}},
		{"18-crown-6", "C1COCCOCCOCCOCCOCCO1", map[int]int{18: 1}},
		{"[2.2]paracyclophane", "C1CC2=CC=C(CCC3=CC=C1C=C3)C=C2", map[int]int{6: 2, 12: 1}},
		{"two parts", "C1CC1.C1CCC1", map[int]int{3: 1, 4: 1}},
	} {
		m := parse(t, row.smiles)
		sizes := map[int]int{}
		for _, ring := range m.Rings() {
			sizes[len(ring)]++
			for k, atom := range ring {
				require.GreaterOrEqual(t, m.BondBetween(atom, ring[(k+1)%len(ring)]), 0, row.name)
			}
		}
		require.Equal(t, row.sizes, sizes, row.name)
		require.Len(t, m.Rings(), len(m.Bonds)-len(m.Atoms)+len(m.Fragments()), row.name)
	}
}

// Number of aromatic atoms by Hückel's rule as OpenSMILES 3.5 describes it; the compounds are the usual textbook examples.
func TestAromaticAtoms(t *testing.T) {
	for _, row := range []struct {
		name, smiles string
		atoms        int
	}{
		{"benzene", "C1=CC=CC=C1", 6},
		{"cyclobutadiene", "C1=CC=C1", 0},
		{"cyclooctatetraene", "C1=CC=CC=CC=C1", 0},
		{"cyclopentadiene", "C1C=CC=C1", 0},
		{"cyclopentadienide", "[CH-]1C=CC=C1", 5},
		{"tropylium", "[CH+]1C=CC=CC=C1", 7},
		{"cyclopropenylium", "[CH+]1C=C1", 3},
		{"cyclopentadienyl cation", "[CH+]1C=CC=C1", 0},
		{"pyrrole", "C1=CNC=C1", 5},
		{"furan", "C1=COC=C1", 5},
		{"thiophene", "C1=CSC=C1", 5},
		{"pyridine", "C1=CC=NC=C1", 6},
		{"imidazole", "C1=CN=CN1", 5},
		{"indole", "C1=CC=C2C(=C1)C=CN2", 9},
		{"azulene: the rim", "C1=CC=C2C=CC=C2C=C1", 10},
		{"naphthalene", "C1=CC=C2C=CC=CC2=C1", 10},
		{"biphenylene: two benzene rings", "C1=CC=C2C(=C1)C3=CC=CC=C32", 12},
		{"2-pyridone", "O=C1C=CC=CN1", 6},
		{"tropone", "O=C1C=CC=CC=C1", 7},
		{"p-benzoquinone", "O=C1C=CC(=O)C=C1", 0},
		{"fulvene", "C=C1C=CC=C1", 0},
		{"2H-isoindene", "C1=C2C=CC=CC2=CC1", 0},
		{"caffeine", "CN1C=NC2=C1C(=O)N(C(=O)N2C)C", 9},
		{"pyridine N-oxide, either drawing", "O=N1=CC=CC=C1", 6},
		{"borazine", "B1NBNBN1", 6},
		{"[18]annulene", "C1=CC=CC=CC=CC=CC=CC=CC=CC=C1", 18},
		{"fullerene", fullerene, 60},
		{"porphine: inner ring of 16 atoms with 18 electrons and two pyrroles, two C=C left over", "C1=CC2=CC3=CC=C(N3)C=C4C=CC(=N4)C=C5C=CC(=CC1=N2)N5", 20},
	} {
		atoms, bonds := parse(t, row.smiles).Aromaticity()
		count := 0
		for _, yes := range atoms {
			if yes {
				count++
			}
		}
		require.Equal(t, row.atoms, count, row.name)
		require.Len(t, bonds, len(parse(t, row.smiles).Bonds))
	}
}

// Classes of equivalent atoms, hydrogens included: the numbers of signals expected from the constitution (by inspection).
func TestSymmetryClasses(t *testing.T) {
	for _, row := range []struct {
		name, smiles string
		classes      int
	}{
		{"methane", "C", 2},
		{"ethane", "CC", 2},
		{"butane", "CCCC", 4},
		{"benzene", "c1ccccc1", 2},
		{"toluene", "Cc1ccccc1", 9},
		{"acetate", "CC(=O)[O-]", 4},
		{"nitrobenzene", "O=[N+]([O-])c1ccccc1", 9},
		{"cubane", cubane, 2},
		{"dodecahedrane", dodecahedrane, 2},
		{"fullerene", fullerene, 1},
		{"adamantane", "C1C2CC3CC1CC(C2)C3", 4},
		{"neopentane", "CC(C)(C)C", 3},
		{"two waters", "O.O", 2},
		{"water and heavy water", "O.[2H]O[2H]", 4},
		{"o-xylene in a fixed Kekulé structure", "CC1=C(C)C=CC=C1", 7},
		{"tetra-tert-butylmethane", "CC(C)(C)C(C(C)(C)C)(C(C)(C)C)C(C)(C)C", 4},
	} {
		m := parse(t, row.smiles)
		seen := map[int]bool{}
		for _, class := range m.SymmetryClasses() {
			seen[class] = true
		}
		require.Len(t, seen, row.classes, row.name)
	}
}

func TestRotatableBonds(t *testing.T) {
	for s, want := range map[string]int{
		"CC": 0, "CCC": 0, "CCCC": 1, "CCCCCC": 3, "CC(=O)NC": 1, "c1ccccc1-c1ccccc1": 1, "CC#CC": 0, "CCC#CCC": 0,
		"C1CCCCC1": 0, "CCO": 0, "COC": 0, "CC(C)Cc1ccc(cc1)C(C)C(=O)O": 4, "C=C=CCC": 1, "CC=CC": 0,
	} {
		require.Len(t, parse(t, s).RotatableBonds(), want, s)
	}
}

// Molar masses from the CRC Handbook of Chemistry and Physics (from memory), formulas in Hill order.
func TestFormulaAndMass(t *testing.T) {
	for _, row := range []struct {
		name, smiles, formula string
		mass                  float64
	}{
		{"water", "O", "H2O", 18.015},
		{"ethanol", "CCO", "C2H6O", 46.069},
		{"caffeine", "CN1C=NC2=C1C(=O)N(C(=O)N2C)C", "C8H10N4O2", 194.194},
		{"glucose", "OCC1OC(O)C(O)C(O)C1O", "C6H12O6", 180.156},
		{"sulfuric acid", "OS(=O)(=O)O", "H2O4S", 98.08},
		{"heavy water", "[2H]O[2H]", "H2O", 20.027},
		{"acetate", "CC(=O)[O-]", "C2H3O2-", 59.044},
		{"ammonium", "[NH4+]", "H4N+", 18.039},
		{"copper(II)", "[Cu+2]", "Cu+2", 63.546},
		{"muscone", "CC1CCCCCCCCCCCCC(=O)C1", "C16H30O", 238.415},
		{"bromine", "BrBr", "Br2", 159.808},
	} {
		m := parse(t, row.smiles)
		require.Equal(t, row.formula, m.Formula(), row.name)
		require.InDelta(t, row.mass, m.Mass(), 0.01, row.name)
		require.Len(t, m.Masses(), len(m.Atoms))
	}
}

func TestElementTables(t *testing.T) {
	last := 0.0
	inversions := 0
	for e := molecule.Element(1); e <= 118; e++ {
		require.Positive(t, e.Mass(), e)
		require.Equal(t, e, molecule.ElementBySymbol(e.String()))
		if e.Mass() < last {
			inversions++
		}
		last = e.Mass()
		if e <= 96 {
			require.InDelta(t, 1.4, e.CovalentRadius(), 1.25, e)
		} else {
			require.Zero(t, e.CovalentRadius(), e)
		}
	}
	// Ar-K, Co-Ni, Te-I, Th-Pa, U-Np, Pu-Am and a few of the heaviest, which have mass numbers of chance isotopes.
	require.LessOrEqual(t, inversions, 10)
	require.Zero(t, molecule.Element(0).Mass())
	require.Zero(t, molecule.Element(200).CovalentRadius())
	require.InDelta(t, 13.00335, molecule.Atom{Element: 6, Isotope: 13}.Mass(), 1e-5)
	require.Equal(t, 99.0, molecule.Atom{Element: 43, Isotope: 99}.Mass(), "the mass number where no exact mass is tabulated")
}
