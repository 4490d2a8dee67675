package forcefield

import (
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/forcefield/internal/sketch"
)

// TestOpenPoints holds the decisions on environments that neither the papers nor the validation suite settle;
// docs/forcefield.md gives the reasons. The types say what was decided. The bonds are plausible if their reference lengths
// come close to measured ones (Å; CRC Handbook of Chemistry and Physics, from memory).
func TestOpenPoints(t *testing.T) {
	for _, c := range []struct {
		name, atoms, bonds string
		types              []int
		i, j               int // bond to look at, from 1
		length, tolerance  float64
	}{
		{"plain hydrazone", "CH3 NH N CH CH3", "1-2 2-3 3=4 4-5", []int{1, 10, 9, 3, 1}, 3, 4, 1.28, 0.03},
		{"hydrazone of an amide", "NH2 N CH NH2", "1-2 2=3 3-4", []int{8, 9, 3, 40}, 2, 3, 1.28, 0.03},
		{"N on carbonyl and cyano", "CH3 C O NH C N", "1-2 2=3 2-4 4-5 5#6", []int{1, 3, 7, 43, 4, 42}, 5, 6, 1.16, 0.02},
		{"sulfilimine", "CH3 S NH CH3", "1-2 2=3 2-4", []int{1, 17, 43, 1}, 2, 3, 1.58, 0.12},
		{"phosphine imide", "P NH CH3 CH3 CH3", "1=2 1-3 1-4 1-5", []int{25, 9, 1, 1, 1}, 1, 2, 1.56, 0.08},
		{"pyrylium", "O+ CH CH CH CH CH", "1=2 2-3 3=4 4-5 5=6 6-1", []int{51, 3, 2, 2, 2, 2}, 1, 2, 1.30, 0.07},
		{"phosphabenzene", "P CH CH CH CH CH", "1=2 2-3 3=4 4-5 5=6 6-1", []int{75, 3, 2, 2, 2, 2}, 1, 2, 1.70, 0.05},
		{"2-iminopyridinium as drawn", "NH2+ C NH CH CH CH CH", "1=2 2-3 3-4 4=5 5-6 6=7 7-2", []int{55, 57, 55, 2, 2, 2, 2}, 1, 2, 1.33, 0.03},
		{"2-aminopyridinium", "NH2 C NH+ CH CH CH CH", "1-2 2=3 3-4 4=5 5-6 6=7 7-2", []int{40, 37, 58, 37, 37, 37, 37}, 2, 3, 1.35, 0.03},
		{"carbon dioxide", "C O O", "1=2 1=3", []int{4, 7, 7}, 1, 2, 1.162, 0.02},
		{"carbon disulfide", "C S S", "1=2 1=3", []int{4, 16, 16}, 1, 2, 1.553, 0.06},
		{"thiono acid", "CH3 C S OH", "1-2 2=3 2-4", []int{1, 3, 16, 6, 5, 5, 5, 21}, 4, 8, 0.97, 0.02},
		{"nitrous acid", "OH N O", "1-2 2=3", []int{6, 46, 7, 21}, 1, 2, 1.43, 0.03},
		{"nitric acid", "OH N+ O O-", "1-2 2=3 2-4", []int{6, 45, 32, 32, 21}, 1, 2, 1.41, 0.03},
		{"nitroxyl", "NH O", "1=2", []int{46, 7, 23}, 1, 3, 1.06, 0.06},
		{"sulfoximide with H on S", "SH O NH CH3", "1=2 1=3 1-4", []int{18, 32, 48, 1, 71, 28}, 1, 5, 1.35, 0.03},
		{"amine on C=P", "NH2 CH PH", "1-2 2=3", []int{40, 3, 75, 28, 28}, 2, 3, 1.67, 0.05},
		{"chlorine", "Cl Cl", "1-2", []int{12, 12}, 1, 2, 1.988, 0.05},
		{"bromine", "Br Br", "1-2", []int{13, 13}, 1, 2, 2.281, 0.05},
		{"iodine", "I I", "1-2", []int{14, 14}, 1, 2, 2.666, 0.05},
		{"iodine bromide", "I Br", "1-2", []int{14, 13}, 1, 2, 2.469, 0.05},
		{"difluorine", "F F", "1-2", []int{11, 11}, 1, 2, 1.412, 0.06},
		{"sulfur dichloride", "S Cl Cl", "1-2 1-3", []int{15, 12, 12}, 1, 2, 2.015, 0.03},
	} {
		t.Run(c.name, func(t *testing.T) {
			f, err := NewMMFF94(sketch.Molecule(t, c.atoms, c.bonds), Options{})
			require.NoError(t, err)
			require.Equal(t, c.types, f.AtomTypes()[:len(c.types)])
			require.InDelta(t, c.length, f.ReferenceBond(c.i-1, c.j-1), c.tolerance)
			requireFinite(t, f.Energy(lattice(f.Atoms()), nil))
		})
	}
}

// TestRefusedHydrogens lists parents for which no hydrogen type is known.
func TestRefusedHydrogens(t *testing.T) {
	for _, halide := range []string{"FH", "ClH", "BrH", "IH"} {
		_, err := NewMMFF94(sketch.Molecule(t, halide, ""), Options{})
		require.ErrorContains(t, err, "no type for hydrogen", halide)
	}
}
