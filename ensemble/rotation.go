package ensemble

// RotationalConstants returns the rotational constants in MHz, descending: three, two equal ones for a linear geometry, none for an
// atom. x holds 3N coordinates in Å, masses are in u.
func RotationalConstants(x, masses []float64) []float64 { return nil }

// PrincipalMoments returns the principal moments of inertia in u Å², ascending.
func PrincipalMoments(x, masses []float64) [3]float64 { return [3]float64{} }
