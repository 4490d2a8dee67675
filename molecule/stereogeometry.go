package molecule

import (
	"fmt"
	"math"
)

// StereoError says that a geometry does not show the configuration asked for at an atom.
type StereoError struct {
	Atom int // index
	// Undecided says that the geometry shows neither configuration: a centre is nearly planar, a double bond twisted to
	// nearly 90°. Otherwise it shows the opposite one.
	Undecided bool
	Reason    string
}

func (e *StereoError) Error() string { return fmt.Sprintf("atom %d: %s", e.Atom+1, e.Reason) }

// Limits below which a geometry is taken to show no configuration.
const (
	minRelativeVolume = 0.1          // signed volume over that of a regular tetrahedron
	maxTwist          = math.Pi / 3  // of a double bond, away from 0 or π
	regularVolume     = 3.0792014357 // 16/(3√3): six times the volume of a regular tetrahedron of unit circumradius
)

// CheckStereo returns nil if the geometry shows the specified configuration of every centre and double bond that Stereo
// lists; otherwise a *StereoError for the first that differs or cannot be told. It returns another error if the geometry
// does not belong to the molecule.
func (m *Molecule) CheckStereo(g Geometry) error {
	if err := m.checkGeometry(g); err != nil {
		return err
	}
	stereo := m.Stereo()
	for _, c := range stereo.Centers {
		if !c.Specified {
			continue
		}
		clockwise, err := m.readCenter(c.Center, g)
		if err != nil {
			return err
		}
		if clockwise != c.Clockwise {
			return &StereoError{Atom: c.Atom, Reason: "the geometry shows the stereocentre inverted"}
		}
	}
	for _, b := range stereo.DoubleBonds {
		if !b.Specified {
			continue
		}
		cis, err := m.readDoubleBond(b.DoubleBond, g)
		if err != nil {
			return err
		}
		if cis != b.Cis {
			return &StereoError{Atom: b.A, Reason: fmt.Sprintf(
				"the geometry shows the other configuration of the double bond to atom %d", b.B+1)}
		}
	}
	return nil
}

// StereoFromGeometry returns the same molecule with the descriptors that a geometry shows, in place of those it had. It
// returns a *StereoError if the geometry shows neither configuration of a stereocentre or double bond.
func (m *Molecule) StereoFromGeometry(g Geometry) (*Molecule, error) {
	if err := m.checkGeometry(g); err != nil {
		return nil, err
	}
	possible := m.withStereo(nil, nil).Stereo()
	var centers []Center
	for _, c := range possible.Centers {
		clockwise, err := m.readCenter(c.Center, g)
		if err != nil {
			return nil, err
		}
		c.Clockwise = clockwise
		centers = append(centers, c.Center)
	}
	var doubleBonds []DoubleBond
	for _, b := range possible.DoubleBonds {
		cis, err := m.readDoubleBond(b.DoubleBond, g)
		if err != nil {
			return nil, err
		}
		b.Cis = cis
		doubleBonds = append(doubleBonds, b.DoubleBond)
	}
	return m.withStereo(centers, doubleBonds).withoutIdleStereo(), nil
}

// withoutIdleStereo drops the descriptors that make no difference.
func (m *Molecule) withoutIdleStereo() *Molecule {
	var centers []Center
	var doubleBonds []DoubleBond
	for _, c := range m.stereo().identity {
		if c.center != nil {
			centers = append(centers, c.asCenter())
		} else {
			doubleBonds = append(doubleBonds, c.asDoubleBond())
		}
	}
	return m.withStereo(centers, doubleBonds)
}

func (m *Molecule) checkGeometry(g Geometry) error {
	if len(g) != 3*len(m.Atoms) {
		return fmt.Errorf("the geometry has %d coordinates; %d atoms need %d", len(g), len(m.Atoms), 3*len(m.Atoms))
	}
	for i, x := range g {
		if math.IsNaN(x) || math.IsInf(x, 0) {
			return fmt.Errorf("a coordinate of atom %d is not a finite number", i/3+1)
		}
	}
	return nil
}

// readCenter tells whether the neighbours of a centre run clockwise seen from the first, by the signed volume of the
// tetrahedron that they span around the centre; the bond lengths do not matter.
func (m *Molecule) readCenter(c Center, g Geometry) (clockwise bool, err error) {
	bearers := [4]int{c.Atom, c.Atom, c.Atom, c.Atom}
	if ends, allene := m.alleneEnds(c.Atom); allene {
		for k, n := range c.Neighbors {
			bearers[k] = ends[0]
			if m.BondBetween(ends[0], n) < 0 {
				bearers[k] = ends[1]
			}
		}
	}
	var arms [4][3]float64
	lonePair := -1
	var total [3]float64
	for k, n := range c.Neighbors {
		if n == LonePair {
			lonePair = k
			continue
		}
		arm := sub(g.At(n), g.At(bearers[k]))
		length := norm(arm)
		for x := range arm {
			arm[x] /= max(length, math.SmallestNonzeroFloat32)
			total[x] += arm[x]
		}
		arms[k] = arm
	}
	if lonePair >= 0 {
		arms[lonePair] = sub([3]float64{}, total)
	}
	volume := dot(cross(sub(arms[1], arms[0]), sub(arms[2], arms[0])), sub(arms[3], arms[0]))
	if math.Abs(volume) < minRelativeVolume*regularVolume {
		return false, &StereoError{Atom: c.Atom, Undecided: true, Reason: "the stereocentre is nearly planar in the geometry"}
	}
	return volume > 0, nil
}

// readDoubleBond tells whether the reference neighbours lie on the same side, by their torsion angle.
func (m *Molecule) readDoubleBond(b DoubleBond, g Geometry) (cis bool, err error) {
	torsion := math.Abs(g.Torsion(b.RefA, b.A, b.B, b.RefB))
	if torsion > maxTwist && torsion < math.Pi-maxTwist {
		return false, &StereoError{Atom: b.A, Undecided: true, Reason: fmt.Sprintf(
			"the double bond to atom %d is twisted by %.0f° in the geometry", b.B+1, torsion*180/math.Pi)}
	}
	return torsion < math.Pi/2, nil
}
