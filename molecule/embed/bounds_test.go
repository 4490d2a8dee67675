package embed

import (
	"testing"

	"github.com/stretchr/testify/require"
)

// The bounds hold distances that experiment or plain trigonometry gives (r(C–C) and angles from handbooks, from memory).
func TestBoundsHoldKnownDistances(t *testing.T) {
	const slack = 0.04 // Å: the reference bond lengths of MMFF94 are a little shorter than those of relaxed molecules
	for _, c := range []struct {
		name, smiles string
		i, j         int
		distance     float64 // Å
	}{
		{"benzene, meta", "c1ccccc1", 0, 2, 2.420},                  // √3 · 1.397
		{"benzene, para", "c1ccccc1", 0, 3, 2.794},                  // 2 · 1.397
		{"cyclohexane, 1,3", "C1CCCCC1", 0, 2, 2.53},                // 1.536 Å, 111.4°
		{"cyclohexane chair, 1,4", "C1CCCCC1", 0, 3, 2.96},          // torsion 54.9°
		{"cyclohexane boat, 1,4", "C1CCCCC1", 0, 3, 2.61},           // torsion 0°
		{"butane, anti", "CCCC", 0, 3, 3.93},                        // 1.531 Å, 113.8°
		{"butane, gauche", "CCCC", 0, 3, 3.08},                      // torsion 63°
		{"(Z)-2-butene", `C/C=C\C`, 0, 3, 3.10},                     // 1.506 Å, 1.346 Å, 125.4°
		{"(E)-2-butene", "C/C=C/C", 0, 3, 3.92},                     // 1.508 Å, 1.347 Å, 123.8°
		{"allene", "C=C=C", 0, 2, 2.617},                            // 2 · 1.3084
		{"2-butyne", "CC#CC", 0, 3, 4.15},                           // 2 · 1.468 + 1.214
		{"norbornane, bridgeheads", "C1CC2CCC1C2", 2, 5, 2.28},      // C1–C7–C4 94°
		{"cubane, face diagonal", "C12C3C4C1C5C2C3C45", 0, 2, 2.22}, // √2 · 1.57
		{"N-methylacetamide, trans", "CC(=O)NC", 0, 4, 3.80},        // 1.520, 1.386, 1.469 Å; 114.1°, 119.7°
	} {
		m := parse(t, c.smiles)
		e, err := New(m, mmff(t, m))
		require.NoError(t, err)
		at := c.i*len(m.Atoms) + c.j
		require.GreaterOrEqual(t, c.distance, e.strict.lower[at]-slack, c.name)
		require.LessOrEqual(t, c.distance, e.strict.upper[at]+slack, c.name)
		require.Less(t, e.strict.upper[at]-e.strict.lower[at], 1.5, c.name)
	}
}
