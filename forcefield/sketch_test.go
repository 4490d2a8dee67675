package forcefield

import (
	"regexp"
	"strconv"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/molecule"
)

var sketchAtom = regexp.MustCompile(`^([A-Z][a-z]?)(?:H(\d?))?([+-]\d?)?$`)

// sketch makes a molecule from a short notation: atoms such as "CH3 N+ O-", numbered from 1, and bonds such as "1-2 2=3".
// Hydrogens written at an atom are appended at the end; "H" alone is an atom.
func sketch(t testing.TB, atoms, bonds string) *molecule.Molecule {
	var list []molecule.Atom
	var joined []molecule.Bond
	var parents []int
	for i, s := range strings.Fields(atoms) {
		if strings.HasPrefix(s, "H") && (len(s) == 1 || strings.ContainsAny(s[1:2], "+-")) {
			s = "X" + s[1:] // hydrogen itself
		}
		parts := sketchAtom.FindStringSubmatch(s)
		require.NotNil(t, parts, "atom %s", s)
		a := molecule.Atom{Element: molecule.ElementBySymbol(parts[1])}
		if parts[1] == "X" {
			a.Element = 1
		}
		if parts[3] != "" {
			sign := parts[3]
			if len(sign) == 1 {
				sign += "1"
			}
			charge, err := strconv.Atoi(sign)
			require.NoError(t, err)
			a.Charge = charge
		}
		hydrogens := 0
		if strings.Contains(s[len(parts[1]):], "H") {
			hydrogens = 1
			if parts[2] != "" {
				hydrogens, _ = strconv.Atoi(parts[2])
			}
		}
		for range hydrogens {
			parents = append(parents, i)
		}
		list = append(list, a)
	}
	for _, f := range strings.Fields(bonds) {
		b, err := readBond(f)
		require.NoError(t, err)
		joined = append(joined, b)
	}
	for _, p := range parents {
		joined = append(joined, molecule.Bond{A: p, B: len(list), Order: 1})
		list = append(list, molecule.Atom{Element: 1})
	}
	m, err := molecule.New(atoms+" "+bonds, list, joined, nil, nil)
	require.NoError(t, err)
	return m
}
