package molecule_test

import (
	"strings"
	"testing"

	"github.com/stretchr/testify/require"
)

// SMILES and descriptors of well-known compounds, from memory of their registry entries and names; labels in the order of
// the atoms in the SMILES.
func TestLabelsOfKnownCompounds(t *testing.T) {
	for _, row := range []struct{ name, smiles, centers, doubleBonds string }{
		{"L-alanine (S)", "N[C@@H](C)C(=O)O", "S", ""},
		{"L-cysteine (R)", "N[C@@H](CS)C(=O)O", "R", ""},
		{"L-threonine (2S,3R)", "C[C@H]([C@@H](C(=O)O)N)O", "R S", ""},
		{"L-isoleucine (2S,3S)", "CC[C@H](C)[C@@H](C(=O)O)N", "S S", ""},
		{"L-tartaric acid (2R,3R)", "OC(=O)[C@H](O)[C@@H](O)C(=O)O", "R R", ""},
		{"aldehydo-D-glucose (2R,3S,4R,5R)", "OC[C@@H](O)[C@@H](O)[C@H](O)[C@@H](O)C=O", "R R S R", ""},
		{"(+)-limonene (R)", "CC1=CC[C@@H](CC1)C(=C)C", "R", ""},
		{"(-)-carvone (R)", "CC1=CC[C@H](CC1=O)C(=C)C", "R", ""},
		{"(-)-menthol (1R,2S,5R)", "C[C@@H]1CC[C@H]([C@@H](C1)O)C(C)C", "R S R", ""},
		{"(+)-camphor (1R,4R)", "C[C@@]12CC[C@@H](C1(C)C)CC2=O", "R R", ""},
		{"(-)-muscone (R)", "C[C@@H]1CCCCCCCCCCCCC(=O)C1", "R", ""},
		{"(+)-ibuprofen (S)", "C[C@@H](C1=CC=C(C=C1)CC(C)C)C(=O)O", "S", ""},
		{"(+)-naproxen (S)", "C[C@@H](c1ccc2cc(OC)ccc2c1)C(=O)O", "S", ""},
		{"benzylpenicillin (2S,5R,6R)", "CC1([C@@H](N2[C@H](S1)[C@@H](C2=O)NC(=O)Cc3ccccc3)C(=O)O)C", "S R R", ""},
		{"morphine (4R,4aR,7S,7aR,12bS)", "CN1CC[C@]23[C@@H]4[C@H]1CC5=C2C(=C(C=C5)O)O[C@H]3[C@H](C=C4)O", "S R R R S", ""},
		{
			"cholesterol (3S,8S,9S,10R,13R,14S,17R,20R)",
			"C[C@H](CCCC(C)C)[C@H]1CC[C@@H]2[C@@]1(CC[C@H]3[C@H]2CC=C4[C@@]3(CC[C@@H](C4)O)C)C", "R R S R S S R S", "",
		},
		{
			"quinine (R)-(1S,2S,4S,5R)", "COC1=CC2=C(C=CN=C2C=C1)[C@H]([C@@H]3C[C@@H]4CCN3C[C@@H]4C=C)O", "R S S S R", "",
		},
		{"fumaric acid (E)", "OC(=O)/C=C/C(=O)O", "", "E"},
		{"maleic acid (Z)", `OC(=O)/C=C\C(=O)O`, "", "Z"},
		{"geraniol (E)", `CC(C)=CCC\C(C)=C\CO`, "", "E"},
		{"acetaldehyde oxime (E)", `C/C=N/O`, "", "E"},
		{"cis-1,4-dimethylcyclohexane (1s,4s)", "C[C@@H]1CC[C@H](C)CC1", "s s", ""},
		{"trans-1,4-dimethylcyclohexane (1r,4r)", "C[C@@H]1CC[C@@H](C)CC1", "r r", ""},
		{"ethan-(1-2H)-ol, rule 2, by hand", "C[C@@H](O)[2H]", "S", ""},
		{"allene, by hand", "OC(Cl)=[C@]=C(C)F", "P", ""},
		{"(2Z,5E)-hepta-2,5-dien-4-ol: Z before E, rule 3, by hand", `C/C=C\[C@H](O)/C=C/C`, "R", "Z E"},
	} {
		labels := parse(t, row.smiles).Labels()
		require.Equal(t, row.centers, strings.Join(labels.Centers, " "), row.name)
		require.Equal(t, row.doubleBonds, strings.Join(labels.DoubleBonds, " "), row.name)
	}
}

// A mirror image has R and S exchanged; pseudoasymmetric centres and double bonds keep their labels (P-93.5.1.3).
func TestLabelsOfMirrorImages(t *testing.T) {
	for _, s := range []string{
		"N[C@@H](C)C(=O)O", "OC(=O)[C@H](O)[C@@H](O)C(=O)O", "C[C@@H]1CC[C@H](C)CC1", "C[C@H](O)[C@@H](F)[C@@H](O)C",
		"OC(Cl)=[C@]=C(C)F", "C/C=C/[C@H](O)C", "C[S@](=O)CC", "C[C@@]12CC[C@@H](C1(C)C)CC2=O",
	} {
		m := parse(t, s)
		exchange := strings.NewReplacer("R", "S", "S", "R", "M", "P", "P", "M")
		for i, label := range m.Labels().Centers {
			require.NotEmpty(t, label, s)
			require.Equal(t, exchange.Replace(label), m.Mirror().Labels().Centers[i], s)
		}
		require.Equal(t, m.Labels().DoubleBonds, m.Mirror().Labels().DoubleBonds, s)
	}
}

func TestPseudoasymmetricCenter(t *testing.T) {
	// 2,3,4-Trihydroxyglutaric acid: two meso forms with r and s at C3, two chiral forms in which C3 is no stereocentre.
	isomers, err := parse(t, "OC(=O)C(O)C(O)C(O)C(=O)O").Stereoisomers()
	require.NoError(t, err)
	seen := map[string]int{}
	for _, isomer := range isomers {
		labels := isomer.Labels().Centers
		seen[strings.Join(labels, " ")]++
	}
	require.Len(t, seen, 4)
	require.Equal(t, 1, seen["R R"])
	require.Equal(t, 1, seen["S S"])
	require.Equal(t, 1, seen["R r S"]+seen["S r R"])
	require.Equal(t, 1, seen["R s S"]+seen["S s R"])
}

func TestUnspecifiedCentersHaveNoLabel(t *testing.T) {
	require.Equal(t, []string{""}, parse(t, "CC(N)C(=O)O").Labels().Centers)
	require.Equal(t, []string{""}, parse(t, "CC=CF").Labels().DoubleBonds)
}
