package smiles_test

import (
	"fmt"

	"tarn/molecule/smiles"
)

func ExampleCanonical() {
	for _, s := range []string{"C[N+](=O)[O-]", "CN(=O)=O", "O=[N+]([O-])C"} {
		m, err := smiles.Parse(s)
		if err != nil {
			fmt.Println(err)
			return
		}
		fmt.Println(smiles.Canonical(m))
	}
	// Output:
	// C[N+](=O)[O-]
	// C[N+](=O)[O-]
	// C[N+](=O)[O-]
}

func ExampleParse() {
	_, err := smiles.Parse("CC(=O)N(C)(C)C")
	fmt.Println(err)
	// Output:
	// SMILES, column 7: atom 4 (N, column 7): neutral nitrogen has 5 bonds; write the charge: [N+]
	//   CC(=O)N(C)(C)C
	//         ^
}
