package molecule_test

import (
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/molecule"
	"tarn/molecule/smiles"
)

func parse(t *testing.T, s string) *molecule.Molecule {
	t.Helper()
	m, err := smiles.Parse(s)
	require.NoError(t, err, s)
	return m
}

// Numbers of stereoisomers as in textbooks of organic stereochemistry (from memory: Eliel and Wilen, Stereochemistry of
// Organic Compounds, 1994, chapters 3, 9, 11 and 14) or by counting, as the note says.
func TestStereoisomerCounts(t *testing.T) {
	for _, row := range []struct {
		name, smiles string
		count        int
	}{
		{"bromochlorofluoromethane", "FC(Cl)Br", 2},
		{"propane: none", "CCC", 1},
		{"isobutane: none", "CC(C)C", 1},
		{"tartaric acid: two enantiomers, meso", "OC(=O)C(O)C(O)C(=O)O", 3},
		{"2,3,4-trihydroxyglutaric acid: two enantiomers, two pseudoasymmetric", "OC(=O)C(O)C(O)C(O)C(=O)O", 4},
		{"1,2-dimethylcyclohexane: cis, two trans", "CC1CCCCC1C", 3},
		{"1,3-dimethylcyclohexane", "CC1CCCC(C)C1", 3},
		{"1,4-dimethylcyclohexane: cis, trans", "CC1CCC(C)CC1", 2},
		{"1,3-dimethylcyclobutane: cis, trans", "CC1CC(C)C1", 2},
		{"1,2-dimethylcyclopropane", "CC1CC1C", 3},
		{"1,3,5-trimethylcyclohexane: two", "CC1CC(C)CC(C)C1", 2},
		{"inositol: seven achiral and a pair", "OC1C(O)C(O)C(O)C(O)C1O", 9},
		{"1,2,3,4,5,6-hexachlorocyclohexane: like inositol", "ClC1C(Cl)C(Cl)C(Cl)C(Cl)C1Cl", 9},
		{"2-butene", "CC=CC", 2},
		{"2,4-hexadiene: EE, EZ, ZZ", "CC=CC=CC", 3},
		{"2-methyl-2-butene: none", "CC=C(C)C", 1},
		{"3-penten-2-ol: two by two", "CC=CC(C)O", 4},
		{"1-methyl-4-ethylidenecyclohexane: axial, a pair", "CC=C1CCC(C)CC1", 2},
		{"2,3-pentadiene: chiral axis", "CC=C=CC", 2},
		{"2,3,4-hexatriene: cis, trans", "CC=C=C=CC", 2},
		{"cyclooctene: cis, trans (its chiral plane is a conformation)", "C1=CCCCCCC1", 2},
		{"cyclohexene", "C1=CCCCC1", 1},
		{"acetaldoxime", "CC=NO", 2},
		{"acetone oxime", "CC(C)=NO", 1},
		{"ethyl methyl sulfoxide", "CCS(C)=O", 2},
		{"dimethyl sulfoxide", "CS(C)=O", 1},
		{"ethyl methyl sulfone", "CCS(C)(=O)=O", 1},
		{"S-ethyl-S-methylsulfoximide", "CCS(C)(=O)=N", 2},
		{"ethyl methyl propyl sulfonium", "CC[S+](C)CCC", 2},
		{"ethyl methyl phenyl phosphine", "CCP(C)c1ccccc1", 2},
		{"ethyl methyl phosphate: proton exchanged", "CCOP(=O)(O)OC", 1},
		{"ethyl methyl phosphate anion: resonance", "CCOP(=O)([O-])OC", 1},
		{"ethyl methyl phenyl phosphate", "CCOP(=O)(OC)Oc1ccccc1", 2},
		{"ethylmethylpropylamine inverts", "CCN(C)CCC", 1},
		{"allyl benzyl methyl phenyl ammonium", "C=CC[N+](C)(Cc1ccccc1)c1ccccc1", 2},
		{"1,2-dimethylaziridine", "CC1CN1C", 4},
		{"norbornane", "C1CC2CCC1C2", 1},
		{"2-norbornanol: endo, exo", "OC1CC2CCC1C2", 4},
		{"camphor: the cage couples two centres", "CC1(C)C2CCC1(C)C(=O)C2", 2},
		{"borneol and isoborneol", "CC1(C)C2CCC1(C)C(O)C2", 4},
		{"adamantane", "C1C2CC3CC1CC(C2)C3", 1},
		{"cubane", "C12C3C4C1C5C2C3C45", 1},
		{"quinuclidine", "C1CN2CCC1CC2", 1},
		{"decalin: cis, trans", "C1CCC2CCCCC2C1", 2},
		{"menthol", "CC1CCC(C(C)C)C(O)C1", 8},
		{"limonene", "CC1=CCC(CC1)C(C)=C", 2},
		{"muscone", "CC1CCCCCCCCCCCCC(=O)C1", 2},
		{"glucopyranose", "OCC1OC(O)C(O)C(O)C1O", 32},
		{"spiro[4.4]nonane-1,6-diol: three chiral pairs by counting, of which two are C2", "OC1CCCC12CCCC2O", 6},
	} {
		isomers, err := parse(t, row.smiles).Stereoisomers()
		require.NoError(t, err, row.name)
		require.Len(t, isomers, row.count, row.name)
		keys := map[string]bool{}
		for _, isomer := range isomers {
			require.Zero(t, isomer.Stereo().Unspecified(), row.name)
			keys[smiles.Key(isomer)] = true
		}
		require.Len(t, keys, row.count, "%s: keys differ", row.name)
	}
}

func TestStereoisomersRefuseTooMany(t *testing.T) {
	_, err := parse(t, "OCC1OC(OC2C(CO)OC(O)C(O)C2O)C(O)C(O)C1OC1OC(CO)C(O)C(O)C1O").Stereoisomers()
	require.ErrorContains(t, err, "at most 12")
}

func TestMirrorImages(t *testing.T) {
	for _, row := range []struct {
		name, smiles string
		chiral       bool
	}{
		{"L-alanine", "N[C@@H](C)C(=O)O", true},
		{"meso-tartaric acid", "O[C@H](C(=O)O)[C@@H](O)C(=O)O", false},
		{"D- or L-tartaric acid", "O[C@@H](C(=O)O)[C@@H](O)C(=O)O", true},
		{"cis-1,2-dimethylcyclohexane", "C[C@H]1CCCC[C@H]1C", false},
		{"trans-1,2-dimethylcyclohexane", "C[C@H]1CCCC[C@@H]1C", true},
		{"trans-1,4-dimethylcyclohexane", "C[C@H]1CC[C@@H](C)CC1", false},
		{"2,3-pentadiene", "CC=[C@]=CC", true},
		{"(E)-2-butene", "C/C=C/C", false},
	} {
		m := parse(t, row.smiles)
		require.Equal(t, !row.chiral, m.Same(m.Mirror()), row.name)
		require.True(t, m.Same(m.Mirror().Mirror()), row.name)
		require.Equal(t, row.chiral, smiles.Key(m) != smiles.Key(m.Mirror()), row.name)
	}
}

func TestDescriptorsThatMakeNoDifferenceAreNotListed(t *testing.T) {
	for _, row := range [][2]string{
		{"C[C@H](C)C", "CC(C)C"}, {"C[C@@H]1CCCCC1", "CC1CCCCC1"}, {"C/C=C(/C)C", "CC=C(C)C"}, {"CCC[N@@](CC)C", "CCCN(CC)C"},
	} {
		require.Equal(t, smiles.Key(parse(t, row[1])), smiles.Key(parse(t, row[0])), row[0])
		require.Empty(t, parse(t, row[0]).Stereo().Centers)
	}
}
