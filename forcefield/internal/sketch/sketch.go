// Package sketch makes molecules for tests from a short notation.
package sketch

import (
	"fmt"
	"regexp"
	"strconv"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/molecule"
)

var atomPattern = regexp.MustCompile(`^([A-Z][a-z]?)(?:H(\d?))?([+-]\d?)?$`)

// Molecule makes a molecule from atoms such as "CH3 N+ O-", numbered from 1, and bonds such as "1-2 2=3". Hydrogens written
// at an atom are appended at the end; "H" or "H+" is an atom of its own.
func Molecule(t testing.TB, atoms, bonds string) *molecule.Molecule {
	t.Helper()
	var list []molecule.Atom
	var joined []molecule.Bond
	var parents []int
	for i, s := range strings.Fields(atoms) {
		a, hydrogens := atom(t, s)
		list = append(list, a)
		for range hydrogens {
			parents = append(parents, i)
		}
	}
	for _, f := range strings.Fields(bonds) {
		b, err := Bond(f)
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

func atom(t testing.TB, s string) (a molecule.Atom, hydrogens int) {
	switch s {
	case "H":
		return molecule.Atom{Element: 1}, 0
	case "H+":
		return molecule.Atom{Element: 1, Charge: 1}, 0
	}
	parts := atomPattern.FindStringSubmatch(s)
	require.NotNil(t, parts, "atom %s", s)
	a.Element = molecule.ElementBySymbol(parts[1])
	require.NotZero(t, a.Element, "atom %s", s)
	if strings.Contains(s[len(parts[1]):], "H") {
		hydrogens = 1
		if parts[2] != "" {
			hydrogens = number(t, parts[2])
		}
	}
	if sign := parts[3]; sign != "" {
		if len(sign) == 1 {
			sign += "1"
		}
		a.Charge = number(t, sign)
	}
	return a, hydrogens
}

func number(t testing.TB, s string) int {
	n, err := strconv.Atoi(s)
	require.NoError(t, err)
	return n
}

// Bond reads "1-2", "1=2" or "1#2", atom numbers from 1.
func Bond(s string) (molecule.Bond, error) {
	at := strings.IndexAny(s, "-=#")
	if at < 0 {
		return molecule.Bond{}, fmt.Errorf("%q is no bond", s)
	}
	var a, b int
	_, err := fmt.Sscan(s[:at]+" "+s[at+1:], &a, &b)
	return molecule.Bond{A: a - 1, B: b - 1, Order: 1 + strings.Index("-=#", s[at:at+1])}, err
}
