package molecule

// Stereo lists what can be stereogenic in a molecule, given the descriptors it has.
type Stereo struct {
	Centers     []StereoCenter     // tetrahedral centres and allenes, by atom
	DoubleBonds []StereoDoubleBond // double bonds and odd cumulenes, by first atom
}

// StereoCenter is a stereocentre. Clockwise has a meaning only if it is Specified.
type StereoCenter struct {
	Center
	Specified bool
	// Dependent says that the atom is stereogenic only through the configuration of others: in a ring
	// (1,4-dimethylcyclohexane), between like groups (pseudoasymmetric), or in a cage.
	Dependent bool
}

// StereoDoubleBond is a stereogenic double bond. Cis has a meaning only if it is Specified.
type StereoDoubleBond struct {
	DoubleBond
	Specified bool
	Dependent bool
}

// Unspecified returns the number of centres and double bonds whose configuration is not given.
func (s Stereo) Unspecified() int {
	count := 0
	for _, c := range s.Centers {
		if !c.Specified {
			count++
		}
	}
	for _, b := range s.DoubleBonds {
		if !b.Specified {
			count++
		}
	}
	return count
}

// Stereo returns the stereocentres and stereogenic double bonds of the molecule, specified or not. A descriptor that makes
// no difference (both choices are the same stereoisomer) is not listed. The configuration that a small cage forces on a
// bridgehead counts as specified as soon as another bridgehead of the cage is.
//
// Tetrahedral: C, Si, Ge, Sn, B⁻, N⁺ without hydrogen, three- and four-coordinate P and As, sulfoxides, sulfonium ions and
// their like of S, Se and Te; three-coordinate N only in three-membered rings and at bridgeheads, since other amines
// invert. Double bonds: C and N at the ends, none in rings of fewer than eight atoms. Atoms whose neighbours are exchanged
// by resonance or by the proton of an oxo acid (phosphate esters) are no centres.
func (m *Molecule) Stereo() Stereo { return m.stereo().public }

// Mirror returns the mirror image: every tetrahedral centre and allene inverted, double bonds as they are.
func (m *Molecule) Mirror() *Molecule {
	centers := make([]Center, len(m.Centers))
	for i, c := range m.Centers {
		c.Clockwise = !c.Clockwise
		centers[i] = c
	}
	return m.withStereo(centers, m.DoubleBonds)
}

// withStereo returns the same molecule with other descriptors.
func (m *Molecule) withStereo(centers []Center, doubleBonds []DoubleBond) *Molecule {
	changed := &Molecule{
		Name: m.Name, Atoms: m.Atoms, Bonds: m.Bonds, Centers: centers, DoubleBonds: doubleBonds, neighbors: m.neighbors,
	}
	changed.perception = perceptionOf(changed)
	if m.standard() == m { // none of this depends on descriptors
		changed.standard = func() *Molecule { return changed }
		changed.rings, changed.aromaticity, changed.cages = m.rings, m.aromaticity, m.cages
		changed.skeleton, changed.classes = m.skeleton, m.classes
	}
	return changed
}
