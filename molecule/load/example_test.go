package load_test

import (
	"errors"
	"fmt"
	"io"
	"strings"

	"torsieve/molecule/load"
)

func ExampleOpen() {
	text := "CCO ethanol\nC1CC broken\nOCC\n"
	r, err := load.Open("-", load.Options{Format: "smi", Stdin: strings.NewReader(text)})
	if err != nil {
		fmt.Println(err)
		return
	}
	defer r.Close()
	for {
		rec, err := r.Next()
		if errors.Is(err, io.EOF) {
			break
		}
		if rec.Err != nil {
			fmt.Println(rec.Err)
			continue
		}
		fmt.Println(rec.ID, rec.Mol.Formula(), rec.Mol.SMILES())
	}
	// Output:
	// ethanol C2H6O CCO
	// -:2: record 2 (broken): SMILES "C1CC": position 2: ring bond 1 is never closed
	// line-3 C2H6O CCO
}
