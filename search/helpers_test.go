package search

import (
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/molecule"
	"tarn/molecule/smiles"
)

func parse(t testing.TB, text string) *molecule.Molecule {
	t.Helper()
	m, err := smiles.Parse(text)
	require.NoError(t, err)
	return m
}
