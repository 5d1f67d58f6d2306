package molecule_test

import (
	"fmt"

	"torsieve/molecule/smiles"
)

func ExampleMolecule_SMILES() {
	for _, s := range []string{"OC(=O)[C@@H](N)C", "N[C@@H](C)C(O)=O"} {
		m, _, err := smiles.Parse(s)
		if err != nil {
			fmt.Println(err)
			return
		}
		fmt.Println(m.SMILES(), m.Formula())
	}
	// Output:
	// C[C@H](N)C(=O)O C3H7NO2
	// C[C@H](N)C(=O)O C3H7NO2
}

func ExampleMolecule_Isomers() {
	m, _, err := smiles.Parse("OC(=O)C(O)C(O)C(=O)O") // tartaric acid
	if err != nil {
		fmt.Println(err)
		return
	}
	isomers, err := m.Isomers(8)
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, i := range isomers {
		fmt.Println(i.SMILES(), i.Chiral())
	}
	// Output:
	// O=C(O)[C@@H](O)[C@@H](O)C(=O)O false
	// O=C(O)[C@@H](O)[C@H](O)C(=O)O true
	// O=C(O)[C@H](O)[C@@H](O)C(=O)O true
}
