package embed

import (
	"math"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/molecule"
)

// scene is a drawing of atoms in space: circles for rings, segments for bonds. Its bonds need not make chemical sense.
type scene struct {
	atoms []molecule.Atom
	bonds []molecule.Bond
	x     molecule.Geometry
}

type point = [3]float64

func (s *scene) atom(e molecule.Element, p point) int {
	s.atoms = append(s.atoms, molecule.Atom{Element: e})
	s.x = append(s.x, p[:]...)
	return len(s.atoms) - 1
}

func (s *scene) bond(a, b int) { s.bonds = append(s.bonds, molecule.Bond{A: a, B: b, Order: 1}) }

// ring adds a ring of n carbons with bonds of 1.5 Å around a centre in the plane of the axes u and v; ruffle moves its atoms
// up and down in turn.
func (s *scene) ring(n int, center, u, v point, ruffle float64) {
	radius := 0.75 / math.Sin(math.Pi/float64(n))
	normal := crossed(u, v)
	first := len(s.atoms)
	for i := range n {
		sin, cos := math.Sincos(2 * math.Pi * float64(i) / float64(n))
		up := ruffle * float64(1-2*(i%2))
		var p point
		for k := range 3 {
			p[k] = center[k] + radius*(cos*u[k]+sin*v[k]) + up*normal[k]
		}
		s.atom(carbon, p)
		if i > 0 {
			s.bond(first+i-1, first+i)
		}
	}
	s.bond(first+n-1, first)
}

func (s *scene) penetration(t *testing.T) error {
	t.Helper()
	m, err := molecule.New("", s.atoms, s.bonds, nil, nil)
	require.NoError(t, err)
	return newGraph(m).penetration(s.x)
}

var ex, ey, ez = point{1, 0, 0}, point{0, 1, 0}, point{0, 0, 1}

func TestLinkedRings(t *testing.T) {
	for _, c := range []struct {
		shift  float64 // of the second ring along x, Å
		linked bool
	}{{0.5, true}, {3, true}, {4.5, true}, {12, false}} {
		for _, ruffle := range []float64{0, 0.25} {
			var s scene
			s.ring(18, point{}, ex, ey, ruffle)
			s.ring(18, point{c.shift, 0.1, 0.1}, ex, ez, ruffle)
			err := s.penetration(t)
			if c.linked {
				require.ErrorContains(t, err, "passes through a ring of 18 atoms", "shift %v, ruffle %v", c.shift, ruffle)
			} else {
				require.NoError(t, err, "shift %v, ruffle %v", c.shift, ruffle)
			}
		}
	}
}

func TestSpearedRing(t *testing.T) {
	for _, c := range []struct {
		name    string
		p, q    point
		through bool
	}{
		{"through the middle", point{0, 0, -0.7}, point{0, 0, 0.7}, true},
		{"slanting, near the rim", point{0.9, 0, -0.7}, point{0.4, 0.5, 0.7}, true},
		{"above the ring", point{0, 0, 1.2}, point{0, 0, 2.7}, false},
		{"flat above the ring", point{-0.7, 0, 2}, point{0.7, 0, 2}, false},
		{"beside the ring", point{3, 0, -0.7}, point{3, 0, 0.7}, false},
	} {
		for _, ruffle := range []float64{0, 0.25} {
			var s scene
			s.ring(6, point{}, ex, ey, ruffle)
			s.bond(s.atom(carbon, c.p), s.atom(carbon, c.q))
			require.Equal(t, c.through, s.penetration(t) != nil, "%s, ruffle %v", c.name, ruffle)
		}
	}
}

// A substituent never passes through the ring that carries it by its first bond, and a hydrogen may point into a large ring.
func TestBondsIntoARing(t *testing.T) {
	var s scene
	s.ring(6, point{}, ex, ey, 0.25)
	s.bond(0, s.atom(carbon, point{-0.5, 0.1, -1}))
	require.NoError(t, s.penetration(t), "axial substituent leaning over the ring")

	for _, c := range []struct {
		end     molecule.Element
		through bool
	}{{hydrogen, false}, {carbon, true}} {
		var s scene
		s.ring(20, point{}, ex, ey, 0.25)
		inner := s.atom(carbon, point{3.4, 0, 0.8})
		s.bond(0, inner)
		s.bond(inner, s.atom(c.end, point{2.5, 0, -0.7}))
		require.Equal(t, c.through, s.penetration(t) != nil, "%v at the end", c.end)
	}
}

// The film follows a ring that is folded like the seam of a tennis ball; the bond lies in the hollow, cutting the fan over
// the centre of the ring.
func TestFilmOfAFoldedRing(t *testing.T) {
	const n = 24
	seam := func(angle float64) point { // a curve on a sphere of 4 Å
		return point{3.2*math.Cos(angle) + 0.8*math.Cos(3*angle), 3.2*math.Sin(angle) - 0.8*math.Sin(3*angle), 3.2 * math.Sin(2*angle)}
	}
	var s scene
	for i := range n {
		s.atom(carbon, seam(2*math.Pi*float64(i)/n))
		if i > 0 {
			s.bond(i-1, i)
		}
	}
	s.bond(n-1, 0)
	middle := len(s.atoms)
	s.bond(s.atom(carbon, point{0, 0, -0.75}), s.atom(carbon, point{0, 0, 0.75}))
	require.Error(t, s.penetration(t), "through the saddle point")
	copy(s.x[3*middle:], []float64{4.5, -0.7, 0, 4.5, 0.7, 0})
	require.NoError(t, s.penetration(t), "outside the seam")
}
