package hf

import (
	"strings"

	"torsieve/internal/dispersion"
)

// terms returns what a method adds to the Hartree-Fock energy: hf-3c its three
// terms, hf-d3 dispersion and, where one was published for the basis, the
// counterpoise correction.
//
// Sources: HF-3c, R. Sure, S. Grimme, J. Comput. Chem. 2013, 34, 1672,
// doi:10.1002/jcc.23317; Hartree-Fock with D3(BJ), S. Grimme, S. Ehrlich, L.
// Goerigk, J. Comput. Chem. 2011, 32, 1456, doi:10.1002/jcc.21759; with the counterpoise correction
// H. Kruse, S. Grimme, J. Chem. Phys. 2012, 136, 154101, doi:10.1063/1.3700154.
func terms(numbers []int, method, basis string) ([]term, error) {
	if method != "hf-3c" && method != "hf-d3" {
		return nil, nil
	}
	for _, z := range numbers {
		if z > dispersion.MaxZ {
			return nil, noDispersion(z)
		}
	}
	params := dispersion.HF
	if method == "hf-3c" {
		params = dispersion.HF3c
	}
	d3 := dispersion.NewD3(numbers, params)
	out := []term{{"dispersion", func(x []float64) float64 { return d3.Energy(x, nil) }}}
	if method != "hf-3c" && !HasCounterpoise(basis) {
		return out, nil
	}
	counterpoise, err := newGCP(numbers, basis)
	if err != nil {
		return nil, err
	}
	out = append(out, term{"counterpoise", func(x []float64) float64 { return counterpoise.energy(x, nil) }})
	if method != "hf-3c" {
		return out, nil
	}
	short, err := newSRB(numbers)
	if err != nil {
		return nil, err
	}
	return append(out, term{"short-range", func(x []float64) float64 { return short.energy(x, nil) }}), nil
}

// HasCounterpoise says whether hf-d3 in a basis, named as published, has a
// counterpoise correction: where one was published for Hartree-Fock in it.
func HasCounterpoise(basis string) bool {
	t, err := gcpTables()
	if err != nil {
		return false // newGCP says what is wrong
	}
	_, ok := t.Parameters["hf/"+strings.ToLower(basis)]
	return ok
}
