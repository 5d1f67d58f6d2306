package basis

import (
	"errors"
	"math"
	"strings"
	"testing"

	"torsieve/internal/element"
	"torsieve/internal/gauss"
)

func TestSpellings(t *testing.T) {
	for want, spellings := range map[string][]string{
		"STO-3G":     {"sto-3g", "STO3G", " Sto-3G "},
		"MINIX":      {"minix", "Minix"},
		"6-31G*":     {"6-31g*", "6-31G(d)", "631g(d)", "6-31gs"},
		"6-31G**":    {"6-31g**", "6-31G(d,p)", "6-31gss"},
		"def2-SV(P)": {"def2-sv(p)", "def2-sv-p", "DEF2SV(P)"},
		"def2-SVP":   {"def2-svp", "def2svp", "DEF2_SVP"},
		"def2-TZVP":  {"def2-tzvp"},
		"def2-TZVPP": {"def2tzvpp"},
	} {
		for _, s := range spellings {
			set, err := Load(s)
			if err != nil || set.Name != want {
				t.Errorf("%q: %v, %v; want %s", s, set, err, want)
			}
		}
	}
	if _, err := Load("6-31+g*"); err == nil || !strings.Contains(err.Error(), "def2-TZVPP") {
		t.Errorf("unknown set: %v, want the list of sets", err)
	}
}

// Numbers of functions: R. Sure, S. Grimme, J. Comput. Chem. 2013, 34, 1672,
// table 1 (MINIX); F. Weigend, R. Ahlrichs, Phys. Chem. Chem. Phys. 2005, 7,
// 3297, table 1 (def2); W. J. Hehre, L. Radom, P. v. R. Schleyer, J. A. Pople,
// Ab Initio Molecular Orbital Theory (1986), section 4.3 (STO-3G, 6-31G*).
func TestFunctions(t *testing.T) {
	for name, want := range map[string]map[int]int{
		"STO-3G":    {1: 1, 6: 5, 16: 9, 35: 18},
		"MINIX":     {1: 1, 6: 5, 16: 14, 35: 32},
		"6-31G*":    {1: 2, 6: 15, 16: 19},
		"6-31G**":   {1: 5, 6: 15, 16: 19},
		"def2-SVP":  {1: 5, 6: 14, 16: 18, 35: 32},
		"def2-TZVP": {1: 6, 6: 31, 16: 37, 35: 48},
	} {
		set, err := Load(name)
		if err != nil {
			t.Fatal(err)
		}
		for z, n := range want {
			if got := set.Functions(z); got != n {
				t.Errorf("%s: %s has %d functions, want %d", name, element.Symbol(z), got, n)
			}
		}
	}
}

func TestMissing(t *testing.T) {
	set, err := Load("def2-SVP")
	if err != nil {
		t.Fatal(err)
	}
	var m *Missing
	if _, err := set.Shells([]int{1, 53}); !errors.As(err, &m) || m.Z != 53 || m.ECP != 28 {
		t.Errorf("iodine: %v", err)
	}
	if err := set.Check([]int{6, 92}); !errors.As(err, &m) || m.Z != 92 || m.ECP != 0 {
		t.Errorf("uranium: %v", err)
	}
}

func TestDecodeRefuses(t *testing.T) {
	head := `{"schema":"torsieve-basis/1","name":"x","role":"orbital","description":"","references":{},`
	for what, text := range map[string]string{
		"no source":        head + `"elements":{}}`,
		"unknown field":    head + `"source":"a","colour":1}`,
		"two contractions": head + `"source":"a","elements":{"1":{"electron_shells":[{"harmonic_type":"spherical","angular_momentum":[0],"exponents":[1],"coefficients":[[1],[1]]}]}}}`,
		"exponent":         head + `"source":"a","elements":{"1":{"electron_shells":[{"harmonic_type":"spherical","angular_momentum":[0],"exponents":[-1],"coefficients":[[1]]}]}}}`,
	} {
		if _, err := decode([]byte(text)); err == nil {
			t.Errorf("%s: no error", what)
		}
	}
}

// Every function of every set has unit norm, but for the mixed components of
// Cartesian d and f shells, which share that of x^l.
func TestBasisNorms(t *testing.T) {
	for _, name := range Names() {
		set, err := Load(name)
		if err != nil {
			t.Fatal(err)
		}
		elements := 0
		for z := 1; z <= 54; z++ {
			if set.Functions(z) == 0 || set.Check([]int{z}) != nil {
				continue
			}
			elements++
			shells, err := set.Shells([]int{z})
			if err != nil {
				t.Fatal(err)
			}
			off := gauss.Offsets(shells)
			n := off[len(shells)]
			s := gauss.NewOneElectron(shells, []float64{0.1, -0.2, 0.3}).Overlap
			for i := range shells {
				for k := off[i]; k < off[i+1]; k++ {
					if shells[i].Cartesian && k != off[i] {
						continue
					}
					if math.Abs(s[k*n+k]-1) > 1e-12 {
						t.Errorf("%s, %s: function %d has norm %.15g", name, element.Symbol(z), k, s[k*n+k])
					}
				}
			}
		}
		if elements < 20 {
			t.Errorf("%s: only %d elements", name, elements)
		}
	}
}
