package parameters

import (
	"slices"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"
)

// TestRowCounts compares with the tables deposited with J. Comput. Chem. 17, 490-641 (1996), and Table III of J. Comput.
// Chem. 20, 720 (1999). Two differences are deliberate: the alias ZINC counts as a symbol, and the four unused types 83 to
// 86 of the charge table are left out.
func TestRowCounts(t *testing.T) {
	for table, rows := range map[string]int{
		"atoms": 95, "symbols": 212, "bonds": 493, "bond_elements": 58, "angles": 2342, "stretch_bends": 282,
		"stretch_bend_rows": 30, "out_of_planes": 117, "torsions": 926, "torsions_static": 42, "charges": 498,
	} {
		n := 0
		require.NoError(t, eachRow(table, func(*row) { n++ }))
		require.Equal(t, rows, n, table)
	}
	for _, planar := range []bool{false, true} {
		tables, err := Load(planar)
		require.NoError(t, err, "no row is listed twice")
		require.Len(t, tables.atoms, 95)
		require.Len(t, tables.bonds, 493)
		require.Len(t, tables.torsions, 926)
	}
}

// TestKeysAreCanonical checks that every row is stored in the one direction that look-ups use.
func TestKeysAreCanonical(t *testing.T) {
	canonical := map[string]func(k []int) bool{
		"bonds":             func(k []int) bool { return k[0] <= k[1] },
		"charges":           func(k []int) bool { return k[0] <= k[1] },
		"bond_elements":     func(k []int) bool { return k[0] <= k[1] },
		"angles":            func(k []int) bool { return k[0] <= k[2] },
		"stretch_bends":     func(k []int) bool { return k[0] <= k[2] },
		"stretch_bend_rows": func(k []int) bool { return k[0] <= k[2] },
		"out_of_planes":     func(k []int) bool { return slices.IsSorted(k[1:]) },
		"torsions":          func(k []int) bool { return k[1] < k[2] || k[1] == k[2] && k[0] <= k[3] },
		"torsions_static":   func(k []int) bool { return k[1] < k[2] || k[1] == k[2] && k[0] <= k[3] },
	}
	tables, err := Load(false)
	require.NoError(t, err)
	for table, ok := range canonical {
		require.NoError(t, eachRow(table, func(r *row) {
			line := r.line
			k := r.integers("-", 1+strings.Count(r.fields[0], "-"))
			require.True(t, ok(k), "%s, line %d: %v", table, line, k)
			if strings.HasSuffix(table, "rows") || strings.HasSuffix(table, "elements") {
				return
			}
			for _, atomType := range k {
				require.Contains(t, tables.atoms, max(atomType, 1), "%s, line %d: unknown type", table, line)
			}
		}))
	}
}

// TestSymbols checks that every type has a symbol, every symbol a type, and every hydrogen symbol a type of hydrogen.
func TestSymbols(t *testing.T) {
	tables, err := Load(false)
	require.NoError(t, err)
	used := map[int]bool{}
	for symbol, atomType := range tables.types {
		require.Contains(t, tables.atoms, atomType, symbol)
		used[atomType] = true
	}
	require.Len(t, used, 95)
	for parent, hydrogen := range tables.hydrogens {
		require.Contains(t, tables.types, parent)
		require.EqualValues(t, 1, tables.atoms[tables.types[hydrogen]].Element, "%s on %s", hydrogen, parent)
	}
	require.NotContains(t, tables.hydrogens, "CL", "hydrogen chloride has no parameters")
}

// TestLookUpIsSymmetric reads every interaction in both directions.
func TestLookUpIsSymmetric(t *testing.T) {
	tables, err := Load(false)
	require.NoError(t, err)
	var types []int
	for atomType := range tables.atoms {
		types = append(types, atomType)
	}
	slices.Sort(types)
	rapid.Check(t, func(t *rapid.T) {
		pick := rapid.SampledFrom(types)
		i, j, k, l := pick.Draw(t, "i"), pick.Draw(t, "j"), pick.Draw(t, "k"), pick.Draw(t, "l")
		first, second := rapid.IntRange(0, 1).Draw(t, "first"), rapid.IntRange(0, 1).Draw(t, "second")
		class := rapid.SampledFrom([][]int{{0, 3, 4}, {1, 5, 7}, {2, 6, 8}}[first+second]).Draw(t, "class")

		bond, _ := tables.Bond(first, i, j)
		reverseBond, _ := tables.Bond(first, j, i)
		require.Equal(t, bond, reverseBond)
		angle, _ := tables.Angle(class, i, j, k)
		reverseAngle, _ := tables.Angle(class, k, j, i)
		require.Equal(t, angle, reverseAngle)
		coupling, _ := tables.StretchBend(class, i, j, k, first, second)
		reverseCoupling, _ := tables.StretchBend(class, k, j, i, second, first)
		require.Equal(t, coupling, Coupling{reverseCoupling.Second, reverseCoupling.First})
		torsion, _ := tables.Torsion(class, i, j, k, l)
		reverseTorsion, _ := tables.Torsion(class, l, k, j, i)
		require.Equal(t, torsion, reverseTorsion)
		require.Equal(t, tables.OutOfPlane(j, [3]int{i, k, l}), tables.OutOfPlane(j, [3]int{l, i, k}))
		gain, _ := tables.ChargeIncrement(first, i, j)
		loss, _ := tables.ChargeIncrement(first, j, i)
		require.Equal(t, gain, -loss)
		distance, depth := tables.VanDerWaals(i, j)
		reverseDistance, reverseDepth := tables.VanDerWaals(j, i)
		require.Equal(t, distance, reverseDistance)
		require.InEpsilon(t, depth, reverseDepth, 1e-14)
	})
}

// TestStretchBendOrientation reads rows of the published table in which the two ends differ.
func TestStretchBendOrientation(t *testing.T) {
	tables, err := Load(false)
	require.NoError(t, err)
	c, ok := tables.StretchBend(0, 1, 1, 2, 0, 0)
	require.True(t, ok)
	require.Equal(t, Coupling{0.136, 0.197}, c)
	c, _ = tables.StretchBend(0, 2, 1, 1, 0, 0)
	require.Equal(t, Coupling{0.197, 0.136}, c)
	// Br–C–H is not listed; the rows of the periodic table are: H 0, C 1, Br 3.
	c, _ = tables.StretchBend(0, 13, 1, 5, 0, 0)
	require.Equal(t, Coupling{0.35, 0.05}, c)
}

// TestStaticVariant compares MMFF94s with J. Comput. Chem. 20, 720 (1999).
func TestStaticVariant(t *testing.T) {
	standard, err := Load(false)
	require.NoError(t, err)
	static, err := Load(true)
	require.NoError(t, err)
	for k, stiffness := range static.outOfPlanes {
		switch center := k >> 24 & 0xff; center {
		case 10:
			require.Equal(t, 0.015, stiffness)
		case 40:
			require.Equal(t, 0.030, stiffness)
		default:
			require.Equal(t, standard.outOfPlanes[k], stiffness)
		}
	}
	changed := 0
	for k, torsion := range static.torsions {
		if standard.torsions[k] != torsion {
			changed++
		}
	}
	require.LessOrEqual(t, changed, 42)
	require.Greater(t, changed, 35)
	torsion, ok := static.Torsion(0, 7, 3, 10, 28)
	require.True(t, ok)
	require.Equal(t, Torsion{1.168, 4.857, -0.341}, torsion)
}
