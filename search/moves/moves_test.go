package moves_test

import (
	"math"
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/forcefield"
	"tarn/molecule"
	"tarn/molecule/embed"
	"tarn/molecule/smiles"
	"tarn/search/moves"
)

func prepare(t *testing.T, text string) (*molecule.Molecule, []float64, *moves.Set) {
	t.Helper()
	m, err := smiles.Parse(text)
	require.NoError(t, err)
	f, err := forcefield.NewMMFF94(m, forcefield.Options{})
	require.NoError(t, err)
	g, err := embed.Embed(t.Context(), m, f, rand.New(rand.NewPCG(7, 7)))
	require.NoError(t, err)
	return m, g, moves.Analyze(m)
}

// What can move, counted by hand on the structural formula.
func TestAnalyze(t *testing.T) {
	for _, row := range []struct {
		name, smiles                 string
		torsions, cranks, inversions int
	}{
		{"methane", "C", 0, 0, 0},
		{"ethane: methyl tops do nothing new", "CC", 0, 0, 0},
		{"butane", "CCCC", 1, 0, 0},
		{"ethanol: C-O", "CCO", 1, 0, 0},
		{"benzene is flat", "c1ccccc1", 0, 0, 0},
		{"2-butyne: one axis, two tops", "CC#CC", 0, 0, 0},
		{"hex-3-yne: the axis through the triple bond and two ethyls", "CCC#CCC", 1, 0, 0},
		{"acetonitrile", "CC#N", 0, 0, 0},
		{"propanenitrile", "CCC#N", 0, 0, 0},
		{"2,2-dimethylpropane: the top of three methyls counts", "CC(C)(C)C", 0, 0, 0},
		{"cyclopropane", "C1CC1", 0, 0, 0},
		{"cyclobutane: two diagonals", "C1CCC1", 0, 2, 0},
		{"cyclopentane: five pairs", "C1CCCC1", 0, 5, 0},
		{"cyclohexane: nine pairs", "C1CCCCC1", 0, 9, 0},
		{"cyclohexene: pairs that do not cut at the double bond", "C1CCCC=C1", 0, 3, 0},
		{"N-methylacetamide: the amide bond, planar nitrogen", "CC(=O)NC", 1, 0, 0},
		{"ethylamine", "CCN", 1, 0, 1},
		{"piperidine", "C1CCNCC1", 0, 9, 1},
		{"caffeine is flat", "CN1C=NC2=C1C(=O)N(C(=O)N2C)C", 0, 0, 0},
		{"glycine anhydride: the pairs that have a CH2 near", "O=C1CNC(=O)CN1", 0, 9, 0},
		{"biphenyl", "c1ccccc1-c1ccccc1", 1, 0, 0},
	} {
		t.Run(row.name, func(t *testing.T) {
			m, err := smiles.Parse(row.smiles)
			require.NoError(t, err)
			s := moves.Analyze(m)
			require.Len(t, s.Torsions, row.torsions, "torsions")
			require.Len(t, s.Cranks, row.cranks, "cranks")
			require.Len(t, s.Inversions, row.inversions, "inversions")
			require.Equal(t, row.torsions+row.cranks+row.inversions == 0, s.Rigid())
		})
	}
}

// Every move keeps bond lengths, is undone by its opposite, and preserves volume in Cartesian space.
func TestMovesKeepBondsAndVolume(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 4))
	for _, text := range []string{"CCCCO", "C1CCCCC1C", "CN1CCC(C)CC1", "C1CCCCCCCCC1", "C1CC2CCC1CC2", "CC#CCC(C)N"} {
		m, x, s := prepare(t, text)
		apply := map[string]func([]float64, float64){}
		for i := range s.Torsions {
			apply["torsion"] = s.Torsions[i].Rotate
		}
		if len(s.Cranks) > 0 {
			c := s.Cranks[rng.IntN(len(s.Cranks))]
			apply["crank"] = c.Rotate
			apply["flap"] = func(x []float64, _ float64) { c.Flap(x) }
		}
		for i := range s.Inversions {
			apply["inversion"] = func(x []float64, _ float64) { s.Inversions[i].Apply(x) }
		}
		for name, move := range apply {
			angle := rng.Float64()*2 - 1
			y := append([]float64(nil), x...)
			move(y, angle)
			require.NotEqual(t, x, y, "%s %s does something", text, name)
			for _, b := range m.Bonds {
				require.InDelta(t, molecule.Geometry(x).Distance(b.A, b.B), molecule.Geometry(y).Distance(b.A, b.B), 1e-9, "%s %s", text, name)
			}
			require.InDelta(t, 1, math.Abs(determinant(move, x, angle)), 1e-4, "%s %s keeps volume", text, name)
			move(y, -angle)
			require.InDeltaSlice(t, x, y, 1e-9, "%s %s undone", text, name)
		}
	}
}

// determinant is that of the Jacobian of a move, by central differences and elimination.
func determinant(move func([]float64, float64), x []float64, angle float64) float64 {
	const h = 1e-5
	n := len(x)
	a := make([][]float64, n)
	for j := range n {
		plus, minus := append([]float64(nil), x...), append([]float64(nil), x...)
		plus[j] += h
		minus[j] -= h
		move(plus, angle)
		move(minus, angle)
		a[j] = make([]float64, n)
		for i := range n {
			a[j][i] = (plus[i] - minus[i]) / (2 * h)
		}
	}
	det := 1.0
	for k := range n {
		p := k
		for i := k + 1; i < n; i++ {
			if math.Abs(a[i][k]) > math.Abs(a[p][k]) {
				p = i
			}
		}
		a[k], a[p] = a[p], a[k]
		det *= a[k][k]
		for i := k + 1; i < n; i++ {
			f := a[i][k] / a[k][k]
			for j := k; j < n; j++ {
				a[i][j] -= f * a[k][j]
			}
		}
	}
	return det
}

func TestTorsionTurnsTheAngle(t *testing.T) {
	_, x, s := prepare(t, "CCCC")
	torsion := s.Torsions[0]
	angle := func() float64 {
		return molecule.Geometry(x).Torsion(torsion.Ends[0], torsion.A, torsion.B, torsion.Ends[1])
	}
	before := angle()
	torsion.Rotate(x, 0.4)
	require.InDelta(t, 0.4, math.Abs(math.Remainder(angle()-before, 2*math.Pi)), 1e-9)
}

// An inverted centre would be a rejected quench: cranks must leave the arrangement at the ends of their axis alone.
func TestCrankKeepsHandedness(t *testing.T) {
	m, x, s := prepare(t, "CC1CCCC(C)CCCC1")
	volume := func(x []float64, atom int) float64 {
		n := m.Neighbors(atom)
		var v [3][3]float64
		for k := range 3 {
			for c := range 3 {
				v[k][c] = x[3*n[k].Atom+c] - x[3*n[3].Atom+c]
			}
		}
		return v[0][0]*(v[1][1]*v[2][2]-v[1][2]*v[2][1]) - v[0][1]*(v[1][0]*v[2][2]-v[1][2]*v[2][0]) + v[0][2]*(v[1][0]*v[2][1]-v[1][1]*v[2][0])
	}
	for _, c := range s.Cranks {
		for k := range 12 {
			y := append([]float64(nil), x...)
			c.Rotate(y, float64(k)*math.Pi/6)
			for atom := range m.Atoms {
				if len(m.Neighbors(atom)) == 4 {
					require.Equal(t, volume(x, atom) > 0, volume(y, atom) > 0, "atom %d, axis %d-%d", atom+1, c.A+1, c.B+1)
				}
			}
		}
	}
}

func TestRandomCluster(t *testing.T) {
	x := moves.RandomCluster(38, rand.New(rand.NewPCG(1, 1)))
	require.Len(t, x, 114)
	for i := range 38 {
		for j := range i {
			require.Greater(t, molecule.Geometry(x).Distance(i, j), 0.5)
		}
	}
	moved := append([]float64(nil), x...)
	moves.Resettle(moved, 2, rand.New(rand.NewPCG(1, 1)))
	changed := 0
	for i := range 38 {
		if moved[3*i] != x[3*i] {
			changed++
		}
	}
	require.Equal(t, 2, changed)
}
