package forcefield_test

import (
	"fmt"

	"torsieve/forcefield"
	"torsieve/molecule/smiles"
)

func ExampleNew() {
	m, _, err := smiles.Parse("CC(=O)Nc1ccccc1")
	if err != nil {
		fmt.Println(err)
		return
	}
	s, err := forcefield.New(m, forcefield.Defaults())
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Println(s.Types()[:5])
	// Output: [C_3 C_R O_2 N_R C_R]
}
