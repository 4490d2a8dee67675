package molecule

import (
	"fmt"
	"slices"
)

// maxOpenUnits bounds the unspecified centres and double bonds of which Stereoisomers lists all combinations.
const maxOpenUnits = 12

// Stereoisomers returns the distinct molecules that specify every centre and double bond that the molecule leaves open,
// in a fixed order; the molecule itself if it leaves none. Each keeps only descriptors that make a difference. It returns
// an error if more than twelve are open.
func (m *Molecule) Stereoisomers() ([]*Molecule, error) {
	p := m.stereo()
	var open []int // units
	for _, c := range p.candidates {
		if c.element.value == unspecified && !slices.Contains(open, c.unit) {
			open = append(open, c.unit)
		}
	}
	if len(open) == 0 {
		return []*Molecule{m}, nil
	}
	if len(open) > maxOpenUnits {
		return nil, fmt.Errorf("%d stereocentres and double bonds are unspecified; at most %d are combined, specify some of them",
			len(open), maxOpenUnits)
	}
	var isomers []*Molecule
	for combination := range 1 << len(open) {
		isomer := m.completed(p, open, combination).withoutIdleStereo()
		if !slices.ContainsFunc(isomers, isomer.Same) {
			isomers = append(isomers, isomer)
		}
	}
	return isomers, nil
}

// completed returns the molecule with unit number k of open clockwise if bit k of combination is set.
func (m *Molecule) completed(p *stereoPerception, open []int, combination int) *Molecule {
	var centers []Center
	var doubleBonds []DoubleBond
	for i, c := range p.candidates {
		if c.element.value == unspecified {
			set := combination>>slices.Index(open, c.unit)&1 == 1
			c.element.value = relative(configurationOf(set), p.opposite[i])
		}
		if c.center != nil {
			centers = append(centers, c.asCenter())
		} else {
			doubleBonds = append(doubleBonds, c.asDoubleBond())
		}
	}
	return m.withStereo(centers, doubleBonds)
}
