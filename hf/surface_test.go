package hf

import (
	"context"
	"errors"
	"fmt"
	"math"
	"slices"
	"strings"
	"testing"
	"time"

	"torsieve/hf/basis"
	"torsieve/molecule"
)

// find returns a molecule of small-systems.json.
func find(t testing.TB, name string) *referenceSystem {
	t.Helper()
	for _, s := range readReference(t, "small-systems.json") {
		if s.Name == name {
			return &s
		}
	}
	t.Fatalf("no system %q", name)
	return nil
}

// point runs one single point.
func point(t testing.TB, numbers []int, charge, multiplicity int, x []float64, o Options) molecule.Point {
	t.Helper()
	s, err := New(numbers, charge, multiplicity, o)
	if err != nil {
		t.Fatal(err)
	}
	p, err := s.Energy(t.Context(), x)
	if err != nil {
		t.Fatal(err)
	}
	return p
}

// turn rotates a vector about the axis (1, 2, 3) by 1.1 rad.
func turn(v []float64) []float64 {
	k := [3]float64{1 / math.Sqrt(14), 2 / math.Sqrt(14), 3 / math.Sqrt(14)}
	c, s := math.Cos(1.1), math.Sin(1.1)
	kv := k[0]*v[0] + k[1]*v[1] + k[2]*v[2]
	return []float64{
		v[0]*c + (k[1]*v[2]-k[2]*v[1])*s + k[0]*kv*(1-c),
		v[1]*c + (k[2]*v[0]-k[0]*v[2])*s + k[1]*kv*(1-c),
		v[2]*c + (k[0]*v[1]-k[1]*v[0])*s + k[2]*kv*(1-c),
	}
}

// A rigid move and another order of atoms change no energy; the dipole turns
// along, charges go with their atoms.
func TestLaws(t *testing.T) {
	for _, name := range []string{"formamide", "H2S", "methylammonium+"} {
		for _, o := range []Options{{Method: "hf-3c", Accuracy: 0.01}, {Method: "hf-d3", Basis: "6-31G*", Accuracy: 0.01}} {
			s := find(t, name)
			numbers, x := s.numbers(t), s.coordinates()
			want := point(t, numbers, s.Charge, 1, x, o)
			n := len(numbers)
			moved, shuffled := make([]float64, 0, 3*n), make([]int, n)
			for a := range numbers {
				b := (a*5 + 2) % n // 5 and n have no common factor here, or 1
				for gcd(5, n) > 1 {
					t.Fatal("choose another step")
				}
				shuffled[a] = numbers[b]
				r := turn(x[3*b : 3*b+3])
				moved = append(moved, r[0]-4, r[1]+0.3, r[2]+11)
			}
			got := point(t, shuffled, s.Charge, 1, moved, o)
			if d := got.Energy - want.Energy; math.Abs(d) > 1e-9 {
				t.Errorf("%s %s: the energy changes by %.1e", name, o.Method, d)
			}
			for k, v := range turn(want.Dipole) {
				if math.Abs(got.Dipole[k]-v) > 1e-6 {
					t.Errorf("%s %s: dipole %v, want it turned along: %.8f", name, o.Method, got.Dipole, v)
				}
			}
			for a := range numbers {
				if b := (a*5 + 2) % n; math.Abs(got.Charges[a]-want.Charges[b]) > 1e-6 {
					t.Errorf("%s %s: charge of atom %d: %g, before %g", name, o.Method, a, got.Charges[a], want.Charges[b])
				}
			}
		}
	}
}

func gcd(a, b int) int {
	for b > 0 {
		a, b = b, a%b
	}
	return a
}

// What the parts sum to, charges sum to; and the same call gives the same bits,
// whatever the surface did before.
func TestSumsAndSameBits(t *testing.T) {
	s := find(t, "H2S")
	x := s.coordinates()
	surface, err := New(s.numbers(t), 0, 1, Options{})
	if err != nil {
		t.Fatal(err)
	}
	first, err := surface.Energy(t.Context(), x)
	if err != nil {
		t.Fatal(err)
	}
	sum, charge := 0.0, 0.0
	for _, p := range first.Parts {
		sum += p.Energy
	}
	for _, q := range first.Charges {
		charge += q
	}
	if sum != first.Energy || math.Abs(charge) > 1e-10 {
		t.Errorf("parts sum to %.12f, energy %.12f; charges sum to %g", sum, first.Energy, charge)
	}
	other := slices.Clone(x)
	other[0] += 0.3
	if _, err := surface.Energy(t.Context(), other); err != nil {
		t.Fatal(err)
	}
	again, err := surface.Energy(t.Context(), x)
	if err != nil {
		t.Fatal(err)
	}
	if again.Energy != first.Energy || !slices.Equal(again.Charges, first.Charges) {
		t.Errorf("%.17g, then %.17g", first.Energy, again.Energy)
	}
}

// Integrals that are computed anew in each iteration, all or some, give what
// stored ones give.
func TestDirectMatchesStored(t *testing.T) {
	for _, c := range []struct {
		name, basis string
		mult        int
	}{{"formamide", "MINIX", 1}, {"CH3OH", "MINIX", 3}, {"H2S", "6-31G*", 1}} {
		s := find(t, c.name)
		numbers := s.numbers(t)
		energy := func(memory int64) (float64, *fockBuilder) {
			o := Options{Method: "hf", Basis: c.basis, Accuracy: 0.01, MemoryBytes: memory, TwoElectron: "exact"}
			surface, err := New(numbers, 0, c.mult, o)
			if err != nil {
				t.Fatal(err)
			}
			p, err := surface.Energy(t.Context(), s.coordinates())
			if err != nil {
				t.Fatal(err)
			}
			return p.Energy, exactOf(t, surface)
		}
		want, all := energy(0)
		if !all.complete() {
			t.Fatalf("%s: not all integrals are kept", c.name)
		}
		matrices := matrixBytes(all.n, min(c.mult, 2))
		got, none := energy(matrices + 1<<10)
		if none.kept > 0 {
			t.Fatalf("%s: %d bras are kept, want none", c.name, none.kept)
		}
		if d := got - want; math.Abs(d) > 1e-9 {
			t.Errorf("%s: computed anew, the energy differs by %.1e hartree", c.name, d)
		}
		got, some := energy(matrices + 4*int64(len(all.values)))
		if some.kept == 0 || some.complete() {
			t.Fatalf("%s: %d bras of %d are kept, want some", c.name, some.kept, some.rep.Pairs())
		}
		if d := got - want; math.Abs(d) > 1e-9 {
			t.Errorf("%s: with half of the integrals kept, the energy differs by %.1e hartree", c.name, d)
		}
	}
}

// A closed shell, treated as two sets of orbitals, stays what it is.
func TestUnrestrictedClosedShell(t *testing.T) {
	s := find(t, "H2O")
	surface, err := New(s.numbers(t), 0, 1, Options{Method: "hf", Basis: "6-31G*", Accuracy: 0.01})
	if err != nil {
		t.Fatal(err)
	}
	want, err := surface.Energy(t.Context(), s.coordinates())
	if err != nil {
		t.Fatal(err)
	}
	surface.occupied = []int{5, 5}
	got, err := surface.Energy(t.Context(), s.coordinates())
	if err != nil {
		t.Fatal(err)
	}
	if d := got.Energy - want.Energy; math.Abs(d) > 1e-9 {
		t.Errorf("differs by %.1e hartree", d)
	}
}

// Every attempt that Energy falls back to leads to the same energy.
func TestAttemptsAgree(t *testing.T) {
	for _, name := range []string{"acetate-", "glycine-zwitterion", "dimethyl-sulfoxide"} {
		s := find(t, name)
		surface, err := New(s.numbers(t), s.Charge, 1, Options{Method: "hf", Basis: "MINIX", Accuracy: 0.1})
		if err != nil {
			t.Fatal(err)
		}
		repulsion, err := surface.repulsion(s.coordinates())
		if err != nil {
			t.Fatal(err)
		}
		f, _, err := surface.prepare(t.Context(), s.coordinates(), repulsion)
		if err != nil {
			t.Fatal(err)
		}
		p, err := surface.atoms()
		if err != nil {
			t.Fatal(err)
		}
		var first float64
		for i, way := range attempts {
			f.guess(p)
			it, err := f.try(t.Context(), way, 0.1)
			if err != nil {
				t.Errorf("%s: %s: %v", name, way.name, err)
				continue
			}
			if i == 0 {
				first = it.Energy
			} else if d := it.Energy - first; math.Abs(d) > 1e-8 {
				t.Errorf("%s: %s is off by %.1e hartree", name, way.name, d)
			}
		}
	}
}

func TestRefusals(t *testing.T) {
	for _, c := range []struct {
		name     string
		numbers  []int
		charge   int
		mult     int
		o        Options
		want     string
		missing  bool // the cause is a *basis.Missing
		notTyped bool // a wrong option, not a wrong molecule
	}{
		{name: "iodine", numbers: []int{6, 1, 1, 1, 53}, mult: 1, want: "I needs an effective core potential of 28 electrons in MINIX", missing: true},
		{name: "xenon", numbers: []int{54}, mult: 1, want: "MINIX has no functions for Xe", missing: true},
		{name: "odd electrons", numbers: []int{6, 1, 1, 1}, mult: 1, want: "has 9 at charge +0"},
		{name: "multiplicity", numbers: []int{8, 1, 1}, mult: 2, want: "multiplicity 2 does not fit 10 electrons"},
		{name: "multiplicity too high", numbers: []int{1, 1}, mult: 5, want: "multiplicity 5 does not fit 2 electrons"},
		{name: "no electrons", numbers: []int{1}, charge: 1, mult: 1, want: "none at charge +1"},
		{name: "no room", numbers: []int{2}, charge: 0, mult: 3, want: "do not fit the 1 functions", o: Options{Method: "hf", Basis: "sto-3g"}},
		{name: "no element", numbers: []int{0, 1}, mult: 1, want: "no element number 0"},
		{name: "memory", numbers: []int{8, 1, 1}, mult: 1, want: "needs at least 1 MB", o: Options{MemoryBytes: 1000}},
		{name: "method", numbers: []int{2}, mult: 1, want: `no method "dft"`, o: Options{Method: "dft"}, notTyped: true},
		{name: "basis", numbers: []int{2}, mult: 1, want: `no basis set "cc-pvdz"`, o: Options{Method: "hf", Basis: "cc-pvdz"}, notTyped: true},
		{name: "hf-3c elsewhere", numbers: []int{2}, mult: 1, want: "in MINIX only", o: Options{Basis: "def2-svp"}, notTyped: true},
		{name: "two-electron", numbers: []int{2}, mult: 1, want: `no two-electron method "best"`, o: Options{TwoElectron: "best"}, notTyped: true},
		{name: "accuracy", numbers: []int{2}, mult: 1, want: "above 0", o: Options{Accuracy: math.NaN()}, notTyped: true},
	} {
		t.Run(c.name, func(t *testing.T) {
			_, err := New(c.numbers, c.charge, c.mult, c.o)
			if err == nil || !strings.Contains(err.Error(), c.want) {
				t.Fatalf("error %v, want one with %q", err, c.want)
			}
			var u *Unsupported
			if errors.As(err, &u) == c.notTyped {
				t.Errorf("error %T, want *Unsupported: %v", err, !c.notTyped)
			}
			var m *basis.Missing
			if errors.As(err, &m) != c.missing {
				t.Errorf("cause *basis.Missing: %v, want %v", !c.missing, c.missing)
			}
		})
	}
}

func TestBadGeometries(t *testing.T) {
	s, err := New([]int{8, 1, 1}, 0, 1, Options{})
	if err != nil {
		t.Fatal(err)
	}
	var close *TooClose
	if _, err := s.Energy(t.Context(), []float64{0, 0, 0, 0, 0, 1.8, 0, 0.1, 1.9}); !errors.As(err, &close) || close.A != 1 || close.B != 2 {
		t.Errorf("atoms on one another: %v", err)
	}
	if _, err := s.Energy(t.Context(), []float64{0, 0, 0, 0, 0, 1.8, 0, math.NaN(), -1}); err == nil || !strings.Contains(err.Error(), "not finite") {
		t.Errorf("NaN: %v", err)
	}
}

// A context that ends stops the work soon, in the integrals too.
func TestStops(t *testing.T) {
	s := readReference(t, "drug-like.json")[0]
	surface, err := New(s.numbers(t), s.Charge, 1, Options{})
	if err != nil {
		t.Fatal(err)
	}
	ctx, cancel := context.WithTimeout(t.Context(), 50*time.Millisecond)
	defer cancel()
	if _, err := surface.Energy(ctx, s.coordinates()); !errors.Is(err, context.DeadlineExceeded) {
		t.Errorf("error %v, want that of the context", err)
	}
}

func TestMemoryEstimate(t *testing.T) {
	water := []int{8, 1, 1}
	small, err := MemoryEstimate(water, Options{})
	if err != nil {
		t.Fatal(err)
	}
	s := readReference(t, "drug-like.json")[3] // 33 atoms, C H N O
	numbers := s.numbers(t)
	large, err := MemoryEstimate(numbers, Options{})
	if err != nil {
		t.Fatal(err)
	}
	// hartree-fock sizes: 105 functions have 1.55e7 unique integrals, 124 MB.
	if small < 1<<10 || small > 1<<20 || large < 64<<20 || large > 256<<20 {
		t.Errorf("estimates %d and %d bytes", small, large)
	}
	if capped, err := MemoryEstimate(numbers, Options{MemoryBytes: 32 << 20}); err != nil || capped != 32<<20 {
		t.Errorf("%d bytes of 32 MB allowed, %v", capped, err)
	}
	fitted, err := MemoryEstimate(numbers, Options{Method: "hf-d3"})
	if err != nil {
		t.Fatal(err)
	}
	// 327 functions, 1680 fitting functions: at most 721 MB of fitted integrals.
	if fitted < 512<<20 || fitted > 1<<30 {
		t.Errorf("fitted: %d bytes", fitted)
	}
	least, err := MemoryEstimate(numbers, Options{Method: "hf-d3", MemoryBytes: 1 << 20})
	if err != nil || least < 32<<20 || least > 256<<20 {
		t.Errorf("fitted, the least: %d bytes, %v", least, err)
	}
	if _, err := New(numbers, s.Charge, 1, Options{Method: "hf-d3", MemoryBytes: least}); err != nil {
		t.Errorf("what was estimated as the least does not do: %v", err)
	}
	var u *Unsupported
	if _, err := New(numbers, s.Charge, 1, Options{Method: "hf-d3", MemoryBytes: least / 4}); !errors.As(err, &u) {
		t.Errorf("a quarter of the least: %v", err)
	}
	if _, err := MemoryEstimate([]int{53}, Options{}); err == nil {
		t.Error("no refusal of iodine")
	}
}

// Water in the smallest basis, at a geometry that many have computed.
func ExampleSurface_Energy() {
	s, err := New([]int{8, 1, 1}, 0, 1, Options{Method: "hf", Basis: "STO-3G", TwoElectron: "exact"})
	if err != nil {
		fmt.Println(err)
		return
	}
	p, err := s.Energy(context.Background(), []float64{0, -0.143225816552, 0, // bohr
		1.638036840407, 1.136548822547, 0, -1.638036840407, 1.136548822547, 0})
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("%.4f hartree\n", p.Energy)
	fmt.Printf("%s %.4f\n", p.Parts[0].Name, p.Parts[0].Energy)
	// Output:
	// -74.9421 hartree
	// nuclear repulsion 8.0024
}
