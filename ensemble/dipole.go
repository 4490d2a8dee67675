package ensemble

// Dipole returns the dipole moment in debye of point charges in elementary charges at x, 3N coordinates in Å. That of an ion is
// taken about the centre of mass.
func Dipole(x, charges, masses []float64) float64 { return 0 }
