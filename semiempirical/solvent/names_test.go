package solvent

import (
	"errors"
	"math"
	"slices"
	"strings"
	"testing"
)

func TestFind(t *testing.T) {
	for name, want := range map[string]string{
		"water": "water", "Water": "water", "H2O": "water", "DMSO": "dmso", "dimethyl sulfoxide": "dmso",
		"MeCN": "acetonitrile", "CHCl3": "chloroform", "DCM": "dichloromethane", "CH2Cl2": "dichloromethane",
		"1-octanol": "octanol", "n-hexane": "hexane", "wet octanol": "wet-octanol", "octanol (wet)": "wet-octanol",
		"diethyl ether": "diethylether", "ethyl acetate": "ethylacetate", "1,4-dioxane": "dioxane",
		"N,N-dimethylformamide": "dmf", "THF": "thf", "carbon disulfide": "cs2",
	} {
		if got, err := Find(name); err != nil || got != want {
			t.Errorf("%q: %q, %v, want %q", name, got, err, want)
		}
	}
}

func TestNearest(t *testing.T) {
	for name, want := range map[string]string{
		"watr": "water", "toluen": "toluene", "metanol": "methanol", "dmos": "dmso", "cloroform": "chloroform",
		"tetrahydro": "thf", "dichlormethan": "dichloromethane", "octanole": "octanol", "h20": "water",
	} {
		_, err := Find(name)
		var unknown *UnknownError
		if !errors.As(err, &unknown) {
			t.Errorf("%q: error %v", name, err)
			continue
		}
		if !slices.Contains(unknown.Nearest, want) || !strings.Contains(err.Error(), want) || unknown.Name != name {
			t.Errorf("%q: nearest %v, want %s among them", name, unknown.Nearest, want)
		}
	}
	for _, name := range []string{"", "xyzzyqwv"} {
		_, err := Find(name)
		var unknown *UnknownError
		if !errors.As(err, &unknown) || len(unknown.Nearest) != 0 || !strings.Contains(err.Error(), "wet-octanol") {
			t.Errorf("%q: error %v, want all names in it", name, err)
		}
	}
	if _, err := New([]int{1}, "vodka"); err == nil {
		t.Error("a model for no solvent")
	}
}

// No alias stands for two solvents, and all are spelled as Find looks for them.
func TestAliases(t *testing.T) {
	names := Names()
	if len(names) != 25 || !slices.IsSorted(names) {
		t.Errorf("%d solvents %v, want 25 in order", len(names), names)
	}
	if len(aliases) != len(names) {
		t.Errorf("aliases for %d solvents, want %d", len(aliases), len(names))
	}
	seen := map[string]string{}
	for _, own := range names {
		for _, a := range append(Aliases(own), plain(own)) {
			if other, twice := seen[a]; twice {
				t.Errorf("%q stands for %s and %s", a, other, own)
			}
			seen[a] = own
			if plain(a) != a {
				t.Errorf("alias %q is not spelled plainly", a)
			}
			if got, err := Find(a); err != nil || got != own {
				t.Errorf("%q: %q, %v, want %s", a, got, err, own)
			}
		}
	}
}

func TestBadGeometry(t *testing.T) {
	m, err := New([]int{8, 1, 1}, "water")
	if err != nil {
		t.Fatal(err)
	}
	for name, tc := range map[string]struct {
		x    []float64
		atom int
	}{
		"not finite":  {[]float64{0, 0, 0, 1.8, 0, math.NaN(), 0, 1.8, 0}, 1},
		"infinite":    {[]float64{0, 0, 0, 1.8, 0, 0, 0, math.Inf(1), 0}, 2},
		"on another":  {[]float64{0, 0, 0, 1.8, 0, 0, 1.8, 0, 0}, 2},
		"all in one ": {make([]float64, 9), 1},
	} {
		var bad *GeometryError
		if err := m.Update(tc.x); !errors.As(err, &bad) || bad.Atom != tc.atom {
			t.Errorf("%s: error %v, want one for atom %d", name, err, tc.atom+1)
		}
	}
}

// A heap of carbon atoms so dense that the one amid it is infinitely far from
// the solvent, as the model sees it.
func TestCrowdedAtom(t *testing.T) {
	var numbers []int
	var x []float64
	for i := range 125 {
		numbers = append(numbers, 6)
		x = append(x, 1.2*float64(i%5), 1.2*float64(i/5%5), 1.2*float64(i/25))
	}
	m, err := New(numbers, "water")
	if err != nil {
		t.Fatal(err)
	}
	var bad *GeometryError
	if err := m.Update(x); !errors.As(err, &bad) {
		t.Errorf("error %v, want one for a crowded atom", err)
	}
}

func TestWrongLengths(t *testing.T) {
	m, err := New([]int{8, 1, 1}, "water")
	if err != nil {
		t.Fatal(err)
	}
	three := make([]float64, 3)
	for name, f := range map[string]func(){
		"coordinates": func() { _ = m.Update(three) },
		"charges":     func() { m.ReactionField(three[:2], three) },
		"potential":   func() { m.ReactionField(three, three[:2]) },
		"bonds":       func() { m.HydrogenBonds(three, three[:2]) },
		"gradient":    func() { m.AddGradient(three, three) },
		"parts":       func() { m.Parts(nil) },
	} {
		func() {
			defer func() {
				if recover() == nil {
					t.Errorf("no panic for %s of the wrong length", name)
				}
			}()
			f()
		}()
	}
}
