package dedupe

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"torsieve/internal/geom"
	"torsieve/internal/units"
	"torsieve/molecule"
)

// moved turns and shifts a shape.
func moved(x []float64, seed uint64) []float64 {
	r := rand.New(rand.NewPCG(seed, 3))
	y := slices.Clone(x)
	all := make([]int, len(x)/3)
	for i := range all {
		all[i] = i
	}
	geom.RotateAbout(y, 0, 1, all, 6*r.Float64())
	geom.RotateAbout(y, 1, 2, all, 6*r.Float64())
	for i := range y {
		y[i] += float64(i%3) * 2.5
	}
	return y
}

// swapped exchanges the places of pairs of atoms.
func swapped(x []float64, pairs ...[2]int) []float64 {
	y := slices.Clone(x)
	for _, p := range pairs {
		for d := range 3 {
			y[3*p[0]+d], y[3*p[1]+d] = x[3*p[1]+d], x[3*p[0]+d]
		}
	}
	return y
}

// Renaming atoms that the graph cannot tell apart, and moving the whole, makes
// no other shape, whatever the shape: checks (1) to (3) of the method notes.
func TestRelabelledShapesAreTheSame(t *testing.T) {
	for _, c := range []struct {
		name, smiles string
		pairs        [][2]int
	}{
		{"biphenyl, one ring turned over", "c1ccccc1-c1ccccc1", [][2]int{{0, 4}, {1, 3}}},
		{"toluene, ortho and meta atoms", "Cc1ccccc1", [][2]int{{2, 6}, {3, 5}}},
		{"acetate oxygens", "CC(=O)[O-]", [][2]int{{2, 3}}},
		{"neopentane", "CC(C)(C)C", [][2]int{{0, 2}, {3, 4}}},
		{"1,4-di-tert-butylbenzene", "CC(C)(C)c1ccc(cc1)C(C)(C)C", [][2]int{{0, 2}, {11, 13}, {5, 9}, {6, 8}}},
		{"hexane, turned round", "CCCCCC", [][2]int{{0, 5}, {1, 4}, {2, 3}}},
	} {
		m := parse(t, c.smiles)
		x := randomPoints(m.NumAtoms(), 11)
		y := moved(swapped(x, c.pairs...), 2)
		comparer := NewComparer(m, Options{})
		if rmsd, _ := comparer.RMSD(x, y); rmsd > 1e-6 {
			t.Errorf("%s: RMSD %g bohr, want 0", c.name, rmsd)
		}
		if rmsd, _ := comparer.RMSD(y, x); rmsd > 1e-6 {
			t.Errorf("%s the other way: RMSD %g bohr, want 0", c.name, rmsd)
		}
	}
}

// chain places atoms one after the other, each bonded to the one before: 1.5
// angstrom, 112 degrees and the given dihedrals.
func chain(m *molecule.Molecule, dihedrals ...float64) []float64 {
	const r, angle = 1.5 * units.Angstrom, 112 * math.Pi / 180
	x := make([]float64, 3*m.NumAtoms())
	x[3] = r
	x[6], x[7] = r-r*math.Cos(angle), r*math.Sin(angle)
	for k, phi := range dihedrals {
		i := k + 3
		// Continue in the plane, trans, then turn.
		for d := range 3 {
			x[3*i+d] = x[3*(i-1)+d] + x[3*(i-2)+d] - x[3*(i-3)+d]
		}
		geom.RotateAbout(x, i-2, i-1, []int{i}, (phi-180)*math.Pi/180)
	}
	return x
}

// Check (4) of the method notes: the gauche forms of butane are mirror images
// and one shape; those of (R)-1,2-propanediol's chain O-C-C-O are not.
func TestGaucheForms(t *testing.T) {
	butane := parse(t, "CCCC")
	c := NewComparer(butane, Options{})
	plus, minus, anti := chain(butane, 63.7), chain(butane, -63.7), chain(butane, 180)
	if rmsd, mirrored := c.RMSD(plus, moved(minus, 4)); rmsd > 1e-6 || !mirrored {
		t.Errorf("butane g+ and g-: RMSD %g bohr, mirrored %v; want 0, true", rmsd, mirrored)
	}
	if rmsd, _ := c.RMSD(plus, anti); rmsd < 0.3*units.Angstrom {
		t.Errorf("butane gauche and anti: RMSD %g bohr, want two shapes", rmsd)
	}
	if rmsd, ok := c.SelfMirror(plus); !ok || rmsd < 0.3*units.Angstrom {
		t.Errorf("butane gauche: RMSD %g bohr to its mirror image (%v), want a chiral shape", rmsd, ok)
	}
	if rmsd, ok := c.SelfMirror(anti); !ok || rmsd > 1e-6 {
		t.Errorf("butane anti: RMSD %g bohr to its mirror image (%v), want 0", rmsd, ok)
	}
	if rmsd, _ := NewComparer(butane, Options{Handed: true}).RMSD(plus, minus); rmsd < 0.3*units.Angstrom {
		t.Errorf("butane g+ and g- with hands kept apart: RMSD %g bohr, want two shapes", rmsd)
	}
	diol := parse(t, "OC[C@@H](O)C") // O0 C1 C2 O3: the chain; the methyl last
	c = NewComparer(diol, Options{})
	if rmsd, _ := c.RMSD(chain(diol, 60, 180), chain(diol, -60, 180)); rmsd < 0.3*units.Angstrom {
		t.Errorf("(R)-1,2-propanediol g+ and g-: RMSD %g bohr, want two shapes", rmsd)
	}
}

// A meso compound's mirror image is itself with the halves exchanged.
func TestMesoMirror(t *testing.T) {
	m := parse(t, "F[C@H](Cl)[C@@H](F)Cl")
	x := randomPoints(m.NumAtoms(), 8)
	y := slices.Clone(x)
	mirror(y)
	y = moved(swapped(y, [2]int{0, 4}, [2]int{1, 3}, [2]int{2, 5}), 9)
	rmsd, mirrored := NewComparer(m, Options{}).RMSD(x, y)
	if rmsd > 1e-6 || !mirrored {
		t.Errorf("RMSD %g bohr, mirrored %v; want 0, true", rmsd, mirrored)
	}
}

// plain is a Comparer's answer by all renumberings one by one, each laid on by
// geom.RMSD, which has outside values of its own.
func plain(m *molecule.Molecule, a, b []float64, o Options) float64 {
	c := NewComparer(m, o)
	s := newSymmetry(m, c.atoms)
	maps, _ := s.renumberings(nil, 40000)
	same, inverse := s.byStereo(maps)
	x, y := c.take(a), c.take(b)
	best := math.Inf(1)
	for _, p := range same {
		r, _ := geom.RMSD(x.x, renumbered(y.x, p))
		best = min(best, r)
	}
	if !o.Handed {
		for _, p := range inverse {
			_, r := geom.RMSD(x.x, renumbered(y.x, p))
			best = min(best, r)
		}
	}
	return best
}

// Blocks and what moves whole parts give what the search through all
// renumberings gives: for molecules with symmetric groups of every kind, with
// and without stated stereo.
func TestBlocksMatchFullSearch(t *testing.T) {
	for _, text := range []string{
		"CC(C)(C)c1ccc(cc1)C(C)(C)C", "c1ccccc1", "C12C3C4C1C5C2C3C45", "c1ccc(cc1)N(c1ccccc1)c1ccccc1",
		"FC(F)(F)c1cc(cc(c1)C(F)(F)F)C(C)C", "[O-]C(=O)CC(CC([O-])=O)C([O-])=O", "C1CCC2(CC1)CCCCC2", "CCN(CC)CC",
		"O[C@H](C(=O)O)[C@@H](O)C(=O)O", "C[C@H]1CC[C@@H](C)CC1", "C/C=C/C(/C=C/C)/C=C\\C", "C1C2CC3CC1CC(C2)C3", "CP(C)(C)=O",
	} {
		m := parse(t, text)
		for _, o := range []Options{{}, {Handed: true}, {PolarHydrogens: true}} {
			c := NewComparer(m, o)
			if !c.Exact() {
				t.Errorf("%s: not exact", text)
			}
			for seed := range uint64(6) {
				a := randomPoints(m.NumAtoms(), seed)
				b := slices.Clone(a)
				if seed%2 == 1 {
					b = randomPoints(m.NumAtoms(), seed+50)
				}
				r := rand.New(rand.NewPCG(seed, 5))
				for i := range b {
					b[i] += 0.4 * r.NormFloat64()
				}
				b = moved(b, seed)
				want := plain(m, a, b, o)
				if got, _ := c.RMSD(a, b); math.Abs(got-want) > 2e-5 && !(math.IsInf(got, 1) && math.IsInf(want, 1)) {
					t.Errorf("%s, seed %d: RMSD %g bohr, full search %g", text, seed, got, want)
				}
				if low := c.profileOf(c.take(a).x).apart(c.profileOf(c.take(b).x)); low > want+1e-9 {
					t.Errorf("%s, seed %d: RMSD %g bohr, lower bound %g", text, seed, want, low)
				}
			}
		}
	}
}

// Where the combinations are too many for trying each, improving the blocks in
// turn finds near shapes all the same: neopentane with all hydrogens has 31104
// renumberings (testdata/reference/uff/generation_checks.json), a benzene with six
// trimethylsilyl groups far more.
func TestManyRenumberings(t *testing.T) {
	for _, text := range []string{
		"CC(C)(C)C", "C[Si](C)(C)c1c([Si](C)(C)C)c([Si](C)(C)C)c([Si](C)(C)C)c([Si](C)(C)C)c1[Si](C)(C)C",
	} {
		m := parse(t, text)
		o := Options{AllHydrogens: true}
		c := NewComparer(m, o)
		maps, _ := newSymmetry(m, c.atoms).renumberings(nil, 200)
		for seed := range uint64(5) {
			a := randomPoints(m.NumAtoms(), seed)
			p := maps[(int(seed)*37)%len(maps)]
			b := moved(renumbered(a, p), seed)
			for i := range b {
				b[i] += 0.01 * math.Sin(float64(i))
			}
			if got, _ := c.RMSD(a, b); got > 0.02 {
				t.Errorf("%s, seed %d: RMSD %g bohr, want 0.02 at most", text, seed, got)
			}
		}
	}
}

func TestSuperpose(t *testing.T) {
	m := parse(t, "CC(=O)[O-]")
	x := randomPoints(m.NumAtoms(), 4)
	y := moved(x, 5)
	NewComparer(m, Options{PolarHydrogens: true}).Superpose(x, y)
	for i := range x {
		if math.Abs(x[i]-y[i]) > 1e-9 {
			t.Fatalf("coordinate %d is %g, want %g", i, y[i], x[i])
		}
	}
}

func TestComparedAtoms(t *testing.T) {
	m := parse(t, "CCO") // hydrogens: 3 to 5 and 6, 7 on carbon, 8 on oxygen
	for _, c := range []struct {
		o    Options
		want []int
	}{
		{Options{}, []int{0, 1, 2}},
		{Options{PolarHydrogens: true}, []int{0, 1, 2, 8}},
		{Options{AllHydrogens: true}, []int{0, 1, 2, 3, 4, 5, 6, 7, 8}},
	} {
		if got := NewComparer(m, c.o).Atoms(); !slices.Equal(got, c.want) {
			t.Errorf("%+v compares %v, want %v", c.o, got, c.want)
		}
	}
}
