package smiles

import (
	"errors"
	"strings"
	"testing"
	"time"

	"github.com/stretchr/testify/require"

	"tarn/molecule"
)

// The examples of the OpenSMILES specification (version 1.0 of 2016, chapters 3 and 4; recalled from memory): what is
// written on the left is the molecule described on the right.
func TestOpenSMILESExamples(t *testing.T) {
	for _, row := range []struct{ smiles, formula string }{
		{"[U]", "U"},
		{"[Pb]", "Pb"},
		{"[He]", "He"},
		{"[CH4]", "CH4"},
		{"[ClH]", "ClH"},
		{"[ClH1]", "ClH"},
		{"[Cl-]", "Cl-"},
		{"[OH1-]", "HO-"},
		{"[OH-1]", "HO-"},
		{"[Cu+2]", "Cu+2"},
		{"[Cu++]", "Cu+2"},
		{"[13CH4]", "CH4"},
		{"[2H+]", "H+"},
		{"[238U]", "U"},
		{"[CH4:2]", "CH4"},
		{"C", "CH4"},
		{"N", "H3N"},
		{"Cl", "ClH"},
		{"CC", "C2H6"},
		{"CCO", "C2H6O"},
		{"NCCCC", "C4H11N"},
		{"CCCCN", "C4H11N"},
		{"C=C", "C2H4"},
		{"C#N", "CHN"},
		{"CC#CC", "C4H6"},
		{"CCC=O", "C3H6O"},
		{"[Rh-](Cl)(Cl)(Cl)(Cl)$[Rh-](Cl)(Cl)(Cl)Cl", "Cl8Rh2-2"},
		{"C-C", "C2H6"},
		{"CCC(CC)CO", "C6H14O"},
		{"CC(C)C(=O)C(C)C", "C7H14O"},
		{"OCC(CCC)C(C(C)C)CCC", "C12H26O"},
		{"OS(=O)(=S)O", "H2O3S2"},
		{"C(C(C(C(C(C(C(C(C(C(C(C(C(C(C(C(C(C(C(C(C))))))))))))))))))))C", "C22H46"},
		{"C1CCCCC1", "C6H12"},
		{"N1CC2CCCC2CC1", "C8H15N"},
		{"C=1CCCCC=1", "C6H10"},
		{"C=1CCCCC1", "C6H10"},
		{"C1CCCCC=1", "C6H10"},
		{"C1CCCCC1C1CCCCC1", "C12H22"},
		{"C1CCCCC1C2CCCCC2", "C12H22"},
		{"C0CCCCC0", "C6H12"},
		{"C%25CCCCC%25", "C6H12"},
		{"C1CCCCC%01", "C6H12"},
		{"C12(CCCCC1)CCCCC2", "C11H20"},
		{"c1ccccc1", "C6H6"},
		{"C1=CC=CC=C1", "C6H6"},
		{"c1ccc2CCCc2c1", "C9H10"},
		{"C1=CC=CC(CCC2)=C12", "C9H10"},
		{"c1occc1", "C4H4O"},
		{"C1OC=CC=1", "C4H4O"},
		{"c1ccc1", "C4H4"},
		{"n1ccccc1", "C5H5N"},
		{"O=n1ccccc1", "C5H5NO"},
		{"[O-][n+]1ccccc1", "C5H5NO"},
		{"Cn1cccc1", "C5H7N"},
		{"[nH]1cccc1", "C4H5N"},
		{"c1ccc(cc1)-c2ccccc2", "C12H10"},
		{"[Na+].[Cl-]", "ClNa"},
		{"Oc1ccccc1.NCCO", "C8H13NO2"},
		{"c1cc(O.NCCO)ccc1", "C8H13NO2"},
		{"Oc1cc(.NCCO)ccc1", "C8H13NO2"},
		{"C1.C1", "C2H6"},
		{"C1.C12.C2", "C3H8"},
		{"c1c2c3c4cc1.Br2.Cl3.Cl4", "C6H3BrCl2"},
		{"N1NN1", "H3N3"},
		{"[12CH3][C@H](O)C", "C3H8O"},
	} {
		require.Equal(t, row.formula, parse(t, row.smiles).Formula(), row.smiles)
	}
}

// Pairs that the specification gives as the same molecule (chapters 3.5 to 3.9) or as different ones.
func TestOpenSMILESEquivalences(t *testing.T) {
	for _, same := range [][]string{
		{"CCO", "OCC", "C(O)C", "[CH3][CH2][OH]", "C-C-O", "C(C)O"},
		{"C1=CC=CC=C1", "c1ccccc1", "c:1:c:c:c:c:c1"},
		{"N[C@@H](C)C(=O)O", "N[C@H](C(=O)O)C", "[H][C@](N)(C)C(=O)O", "C[C@H](N)C(=O)O", "OC(=O)[C@@H](N)C", "N[C@TH2H](C)C(=O)O"},
		{"F[C@@](Cl)(Br)I", "F[C@](Cl)(I)Br", "Cl[C@](F)(Br)I"},
		{"N1C[C@H]1C", "N1C[C@@]1([H])C", "C[C@@H]1CN1"},
		{"F/C=C/F", `F\C=C\F`, `C(\F)=C/F`, `C(/F)=C\F`},
		{`F\C=C/F`, `F/C=C\F`, "C(/F)=C/F"},
		{"C/1=C/CCCCCC1", `C\1=C\CCCCCC1`},
		{"OC(Cl)=[C@]=C(C)F", "OC(Cl)=[C@AL1]=C(C)F", "ClC(O)=[C@@]=C(C)F"},
		{`F/C=C=C=C/F`, `F\C=C=C=C\F`},
	} {
		want := Key(parse(t, same[0]))
		for _, other := range same[1:] {
			require.Equal(t, want, Key(parse(t, other)), "%s and %s", same[0], other)
		}
	}
	for _, different := range [][2]string{
		{"N[C@@H](C)C(=O)O", "N[C@H](C)C(=O)O"},
		{"N[C@@H](C)C(=O)O", "NC(C)C(=O)O"},
		{"F/C=C/F", `F/C=C\F`},
		{"F/C=C/F", "FC=CF"},
		{"OC(Cl)=[C@]=C(C)F", "OC(Cl)=[C@@]=C(C)F"},
		{"[13CH4]", "C"},
		{"[NH4+]", "N"},
		{"C[C@H]1CC[C@H](C)CC1", "C[C@H]1CC[C@@H](C)CC1"},
		{"C[S@](=O)CC", "C[S@@](=O)CC"},
		{"c1ccncc1", "c1ccccc1"},
	} {
		require.NotEqual(t, Key(parse(t, different[0])), Key(parse(t, different[1])), "%v", different)
	}
}

// Customary ways to draw one compound (common practice).
func TestDrawingVariantsHaveOneKey(t *testing.T) {
	for name, drawings := range map[string][]string{
		"nitromethane":            {"C[N+](=O)[O-]", "C[N+]([O-])=O", "CN(=O)=O"},
		"pyridine N-oxide":        {"[O-][n+]1ccccc1", "O=n1ccccc1", "[O-][N+]1=CC=CC=C1", "O=N1=CC=CC=C1"},
		"trimethylamine oxide":    {"C[N+](C)(C)[O-]", "CN(C)(C)=O"},
		"methyl azide":            {"CN=[N+]=[N-]", "C[N-][N+]#N", "CN=N#N"},
		"diazomethane":            {"C=[N+]=[N-]", "[CH2-][N+]#N", "C=N#N"},
		"methyl isonitrile":       {"C[N+]#[C-]", "C[N]#[C]", "CN=[C]"},
		"DMSO":                    {"CS(C)=O", "C[S+](C)[O-]"},
		"chiral sulfoxide":        {"C[S@](=O)CC", "C[S@+]([O-])CC"},
		"dimethyl sulfone":        {"CS(C)(=O)=O", "C[S+2](C)([O-])[O-]", "C[S+](C)(=O)[O-]"},
		"phosphoric acid":         {"OP(O)(O)=O", "O[P+](O)(O)[O-]"},
		"perchloric acid":         {"OCl(=O)(=O)=O", "O[Cl+3]([O-])([O-])[O-]"},
		"carbon monoxide":         {"[C-]#[O+]", "[C]=O"},
		"nitrone":                 {"C[N+]([O-])=C", "CN(=O)=C"},
		"thioacetate":             {"CC(=O)[S-]", "CC([O-])=S"},
		"labelled acetate":        {"CC(=[18O])[O-]", "CC(=O)[18O-]"},
		"o-xylene":                {"CC1=C(C)C=CC=C1", "CC1=CC=CC=C1C", "Cc1ccccc1C"},
		"imidazolium":             {"CCn1cc[n+](C)c1", "CC[n+]1ccn(C)c1"},
		"methylcyclopentadienide": {"C[c-]1cccc1", "Cc1[cH-]ccc1", "CC1=CC=C[CH-]1"},
		"tropylium":               {"C[c+]1cccccc1", "Cc1c[cH+]cccc1"},
		"azulene":                 {"C1=CC2=CC=CC=CC2=C1", "c1ccc2cccc2cc1", "C1=CC=C2C=CC=C2C=C1"},
	} {
		want := Canonical(parse(t, drawings[0]))
		for _, drawing := range drawings[1:] {
			require.Equal(t, want, Canonical(parse(t, drawing)), "%s drawn %s", name, drawing)
		}
	}
}

func TestErrorsNameColumnAndReason(t *testing.T) {
	for _, row := range []struct {
		smiles string
		column int
		reason string
	}{
		{"", 1, "empty"},
		{"C(C", 2, "not closed"},
		{"CC)C", 3, "no branch is open"},
		{"C()C", 3, "empty"},
		{"(C)C", 1, "must follow an atom"},
		{"C((C))C", 3, "must follow an atom"},
		{"C=", 2, "leads to no atom"},
		{"C(=)C", 3, "leads to no atom"},
		{"=C", 1, "no atom before"},
		{"C=-C", 3, "two bond symbols"},
		{"C1CC", 2, "never closed"},
		{"C11", 3, "itself"},
		{"C12CC12", 7, "bonded already"},
		{"C=1CC#1", 7, "where it was opened"},
		{"C%1", 2, "two digits"},
		{"1CC", 1, "must follow an atom"},
		{"C(1CC1)", 3, "not the opening"},
		{"CX", 2, "no atom outside"},
		{"C?", 2, "no meaning"},
		{"[C", 1, "not closed"},
		{"[Xx]", 2, "names no element"},
		{"[C+16]", 3, "at most 15"},
		{"[C@SP1](C)(C)(C)C", 3, "square planar"},
		{"[Co@OH1](C)(C)(C)(C)(C)C", 4, "octahedral"},
		{"S[As@TB1](F)(Cl)(Br)N", 5, "trigonal bipyramidal"},
		{"[C@TH3](F)(Cl)(Br)I", 3, "1 or 2"},
		{"*C", 1, "wildcard"},
		{"C C", 2, "white space"},
		{".C", 1, "between two parts"},
		{"C.", 2, "must follow the dot"},
		{"C..C", 3, "between two parts"},
		{"C:C", 2, "aromatic atoms"},
		{"[HH]", 3, "molecular hydrogen"},
		{"C[C@](F)Cl", 2, "four neighbours"},
		{"C[C@@H2]F", 2, "2 hydrogens"},
		{`F/C(\F)=C/F`, 3, "same side"},
		{"C/C=C=C/C", 4, "even number"},
		{"C1CCC/C=C/1", 7, "ring of 6"},
		{"C1CC/C(F)=C(F)/1", 6, "ring of 5"},
		{"CC(C)(C)(C)C", 2, "neutral carbon"},
		{"CN(C)(C)C", 2, "[N+]"},
		{"CO(C)C", 2, "+1 would allow"},
		{"CF(C)", 2, "fluorine"},
		{"c1cccc1", 1, "aromatic ring"},
		{"n1cccc1", 1, "[nH]"},
		{"CCCéC", 4, "no meaning"},
	} {
		_, err := Parse(row.smiles)
		var syntax *SyntaxError
		require.ErrorAs(t, err, &syntax, row.smiles)
		require.Equal(t, row.column, syntax.Column, "%s: %v", row.smiles, err)
		require.Contains(t, syntax.Error(), row.reason, row.smiles)
	}
}

func TestErrorShowsCaret(t *testing.T) {
	_, err := Parse("CC(=O)Ox")
	require.EqualError(t, err, "SMILES, column 8: 'x' has no meaning here\n  CC(=O)Ox\n         ^")
	_, err = Parse(strings.Repeat("C", 500) + "x" + strings.Repeat("C", 500))
	lines := strings.Split(err.Error(), "\n")
	require.Len(t, lines, 3)
	require.Equal(t, 'x', []rune(lines[1])[len([]rune(lines[2]))-1], "the caret stands under the fault")
	require.Less(t, len(lines[1]), 100)
}

func TestValenceErrorsAreReachable(t *testing.T) {
	_, err := Parse("CC(C)(C)(C)C")
	var valence *molecule.ValenceError
	require.True(t, errors.As(err, &valence))
	require.Equal(t, 1, valence.Atom)
	_, err = Parse("Cc1cccc1")
	var kekule *molecule.KekuleError
	require.True(t, errors.As(err, &kekule))
	require.NotEmpty(t, kekule.Atoms)
}

func TestBombsAreRefusedEarly(t *testing.T) {
	for name, bomb := range map[string]string{
		"too long":          strings.Repeat("C", MaxLength+1),
		"too many atoms":    strings.Repeat("C", MaxAtoms+1),
		"100,000 branches":  strings.Repeat("C(", 50_000),
		"open branches":     strings.Repeat("C(", 4_000),
		"open rings":        strings.Repeat("C%11C%12", 1_999),
		"closed everything": strings.Repeat(")", 90_000),
		"nested brackets":   strings.Repeat("[", 90_000),
	} {
		begin := time.Now()
		_, err := Parse(bomb)
		require.Error(t, err, name)
		require.Less(t, time.Since(begin), 5*time.Second, name) // a hang, not a measurement
	}
	deep := strings.Repeat("C(", 2_400) + "C" + strings.Repeat(")C", 2_400)
	m := parse(t, deep)
	require.Equal(t, Key(m), Key(parse(t, Write(m))), "deep nesting is no problem of its own")
}

func TestReadsWhatStands(t *testing.T) {
	m := parse(t, "[15NH3+][C@@H]([13CH3])C([O-])=[18O]")
	require.Equal(t, 15, m.Atoms[0].Isotope)
	require.Equal(t, 1, m.Atoms[0].Charge)
	require.Equal(t, 0, m.Charge())
	require.Len(t, m.Atoms, 13)
	require.Equal(t, []molecule.Center{{Atom: 1, Neighbors: [4]int{0, 9, 2, 3}, Clockwise: true}}, m.Centers)
	require.Len(t, parse(t, "C.C.CO").Fragments(), 3)
	require.Equal(t, 1, parse(t, "[CH3]").Atoms[0].Radical)
	require.Equal(t, 7, parse(t, "[CH3:7]C").Atoms[0].Class)
	require.Empty(t, parse(t, "F/C=CF").DoubleBonds, "one mark alone specifies nothing")
}
