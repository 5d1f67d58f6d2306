package hf

import "torsieve/internal/dispersion"

// terms returns what a method adds to the Hartree-Fock energy.
//
// Sources: HF-3c, R. Sure, S. Grimme, J. Comput. Chem. 2013, 34, 1672,
// doi:10.1002/jcc.23317; Hartree-Fock with D3(BJ), S. Grimme, S. Ehrlich, L.
// Goerigk, J. Comput. Chem. 2011, 32, 1456, doi:10.1002/jcc.21759.
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
	if method != "hf-3c" {
		return out, nil
	}
	counterpoise, err := newGCP(numbers, basis)
	if err != nil {
		return nil, err
	}
	short, err := newSRB(numbers)
	if err != nil {
		return nil, err
	}
	return append(out,
		term{"counterpoise", func(x []float64) float64 { return counterpoise.energy(x, nil) }},
		term{"short-range", func(x []float64) float64 { return short.energy(x, nil) }}), nil
}
