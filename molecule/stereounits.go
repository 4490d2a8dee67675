package molecule

import (
	"cmp"
	"slices"
)

// stereoPerception is what is known of the stereochemistry of a molecule.
type stereoPerception struct {
	public     Stereo
	candidates []candidate // those that remained
	opposite   []bool      // configuration relative to the unit, parallel to candidates
	identity   []candidate // those whose descriptors make this stereoisomer differ from others
}

// perceiveStereo keeps of the candidates those that matter. A candidate with different neighbours does; one with like
// neighbours does if flipping it (with its cage) gives another stereoisomer while all others stay: the specified ones as
// they are, the unspecified ones in any one configuration, each told apart from its likes.
func (m *Molecule) perceiveStereo() *stereoPerception {
	if standard := m.standard(); standard != m {
		return standard.stereo()
	}
	p := &stereoPerception{candidates: m.stereoCandidates()}
	p.opposite = m.coupleCages(p.candidates)
	m.readDescriptors(p.candidates)
	p.spreadInCages()
	for p.removeIdle(m.skeleton(), true) {
	}
	p.identify(m.skeleton())
	p.compact()
	p.publish()
	return p
}

// readDescriptors sets the values of the candidates from the descriptors of the molecule.
func (m *Molecule) readDescriptors(candidates []candidate) {
	centers := map[int]Center{}
	for _, c := range m.Centers {
		centers[c.Atom] = c
	}
	doubleBonds := map[[2]int]DoubleBond{}
	for _, b := range m.DoubleBonds {
		if b.A > b.B {
			b = DoubleBond{A: b.B, B: b.A, RefA: b.RefB, RefB: b.RefA, Cis: b.Cis}
		}
		doubleBonds[[2]int{b.A, b.B}] = b
	}
	for i := range candidates {
		c := &candidates[i]
		if c.center != nil {
			if given, ok := centers[c.center.Atom]; ok {
				if odd, ok := permutationOdd(c.center.Neighbors, given.Neighbors); ok {
					c.element.value = configurationOf(given.Clockwise != odd)
				}
			}
			continue
		}
		if given, ok := doubleBonds[[2]int{c.doubleBond.A, c.doubleBond.B}]; ok {
			turned := (given.RefA != c.doubleBond.RefA) != (given.RefB != c.doubleBond.RefB)
			c.element.value = configurationOf(given.Cis != turned)
		}
	}
}

// spreadInCages gives the members of a cage the configuration that a specified member forces on them.
func (p *stereoPerception) spreadInCages() {
	for i := range p.candidates {
		if p.candidates[i].element.value != unspecified {
			continue
		}
		for j, c := range p.candidates {
			if c.unit == p.candidates[i].unit && c.element.value != unspecified {
				p.candidates[i].element.value = relative(c.element.value, p.opposite[i] != p.opposite[j])
				break
			}
		}
	}
}

func relative(c configuration, opposite bool) configuration {
	if opposite {
		return c.flipped()
	}
	return c
}

// removeIdle removes the units whose flipping changes nothing and tells whether there were any. With generic set, the
// unspecified candidates take part as if each had a configuration of its own; otherwise they do not exist. Units that are
// idle only because of one another (two methyl groups of 1,3,5-trimethylcyclohexane) stay: a unit goes if it is idle even
// when all others that go are gone.
func (p *stereoPerception) removeIdle(s *skeleton, generic bool) bool {
	idle := map[int]bool{}
	for _, c := range p.candidates {
		if _, tested := idle[c.unit]; !tested {
			idle[c.unit] = p.mustTest(c.unit, generic) && p.flipsToSame(s, c.unit, generic, nil)
		}
	}
	for shrunk := true; shrunk; {
		shrunk = false
		var needed []int
		for unit, yes := range idle {
			if yes && !p.flipsToSame(s, unit, generic, idle) {
				needed = append(needed, unit)
			}
		}
		for _, unit := range needed {
			idle[unit], shrunk = false, true
		}
	}
	found := false
	for i := range p.candidates {
		if idle[p.candidates[i].unit] && !p.candidates[i].removed {
			p.candidates[i].removed, found = true, true
		}
	}
	return found
}

// mustTest tells whether a unit is still there and has no member with constitutionally different neighbours.
func (p *stereoPerception) mustTest(unit int, generic bool) bool {
	present := false
	for _, c := range p.candidates {
		if c.unit != unit || c.removed || !generic && c.element.value == unspecified {
			continue
		}
		if c.distinct {
			return false
		}
		present = true
	}
	return present
}

// flipsToSame tells whether flipping a unit gives the same stereoisomer, without the other units that are absent.
func (p *stereoPerception) flipsToSame(s *skeleton, unit int, generic bool, absent map[int]bool) bool {
	var elements, flipped []stereoElement
	marks := map[int]uint64{}
	part := 0
	for i, c := range p.candidates {
		e := c.element
		if c.removed || e.value == unspecified && !generic || absent[c.unit] && c.unit != unit {
			continue
		}
		if e.value == unspecified {
			e.value = relative(clockwise, p.opposite[i])
			if c.unit != unit {
				marks[e.at[0]] = mix(marks[e.at[0]], uint64(i+1))
				marks[e.at[1]] = mix(marks[e.at[1]], uint64(i+1))
			}
		}
		elements = append(elements, e)
		if c.unit == unit {
			part = s.part[e.at[0]]
			e.value = e.value.flipped()
		}
		flipped = append(flipped, e)
	}
	return slices.Equal(s.graph(part, elements, marks).label().certificate, s.graph(part, flipped, marks).label().certificate)
}

// compact drops the removed candidates.
func (p *stereoPerception) compact() {
	var kept []candidate
	var opposite []bool
	for i, c := range p.candidates {
		if !c.removed {
			kept, opposite = append(kept, c), append(opposite, p.opposite[i])
		}
	}
	p.candidates, p.opposite = kept, opposite
}

func (p *stereoPerception) publish() {
	for _, c := range p.candidates {
		specified := c.element.value != unspecified
		if c.center != nil {
			p.public.Centers = append(p.public.Centers, StereoCenter{c.asCenter(), specified, !c.distinct})
		} else {
			p.public.DoubleBonds = append(p.public.DoubleBonds, StereoDoubleBond{c.asDoubleBond(), specified, !c.distinct})
		}
	}
	slices.SortFunc(p.public.DoubleBonds, func(a, b StereoDoubleBond) int {
		return cmp.Or(cmp.Compare(a.A, b.A), cmp.Compare(a.B, b.B))
	})
}

// identify collects the specified elements that matter while the unspecified ones stay open. Candidates that were removed
// as idle are given any configuration first: whether one is left out, or specified without effect, is then the same.
func (p *stereoPerception) identify(s *skeleton) {
	q := &stereoPerception{candidates: slices.Clone(p.candidates), opposite: p.opposite}
	for i := range q.candidates {
		c := &q.candidates[i]
		if c.removed && c.element.value == unspecified {
			c.element.value = relative(clockwise, p.opposite[i])
		}
		c.removed = false
	}
	for q.removeIdle(s, false) {
	}
	for _, c := range q.candidates {
		if !c.removed && c.element.value != unspecified {
			p.identity = append(p.identity, c)
		}
	}
}
