package ctfile

import (
	"fmt"
	"math"
	"slices"

	"tarn/molecule"
)

// view is what a drawing (or the positions of the heavy atoms) shows of a molecule.
type view struct {
	*table
	m       *molecule.Molecule
	layout  layout
	centers []molecule.Center
	doubles []molecule.DoubleBond
}

// stereoFromDrawing returns the molecule with the descriptors that wedges and cis or trans arrangement show. Atoms that the
// file does not write have no position. Rules for wedges: IUPAC, Graphical representation of stereochemical configuration,
// Pure Appl. Chem. 78, 1897 (2006), ST-1.
func (t *table) stereoFromDrawing(m *molecule.Molecule, l layout) (*molecule.Molecule, error) {
	v := &view{table: t, m: m, layout: l}
	// A centre may become one only when others are known (pseudoasymmetric atoms), so it is looked at again.
	seen, bearers := map[[2]int]bool{}, map[int]bool{}
	for again := true; again; {
		again = false
		stereo := v.m.Stereo()
		for _, c := range stereo.Centers {
			if seen[[2]int{c.Atom, -1}] {
				continue
			}
			seen[[2]int{c.Atom, -1}], again = true, true
			bearers[c.Atom] = true
			if ends, ok := v.alleneEnds(c.Center); ok {
				bearers[ends[0]], bearers[ends[1]] = true, true
				v.allene(c.Center, ends)
				continue
			}
			v.center(c.Center)
		}
		for _, d := range stereo.DoubleBonds {
			if !seen[[2]int{d.A, d.B}] {
				seen[[2]int{d.A, d.B}], again = true, true
				v.doubleBond(d.DoubleBond)
			}
		}
		var err error
		if v.m, err = molecule.New(m.Name, m.Atoms, m.Bonds, slices.Clone(v.centers), slices.Clone(v.doubles)); err != nil {
			return nil, err
		}
	}
	for i, b := range t.bonds {
		if l == flat && (b.direction == wedge || b.direction == hash) && !bearers[b.a] {
			t.note(fmt.Sprintf("the wedge of bond %d begins at atom %d, which is no stereocentre, and says nothing", i+1, b.a+1))
		}
	}
	return v.m, nil
}

func (v *view) placed(atom int) bool { return atom >= 0 && atom < len(v.atoms) }

// arrow returns the direction from one atom to a neighbour: unit length in the plane for a drawing, where a wedge that
// begins at the atom adds the third dimension.
func (v *view) arrow(from, to int) [3]float64 {
	a, b := v.atoms[from].position, v.atoms[to].position
	d := unit(minus(b, a))
	if v.layout == flat {
		d[2] = float64(v.mark(from, to))
	}
	return d
}

// mark is +1 for a wedge from one atom to another, -1 for a hash.
func (v *view) mark(from, to int) int {
	for _, b := range v.bonds {
		if b.a == from && b.b == to {
			switch b.direction {
			case wedge:
				return 1
			case hash:
				return -1
			}
		}
	}
	return 0
}

// undecided tells whether a wavy bond begins at an atom.
func (v *view) undecided(atom int) bool {
	for _, b := range v.bonds {
		if b.a == atom && b.kind == 1 && b.direction == either {
			return true
		}
	}
	return false
}

func (v *view) center(c molecule.Center) {
	if !v.placed(c.Atom) || v.layout == flat && v.undecided(c.Atom) {
		return
	}
	var arrows [4][3]float64
	unseen, marks, up := -1, 0, 0
	for k, n := range c.Neighbors {
		if !v.placed(n) {
			if unseen >= 0 {
				return
			}
			unseen = k
			continue
		}
		arrows[k] = v.arrow(c.Atom, n)
		if z := v.mark(c.Atom, n); z != 0 && v.layout == flat {
			marks++
			up += z
		}
	}
	if v.layout == flat && marks == 0 {
		return
	}
	if unseen >= 0 {
		if v.layout == flat && marks == 1 && v.reentrant(arrows, unseen) {
			v.note(fmt.Sprintf("the wedge at atom %d lies between two bonds on one side, which can be read either way; "+
				"the centre is left unspecified", c.Atom+1))
			return
		}
		var sum [3]float64
		for _, a := range arrows {
			sum = plus(sum, a)
		}
		arrows[unseen] = times(-1, sum)
		if v.layout == flat && (up == marks || up == -marks) {
			// All marks point one way: the three bonds turn as drawn, the unseen neighbour lies on the other side.
			for k := range arrows {
				arrows[k][2] = 0
			}
			arrows[unseen] = [3]float64{0, 0, -float64(up)}
		}
	}
	v.decide(c, arrows)
}

// decide adds a centre with the sense in which its four neighbours turn: clockwise seen from the first if the tetrahedron
// has a positive volume.
func (v *view) decide(c molecule.Center, p [4][3]float64) {
	volume := dot(minus(p[1], p[0]), cross(minus(p[2], p[0]), minus(p[3], p[0])))
	if math.Abs(volume) < 0.05 {
		v.note(fmt.Sprintf("the bonds around atom %d do not show its configuration; the centre is left unspecified", c.Atom+1))
		return
	}
	c.Clockwise = volume > 0
	v.centers = append(v.centers, c)
}

// reentrant tells whether the three bonds seen lie within less than half a turn with the marked one in the middle.
func (v *view) reentrant(arrows [4][3]float64, unseen int) bool {
	var outer [][3]float64
	var middle [3]float64
	for k, a := range arrows {
		switch {
		case k == unseen:
		case a[2] != 0:
			middle = a
		default:
			outer = append(outer, a)
		}
	}
	// The sum of the outer two points into the angle between them that is less than half a turn.
	inward := plus(outer[0], outer[1])
	off := func(a [3]float64) float64 { return math.Abs(cross(inward, a)[2]) }
	return norm(inward) > 0.1 && inward[0]*middle[0]+inward[1]*middle[1] > 0 && off(middle) < off(outer[0])
}
