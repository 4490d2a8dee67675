package molecule

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

// Formula returns the molecular formula in Hill order, with the charge.
func (m *Molecule) Formula() string { return "" }

// Mass returns the molecular mass in u.
func (m *Molecule) Mass() float64 { return 0 }

// Masses returns the mass of every atom in u.
func (m *Molecule) Masses() []float64 { return nil }

// RotatableBonds returns the indices of the rotatable bonds.
func (m *Molecule) RotatableBonds() []int { return nil }

// Stereoisomers returns the distinct molecules that complete the unspecified centres and double bonds.
func (m *Molecule) Stereoisomers() ([]*Molecule, error) { return nil, nil }

// Mass returns the standard atomic weight in u.
func (e Element) Mass() float64 { return 0 }

// CovalentRadius returns the covalent radius in Å.
func (e Element) CovalentRadius() float64 { return 0 }
