package embed_test

import (
	"context"
	"fmt"
	"math/rand/v2"

	"tarn/forcefield"
	"tarn/molecule/embed"
	"tarn/molecule/smiles"
)

// A first geometry of (R)-muscone, and a second one from the same prepared bounds.
func ExampleNew() {
	muscone, err := smiles.Parse("C[C@@H]1CCCCCCCCCCCCC(=O)C1")
	if err != nil {
		fmt.Println(err)
		return
	}
	field, err := forcefield.NewMMFF94(muscone, forcefield.Options{})
	if err != nil {
		fmt.Println(err)
		return
	}
	embedder, err := embed.New(muscone, field)
	if err != nil {
		fmt.Println(err)
		return
	}
	rng := rand.New(rand.NewPCG(1, 0))
	for range 2 {
		geometry, err := embedder.Draw(context.Background(), rng)
		if err != nil {
			fmt.Println(err)
			return
		}
		fmt.Println(geometry.Atoms(), "atoms, stereo right:", muscone.CheckStereo(geometry) == nil)
	}
	// Output:
	// 47 atoms, stereo right: true
	// 47 atoms, stereo right: true
}
