package molecule_test

import (
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/molecule"
)

func atom(symbol string, hydrogens int) molecule.DraftAtom {
	return molecule.DraftAtom{Atom: molecule.Atom{Element: molecule.ElementBySymbol(symbol)}, Hydrogens: hydrogens}
}

func TestHydrogensFollowTheAtomsThatCarryThem(t *testing.T) {
	d := molecule.Draft{
		Atoms: []molecule.DraftAtom{atom("C", molecule.FillValence), atom("O", molecule.FillValence), atom("H", 0)},
		Bonds: []molecule.DraftBond{{A: 0, B: 1, Order: 1}, {A: 0, B: 2, Order: 1}},
	}
	m, err := d.Build()
	require.NoError(t, err)
	require.Equal(t, "CH4O", m.Formula())
	require.Len(t, m.Atoms, 6)
	for i, parent := range map[int]int{3: 0, 4: 0, 5: 1} {
		require.Equal(t, parent, m.Neighbors(i)[0].Atom)
	}
}

// Hydrogens that a charge leaves room for: the isoelectronic rule (common practice).
func TestChargeAwareFilling(t *testing.T) {
	for _, row := range []struct {
		symbol                     string
		charge, hydrogens, radical int
	}{
		{"C", 0, 4, 0},
		{"C", 1, 3, 0},
		{"C", -1, 3, 0},
		{"N", 0, 3, 0},
		{"N", 1, 4, 0},
		{"N", -1, 2, 0},
		{"O", 0, 2, 0},
		{"O", 1, 3, 0},
		{"O", -1, 1, 0},
		{"B", 0, 3, 0},
		{"B", -1, 4, 0},
		{"S", 1, 3, 0},
		{"S", -1, 1, 0},
		{"P", 1, 4, 0},
		{"F", -1, 0, 0},
		{"Cl", 0, 1, 0},
		{"Si", 0, 4, 0},
		{"Na", 1, 0, 0},
		{"Fe", 0, 0, 0},
		{"C", 0, 3, 1},
		{"N", 0, 2, 1},
		{"C", 0, 2, 2},
	} {
		a := atom(row.symbol, molecule.FillValence)
		a.Charge, a.Radical = row.charge, row.radical
		m, err := (&molecule.Draft{Atoms: []molecule.DraftAtom{a}}).Build()
		require.NoError(t, err)
		require.Len(t, m.Atoms, 1+row.hydrogens, "%s%+d", row.symbol, row.charge)
	}
}

func TestImpliedHydrogenOfACenterIsResolved(t *testing.T) {
	d := molecule.Draft{
		Atoms: []molecule.DraftAtom{atom("C", 1), atom("F", 0), atom("Cl", 0), atom("Br", 0)},
		Bonds: []molecule.DraftBond{{A: 0, B: 1, Order: 1}, {A: 0, B: 2, Order: 1}, {A: 0, B: 3, Order: 1}},
		Centers: []molecule.Center{
			{Atom: 0, Neighbors: [4]int{molecule.ImplicitHydrogen, 1, 2, 3}, Clockwise: true},
		},
	}
	m, err := d.Build()
	require.NoError(t, err)
	require.Equal(t, [4]int{4, 1, 2, 3}, m.Centers[0].Neighbors)
	require.Equal(t, molecule.ImplicitHydrogen, d.Centers[0].Neighbors[0], "the draft stays as it is")
	d.Centers[0].Neighbors[1] = 2
	_, err = d.Build()
	require.ErrorContains(t, err, "four different neighbours")
}

func TestDraftErrorsNameTheAtom(t *testing.T) {
	for name, row := range map[string]struct {
		draft  molecule.Draft
		reason string
	}{
		"no atoms": {molecule.Draft{}, "no atoms"},
		"five bonds": {molecule.Draft{Atoms: []molecule.DraftAtom{{
			Atom: molecule.Atom{Element: 6}, Hydrogens: 5, Place: "line 5",
		}}}, "atom 1 (C, line 5): neutral carbon has bonds that add up to 5"},
		"missing atom": {molecule.Draft{
			Atoms: []molecule.DraftAtom{atom("C", -1)}, Bonds: []molecule.DraftBond{{A: 0, B: 7, Order: 1}},
		}, "bond 1 joins atoms 1 and 8"},
		"bonded to itself": {molecule.Draft{
			Atoms: []molecule.DraftAtom{atom("C", -1)}, Bonds: []molecule.DraftBond{{A: 0, B: 0, Order: 1}},
		}, "itself"},
		"no element": {molecule.Draft{Atoms: []molecule.DraftAtom{{}}}, "no element"},
		"bond order": {molecule.Draft{
			Atoms: []molecule.DraftAtom{atom("C", -1), atom("C", -1)}, Bonds: []molecule.DraftBond{{A: 0, B: 1, Order: 9}},
		}, "order 9"},
		"aromatic ring of five carbons": {molecule.Draft{
			Atoms: []molecule.DraftAtom{atom("C", -1), atom("C", -1), atom("C", -1), atom("C", -1), atom("C", -1)},
			Bonds: []molecule.DraftBond{{A: 0, B: 1}, {A: 1, B: 2}, {A: 2, B: 3}, {A: 3, B: 4}, {A: 4, B: 0}},
		}, "atom 1 (C)"},
	} {
		_, err := row.draft.Build()
		require.ErrorContains(t, err, row.reason, name)
	}
}

// Double bonds are placed where a chemist would draw them: three in every benzene ring that can have them.
func TestKekuleStructuresPreferBenzeneRings(t *testing.T) {
	for _, s := range []string{
		"c1ccc2c(c1)c1ccccc12", "c1ccc2c(c1)oc1ccccc12", "c1ccc2c(c1)[nH]c1ccccc12", "c1ccc2c(c1)Cc1ccccc12", "c1ccc(cc1)-c1ccccc1",
	} {
		m := parse(t, s)
		full := 0
		for _, ring := range m.Rings() {
			double := 0
			for k, i := range ring {
				if m.Bonds[m.BondBetween(i, ring[(k+1)%len(ring)])].Order == 2 {
					double++
				}
			}
			if len(ring) == 6 && double == 3 {
				full++
			}
		}
		require.Equal(t, 2, full, s)
	}
}
