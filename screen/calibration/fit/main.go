// Command fit makes the table of package calibration from reference energies:
//
//	go run ./screen/calibration/fit testdata/reference/energies > screen/calibration/data/calibration.json
//
// It finds, by maximum likelihood over molecules, the coefficients with which the
// tiers' energies make the reference's, the size of what remains and how that
// differs between molecules; and the same for each tier about the one below. What
// it scores, it scores on molecules that were left out of the fit. Nothing is
// drawn at random: the same files give the same table.
package main

import (
	"encoding/json"
	"fmt"
	"io"
	"os"

	"torsieve/screen/calibration"
)

const command = "go run ./screen/calibration/fit testdata/reference/energies > screen/calibration/data/calibration.json"

var sources = []string{
	"fh2020: Folmsbee, Hutchison, Int. J. Quantum Chem. 2021, e26381, doi:10.1002/qua.26381 (MIT): DLPNO-CCSD(T)/cc-pVTZ at B3LYP-D3BJ minima",
	"torsions59: Behara et al., J. Phys. Chem. B 2024, 128, 7888, doi:10.1021/acs.jpcb.4c03167 (MIT): coupled cluster at constrained minima; HF-3c as published there",
	"gmtkn55: Goerigk et al., Phys. Chem. Chem. Phys. 2017, 19, 32184, doi:10.1039/C7CP04913G, sets ACONF, Amino20x4, BUT14DIOL, SCONF: scored, not fitted",
	"GFN2-xTB: tblite 0.7.0; HF-3c (but for torsions59) and the force field, relaxed from the reference geometry: this program, see testdata/reference/energies/README.md",
}

func main() {
	if len(os.Args) != 2 {
		fmt.Fprintln(os.Stderr, "usage: "+command)
		os.Exit(2)
	}
	if err := run(os.Stdout, os.Args[1]); err != nil {
		fmt.Fprintln(os.Stderr, "fit: "+err.Error())
		os.Exit(1)
	}
}

func run(w io.Writer, folder string) error {
	t, err := table(folder)
	if err != nil {
		return err
	}
	text, err := json.MarshalIndent(t, "", "\t")
	if err != nil {
		return err
	}
	_, err = fmt.Fprintf(w, "%s\n", text)
	return err
}

func table(folder string) (*calibration.Table, error) {
	t := &calibration.Table{Source: sources, Command: command}
	for _, f := range finals {
		c, err := f.combination(folder)
		if err != nil {
			return nil, err
		}
		t.Combinations = append(t.Combinations, c)
	}
	for _, f := range pairs {
		p, err := f.pair(folder)
		if err != nil {
			return nil, err
		}
		t.Pairs = append(t.Pairs, p)
	}
	return t, nil
}
