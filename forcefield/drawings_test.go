package forcefield

import (
	"math/rand/v2"
	"slices"
	"testing"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"

	"tarn/forcefield/internal/sketch"
	"tarn/molecule"
)

// TestDrawingsOfOneMolecule draws groups in the ways that chemists do. Types of the first atoms and formal charges that the
// group shares follow J. Comput. Chem. 17, 490 (1996), Table III.
func TestDrawingsOfOneMolecule(t *testing.T) {
	for _, c := range []struct {
		name     string
		types    []int
		drawings [][2]string
	}{
		{"nitromethane", []int{1, 45, 32, 32}, [][2]string{{"CH3 N+ O- O", "1-2 2-3 2=4"}, {"CH3 N O O", "1-2 2=3 2=4"}, {"CH3 N+ O O-", "1-2 2=3 2-4"}}},
		{"pyridine oxide", []int{69, 32, 37, 37, 37, 37, 37}, [][2]string{
			{"N+ O- CH CH CH CH CH", "1-2 1=3 3-4 4=5 5-6 6=7 7-1"},
			{"N O CH CH CH CH CH", "1=2 1=3 3-4 4=5 5-6 6=7 7-1"},
			{"N+ O- CH CH CH CH CH", "1-2 1-3 3=4 4-5 5=6 6-7 7=1"},
		}},
		{"trimethylamine oxide", []int{68, 32, 1, 1, 1}, [][2]string{{"N+ O- CH3 CH3 CH3", "1-2 1-3 1-4 1-5"}, {"N O CH3 CH3 CH3", "1=2 1-3 1-4 1-5"}}},
		{"nitrone", []int{67, 32, 3, 1}, [][2]string{{"N+ O- CH2 CH3", "1-2 1=3 1-4"}, {"N O CH2 CH3", "1=2 1=3 1-4"}}},
		{"methyl azide", []int{1, 9, 53, 47}, [][2]string{{"CH3 N N+ N-", "1-2 2=3 3=4"}, {"CH3 N N N", "1-2 2=3 3#4"}, {"CH3 N- N+ N", "1-2 2-3 3#4"}}},
		{"diazomethane", []int{3, 53, 47}, [][2]string{{"CH2 N+ N-", "1=2 2=3"}, {"CH2 N N", "1=2 2#3"}, {"CH2- N+ N", "1-2 2#3"}}},
		{"methyl isonitrile", []int{1, 61, 60}, [][2]string{{"CH3 N+ C-", "1-2 2#3"}, {"CH3 N C", "1-2 2#3"}}},
		{"dimethyl sulfoxide", []int{1, 17, 7, 1}, [][2]string{{"CH3 S O CH3", "1-2 2=3 2-4"}, {"CH3 S+ O- CH3", "1-2 2-3 2-4"}}},
		{"dimethyl sulfone", []int{1, 18, 32, 32, 1}, [][2]string{
			{"CH3 S O O CH3", "1-2 2=3 2=4 2-5"}, {"CH3 S+2 O- O- CH3", "1-2 2-3 2-4 2-5"}, {"CH3 S+ O- O CH3", "1-2 2-3 2=4 2-5"},
		}},
		{"methanesulfonamide", []int{1, 18, 32, 32, 43}, [][2]string{{"CH3 S O O NH2", "1-2 2=3 2=4 2-5"}, {"CH3 S+2 O- O- NH2", "1-2 2-3 2-4 2-5"}}},
		{"sulfonamide ion", []int{1, 18, 32, 32, 62}, [][2]string{
			{"CH3 S O O NH-", "1-2 2=3 2=4 2-5"}, {"CH3 S+2 O- O- NH-", "1-2 2-3 2-4 2-5"}, {"CH3 S O O- NH", "1-2 2=3 2-4 2=5"},
		}},
		{"sulfoximide", []int{1, 18, 32, 48, 1}, [][2]string{{"CH3 S O NH CH3", "1-2 2=3 2=4 2-5"}, {"CH3 S+2 O- NH- CH3", "1-2 2-3 2-4 2-5"}}},
		{"sulfilimine", []int{1, 17, 43, 1}, [][2]string{{"CH3 S NH CH3", "1-2 2=3 2-4"}, {"CH3 S+ NH- CH3", "1-2 2-3 2-4"}}},
		{"sulfinate ion", []int{1, 73, 32, 32}, [][2]string{{"CH3 S O O-", "1-2 2=3 2-4"}, {"CH3 S+ O- O-", "1-2 2-3 2-4"}}},
		{"methyl phosphate", []int{1, 6, 25, 32, 32, 32}, [][2]string{
			{"CH3 O P O O- O-", "1-2 2-3 3=4 3-5 3-6"}, {"CH3 O P+ O- O- O-", "1-2 2-3 3-4 3-5 3-6"}, {"CH3 O P O- O O-", "1-2 2-3 3-4 3=5 3-6"},
		}},
		{"phosphine sulfide", []int{25, 72, 1, 1, 1}, [][2]string{{"P S CH3 CH3 CH3", "1=2 1-3 1-4 1-5"}, {"P+ S- CH3 CH3 CH3", "1-2 1-3 1-4 1-5"}}},
		{"phosphine imide", []int{25, 9, 1, 1, 1}, [][2]string{{"P NH CH3 CH3 CH3", "1=2 1-3 1-4 1-5"}, {"P+ NH- CH3 CH3 CH3", "1-2 1-3 1-4 1-5"}}},
		{"phosphine ylide", []int{25, 3, 1, 1, 1}, [][2]string{{"P CH2 CH3 CH3 CH3", "1=2 1-3 1-4 1-5"}, {"P+ CH2- CH3 CH3 CH3", "1-2 1-3 1-4 1-5"}}},
		{"phosphinamide ion", []int{1, 25, 32, 62, 1}, [][2]string{{"CH3 P O NH- CH3", "1-2 2=3 2-4 2-5"}, {"CH3 P+ O- NH- CH3", "1-2 2-3 2-4 2-5"}}},
		{"sulfur ylide", []int{1, 17, 3, 1}, [][2]string{{"CH3 S CH2 CH3", "1-2 2=3 2-4"}, {"CH3 S+ CH2- CH3", "1-2 2-3 2-4"}}},
		{"perchlorate", []int{77, 32, 32, 32, 32}, [][2]string{{"Cl O O O O-", "1=2 1=3 1=4 1-5"}, {"Cl+3 O- O- O- O-", "1-2 1-3 1-4 1-5"}}},
		{"nitrate", []int{45, 32, 32, 32}, [][2]string{{"N+ O O- O-", "1=2 1-3 1-4"}, {"N O O O-", "1=2 1=3 1-4"}}},
		{"acetate", []int{1, 41, 32, 32}, [][2]string{{"CH3 C O O-", "1-2 2=3 2-4"}, {"CH3 C O- O", "1-2 2-3 2=4"}}},
		{"acetamidinium", []int{1, 57, 55, 55}, [][2]string{{"CH3 C NH2+ NH2", "1-2 2=3 2-4"}, {"CH3 C NH2 NH2+", "1-2 2-3 2=4"}}},
		{"guanidinium", []int{57, 56, 56, 56}, [][2]string{{"C NH2+ NH2 NH2", "1=2 1-3 1-4"}, {"C NH2 NH2 NH2+", "1-2 1-3 1=4"}}},
		{"imidazolium", []int{81, 80, 81, 78, 78}, [][2]string{{"NH+ CH NH CH CH", "1=2 2-3 3-4 4=5 5-1"}, {"NH CH NH+ CH CH", "1-2 2=3 3-4 4=5 5-1"}}},
		{"tetrazolide", []int{76, 76, 76, 76, 78}, [][2]string{{"N- N N N CH", "1-2 2=3 3-4 4=5 5-1"}, {"N N N N- CH", "1-2 2=3 3-4 4-5 5=1"}}},
		{"naphthalene", []int{37, 37, 37, 37, 37, 37, 37, 37, 37, 37}, [][2]string{
			{"CH CH CH CH C CH CH CH CH C", "1=2 2-3 3=4 4-5 5=10 10-1 5-6 6=7 7-8 8=9 9-10"},
			{"CH CH CH CH C CH CH CH CH C", "1=2 2-3 3=4 4-5 5=6 10-1 5-10 6-7 7=8 8-9 9=10"},
			{"CH CH CH CH C CH CH CH CH C", "1-2 2=3 3-4 4=5 5-10 10=1 5-6 6=7 7-8 8=9 9-10"},
		}},
	} {
		t.Run(c.name, func(t *testing.T) {
			var first *MMFF94
			for n, d := range c.drawings {
				m := sketch.Molecule(t, d[0], d[1])
				f, err := NewMMFF94(m, Options{})
				require.NoError(t, err, "drawing %d", n+1)
				require.Equal(t, c.types, f.AtomTypes()[:len(c.types)], "drawing %d", n+1)
				if n == 0 {
					first = f
					continue
				}
				require.Equal(t, first.AtomTypes(), f.AtomTypes(), "drawing %d", n+1)
				// Equivalent atoms may trade places between drawings only if the charge is shared, which is the point.
				require.InDeltaSlice(t, first.PartialCharges(), f.PartialCharges(), 1e-12, "drawing %d", n+1)
				x := lattice(f.Atoms())
				require.InDelta(t, first.Energy(x, nil), f.Energy(x, nil), 1e-9, "drawing %d", n+1)
			}
		})
	}
}

// alternateSixRings returns the rings of six atoms in which single and double bonds alternate, as bond indices.
func alternateSixRings(m *molecule.Molecule) [][]int {
	var rings [][]int
	var walk func(path, bonds []int)
	walk = func(path, bonds []int) {
		for _, n := range m.Neighbors(path[len(path)-1]) {
			if m.Bonds[n.Bond].Order != 2-len(bonds)%2 {
				continue
			}
			switch {
			case len(path) == 6 && n.Atom == path[0]:
				rings = append(rings, append(slices.Clone(bonds), n.Bond))
			case len(path) < 6 && n.Atom > path[0] && !slices.Contains(path, n.Atom):
				walk(append(slices.Clone(path), n.Atom), append(slices.Clone(bonds), n.Bond))
			}
		}
	}
	for i := range m.Atoms {
		walk([]int{i}, nil)
	}
	return rings
}

// flipped returns the molecule with single and double bonds exchanged in one ring.
func flipped(t *testing.T, m *molecule.Molecule, ring []int) *molecule.Molecule {
	bonds := slices.Clone(m.Bonds)
	for _, b := range ring {
		bonds[b].Order = 3 - bonds[b].Order
	}
	other, err := molecule.New(m.Name, m.Atoms, bonds, nil, nil)
	require.NoError(t, err)
	return other
}

// TestKekuleStructures flips the aromatic six-rings of published molecules one after the other: nothing may change.
func TestKekuleStructures(t *testing.T) {
	flips := 0
	for _, p := range publishedChecks(t) {
		m := p.molecule(t)
		for range 3 {
			for _, ring := range alternateSixRings(m) {
				m = flipped(t, m, ring)
				flips++
				f, err := NewMMFF94(m, Options{})
				require.NoError(t, err, p.name)
				require.Equal(t, p.types, f.AtomTypes(), p.name)
				require.InDelta(t, p.energy, f.Energy(p.coordinates, nil), 1e-4, p.name)
				break
			}
		}
	}
	require.Greater(t, flips, 20)
}

// TestOrderOfAtoms renumbers atoms and bonds: types, charges and energy must follow.
func TestOrderOfAtoms(t *testing.T) {
	checks := publishedChecks(t)
	rapid.Check(t, func(rt *rapid.T) {
		p := checks[rapid.IntRange(0, len(checks)-1).Draw(rt, "molecule")]
		random := rand.New(rand.NewPCG(rapid.Uint64().Draw(rt, "seed"), 1))
		place := random.Perm(len(p.elements)) // old to new
		q := publishedMolecule{
			elements: make([]molecule.Element, len(place)), charges: make([]int, len(place)), types: make([]int, len(place)),
			partial: make([]float64, len(place)), coordinates: make([]float64, 3*len(place)),
		}
		for old, i := range place {
			q.elements[i], q.charges[i], q.types[i], q.partial[i] = p.elements[old], p.charges[old], p.types[old], p.partial[old]
			copy(q.coordinates[3*i:3*i+3], p.coordinates[3*old:3*old+3])
		}
		for _, b := range p.bonds {
			a, b := molecule.Bond{A: place[b.A], B: place[b.B], Order: b.Order}, b
			if random.IntN(2) == 1 {
				a.A, a.B = place[b.B], place[b.A]
			}
			q.bonds = append(q.bonds, a)
		}
		random.Shuffle(len(q.bonds), func(i, j int) { q.bonds[i], q.bonds[j] = q.bonds[j], q.bonds[i] })
		q.name, q.energy = p.name, p.energy
		f, err := NewMMFF94(q.molecule(t), Options{})
		require.NoError(rt, err, p.name)
		require.Equal(rt, q.types, f.AtomTypes(), p.name)
		require.InDeltaSlice(rt, q.partial, f.PartialCharges(), 1e-4, p.name)
		require.InDelta(rt, q.energy, f.Energy(q.coordinates, nil), 1e-4, p.name)
	})
}
