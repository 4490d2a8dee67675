package forcefield_test

import (
	"fmt"

	"tarn/forcefield"
	"tarn/molecule"
)

// Water at its reference geometry: neither bonds nor angle are strained, and no two atoms are far enough apart to
// interact, so the energy is zero. Types and reference length are those of the published tables.
func ExampleNewMMFF94() {
	water, err := molecule.New("water",
		[]molecule.Atom{{Element: 8}, {Element: 1}, {Element: 1}},
		[]molecule.Bond{{A: 0, B: 1, Order: 1}, {A: 0, B: 2, Order: 1}}, nil, nil)
	if err != nil {
		panic(err)
	}
	field, err := forcefield.NewMMFF94(water, forcefield.Options{})
	if err != nil {
		panic(err)
	}
	x := []float64{0, 0, 0, 0.969, 0, 0, -0.234061, 0.940307, 0} // Å, 103.978° between the bonds
	gradient := make([]float64, len(x))
	fmt.Println(field.AtomTypes(), field.PartialCharges())
	fmt.Printf("%.3f Å, %.5f kcal/mol\n", field.ReferenceBond(0, 1), field.Energy(x, gradient))
	// Output:
	// [70 31 31] [-0.86 0.43 0.43]
	// 0.969 Å, 0.00000 kcal/mol
}
