package dedupe

import (
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"torsieve/internal/units"
	"torsieve/molecule/smiles"

	"pgregory.net/rapid"
)

func TestUniqueGroups(t *testing.T) {
	m := parse(t, "CCCC")
	c := NewComparer(m, Options{})
	kcal := units.KcalPerMol
	xs := [][]float64{
		chain(m, -65), chain(m, 180), chain(m, 64), moved(chain(m, 180), 1), chain(m, 65),
	}
	energies := []float64{0.6 * kcal, 0, 0.61 * kcal, 0.01 * kcal, 5 * kcal}
	groups := Unique(c, xs, energies, DefaultThresholds())
	want := []Group{
		{Keep: 1, Members: []int{1, 3}, Mirrored: []bool{false, false}},
		{Keep: 0, Members: []int{0, 2}, Mirrored: []bool{false, true}},
		{Keep: 4, Members: []int{4}, Mirrored: []bool{false}}, // too far up to be the same minimum
	}
	if len(groups) != len(want) {
		t.Fatalf("%d groups, want %d: %v", len(groups), len(want), groups)
	}
	for k, g := range groups {
		if g.Keep != want[k].Keep || !slices.Equal(g.Members, want[k].Members) {
			t.Errorf("group %d: %+v, want %+v", k, g, want[k])
		}
		// Where a shape is its own mirror image either answer is right.
		if g.Keep == 0 && !slices.Equal(g.Mirrored, want[k].Mirrored) {
			t.Errorf("group %d: mirrored %v, want %v", k, g.Mirrored, want[k].Mirrored)
		}
	}
}

// Doing it twice removes nothing more, and every shape is in one group.
func TestUniqueTwice(t *testing.T) {
	m := parse(t, "OCCO")
	c := NewComparer(m, Options{PolarHydrogens: true})
	rapid.Check(t, func(rt *rapid.T) {
		seed := rapid.Uint64().Draw(rt, "seed")
		r := rand.New(rand.NewPCG(seed, 1))
		var xs [][]float64
		var energies []float64
		for range 12 {
			x := chain(m, float64(r.IntN(3))*120-60+5*r.Float64())
			for i := 12; i < len(x); i++ {
				x[i] = 4 * r.Float64()
			}
			xs = append(xs, x, moved(x, r.Uint64()))
			energies = append(energies, r.Float64()*units.KcalPerMol, r.Float64()*units.KcalPerMol)
		}
		seen := make([]int, len(xs))
		var kept [][]float64
		var keptEnergies []float64
		for _, g := range Unique(c, xs, energies, DefaultThresholds()) {
			kept = append(kept, xs[g.Keep])
			keptEnergies = append(keptEnergies, energies[g.Keep])
			for _, k := range g.Members {
				seen[k]++
			}
		}
		for k, n := range seen {
			if n != 1 {
				rt.Fatalf("shape %d is in %d groups", k, n)
			}
		}
		if again := Unique(c, kept, keptEnergies, DefaultThresholds()); len(again) != len(kept) {
			rt.Fatalf("%d shapes became %d when done again", len(kept), len(again))
		}
	})
}

// A Collection takes shapes as they come: butane's anti form, gauche, its mirror
// image, and gauche with an energy that cannot be that of the same minimum.
func TestCollection(t *testing.T) {
	m := parse(t, "CCCC")
	k := NewCollection(NewComparer(m, Options{}), DefaultThresholds())
	kcal := units.KcalPerMol
	for _, c := range []struct {
		angle, energy float64
		group         int
		fresh         bool
	}{
		{64, 0.6, 0, true}, {180, 0, 1, true}, {-64, 0.61, 0, false}, {180, 0.01, 1, false}, {64, 5, 2, true},
	} {
		group, fresh := k.Add(moved(chain(m, c.angle), 3), c.energy*kcal)
		if group != c.group || fresh != c.fresh {
			t.Errorf("%g degrees, %g kcal/mol: group %d, new %v; want %d, %v", c.angle, c.energy, group, fresh, c.group, c.fresh)
		}
	}
}

// The fingerprint never claims more distance than there is.
func TestFingerprintIsABound(t *testing.T) {
	m := parse(t, "c1ccccc1CCO")
	c := NewComparer(m, Options{})
	for seed := range uint64(50) {
		a, b := c.take(randomPoints(m.NumAtoms(), seed)), c.take(randomPoints(m.NumAtoms(), seed+100))
		if seed%2 == 0 {
			b = newCloud(slices.Clone(a.x))
			for i := range b.x {
				b.x[i] *= 1.01 + 0.01*math.Sin(float64(i))
			}
			b = newCloud(b.x)
		}
		rmsd := c.fitter().best(a, b).rmsd
		if bound := fingerprintOf(a.x).apart(fingerprintOf(b.x)); bound > rmsd+1e-9 {
			t.Errorf("seed %d: bound %g, RMSD %g", seed, bound, rmsd)
		}
	}
}

func ExampleUnique() {
	m, _, err := smiles.Parse("CCCC")
	if err != nil {
		fmt.Println(err)
		return
	}
	shapes := [][]float64{chain(m, 180), chain(m, 64), chain(m, -64)} // anti, gauche, its mirror image
	energies := []float64{0, 0.001, 0.001}                            // hartree
	groups := Unique(NewComparer(m, Options{}), shapes, energies, DefaultThresholds())
	fmt.Println(len(groups), "shapes; the second stands for", len(groups[1].Members))
	// Output: 2 shapes; the second stands for 2
}

func BenchmarkUnique(b *testing.B) {
	m, _, err := smiles.Parse("CC(C)(C)c1ccc(cc1)CCNC(=O)CCc1ccccc1")
	if err != nil {
		b.Fatal(err)
	}
	var xs [][]float64
	for k := range uint64(100) {
		xs = append(xs, randomPoints(m.NumAtoms(), k))
	}
	c := NewComparer(m, Options{PolarHydrogens: true})
	for b.Loop() {
		Unique(c, xs, make([]float64, len(xs)), DefaultThresholds())
	}
}

// BenchmarkUniqueMany is a list as long as searches make them: 10,000 shapes,
// 500 different ones and their like, of a ligand of 60 atoms, all of one energy,
// so that each is compared with all leaders.
func BenchmarkUniqueMany(b *testing.B) {
	m, _, err := smiles.Parse("CC(C)(C)c1ccc(cc1)CCNC(=O)CCN(Cc1ccccc1)C(=O)C(F)(F)F")
	if err != nil {
		b.Fatal(err)
	}
	r := rand.New(rand.NewPCG(1, 1))
	var xs [][]float64
	for k := range 10000 {
		x := randomPoints(m.NumAtoms(), uint64(k%500))
		for i := range x {
			x[i] += 0.05 * r.NormFloat64()
		}
		xs = append(xs, moved(x, uint64(k)))
	}
	b.ReportMetric(float64(m.NumAtoms()), "atoms")
	c := NewComparer(m, Options{PolarHydrogens: true})
	for b.Loop() {
		if n := len(Unique(c, xs, make([]float64, len(xs)), DefaultThresholds())); n != 500 {
			b.Fatalf("%d groups, want 500", n)
		}
	}
}
