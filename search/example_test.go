package search_test

import (
	"context"
	"fmt"

	"tarn/molecule/smiles"
	"tarn/search"
)

func ExampleRun() {
	ctx := context.Background()
	butane, err := smiles.Parse("CCCC")
	if err != nil {
		fmt.Println(err)
		return
	}
	problem, err := search.NewMoleculeProblem(ctx, butane, "mmff94", nil, 1)
	if err != nil {
		fmt.Println(err)
		return
	}
	result, err := search.Run(ctx, problem, search.Settings{Seed: 1}, nil, search.Hooks{})
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, m := range result.Minima {
		fmt.Printf("%.2f kcal/mol, degeneracy %d\n", m.Energy-result.Minima[0].Energy, m.Degeneracy)
	}
	fmt.Println("stopped by", result.StopReason)
	// Output:
	// 0.00 kcal/mol, degeneracy 1
	// 0.78 kcal/mol, degeneracy 2
	// stopped by coverage
}
