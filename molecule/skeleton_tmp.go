package molecule

// Aromaticity tells which atoms and which bonds are aromatic.
func (m *Molecule) Aromaticity() (atoms, bonds []bool) { return nil, nil }

// Stereo lists the stereocentres and stereogenic double bonds, specified or not.
type Stereo struct {
	Centers     []StereoCenter
	DoubleBonds []StereoDoubleBond
}

// StereoCenter is a stereocentre; Clockwise has a meaning only if it is Specified.
type StereoCenter struct {
	Center
	Specified bool
	Dependent bool // stereogenic only through the configuration of other centres (ring-dependent, pseudoasymmetric)
}

// StereoDoubleBond is a stereogenic double bond; Cis has a meaning only if it is Specified.
type StereoDoubleBond struct {
	DoubleBond
	Specified bool
	Dependent bool
}

// Unspecified returns the number of centres and double bonds whose configuration is not given.
func (s Stereo) Unspecified() int { return 0 }

// Stereo returns the potential stereocentres and double bonds.
func (m *Molecule) Stereo() Stereo { return Stereo{} }

// StereoFromGeometry returns the same molecule with the descriptors that a geometry shows.
func (m *Molecule) StereoFromGeometry(g Geometry) (*Molecule, error) { return nil, nil }

// StereoError says that a geometry does not show the specified configuration at an atom.
type StereoError struct {
	Atom   int // index
	Reason string
}

func (e *StereoError) Error() string { return e.Reason }

// CheckStereo returns nil if the geometry shows exactly the specified descriptors, else a *StereoError.
func (m *Molecule) CheckStereo(g Geometry) error { return nil }

// CanonicalRanks returns the canonical position of every atom, 0 first.
func (m *Molecule) CanonicalRanks() []int { return nil }

// SymmetryClasses numbers the atoms so that two atoms have one number exactly if an automorphism carries one onto the other.
func (m *Molecule) SymmetryClasses() []int { return nil }

// Formula returns the molecular formula in Hill order, with the charge.
func (m *Molecule) Formula() string { return "" }

// Mass returns the molecular mass in u.
func (m *Molecule) Mass() float64 { return 0 }

// Masses returns the mass of every atom in u.
func (m *Molecule) Masses() []float64 { return nil }

// RotatableBonds returns the indices of the rotatable bonds.
func (m *Molecule) RotatableBonds() []int { return nil }

// Mirror returns the mirror image: every centre inverted.
func (m *Molecule) Mirror() *Molecule { return nil }

// Stereoisomers returns the distinct molecules that complete the unspecified centres and double bonds.
func (m *Molecule) Stereoisomers() ([]*Molecule, error) { return nil, nil }

// Mass returns the standard atomic weight in u.
func (e Element) Mass() float64 { return 0 }

// CovalentRadius returns the covalent radius in Å.
func (e Element) CovalentRadius() float64 { return 0 }
