package forcefield

import (
	"context"
	"errors"
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"torsieve/internal/geom"
	"torsieve/internal/gradcheck"
	"torsieve/internal/relax"
	"torsieve/molecule"
)

// loose is the accuracy of screening, tight that of comparing minima.
var (
	loose = relax.Settings{RMSGradient: 1e-4, MaxGradients: 5000}
	tight = relax.Settings{MaxGradient: 1e-7, MaxGradients: 20000}
)

// spread places atoms on a crooked lattice: no geometry, but one where every
// term of any molecule is finite.
func spread(n int, seed uint64) []float64 {
	r := rand.New(rand.NewPCG(seed, 9))
	x := make([]float64, 3*n)
	side := int(math.Ceil(math.Cbrt(float64(n))))
	for i := range n {
		for d, cell := range []int{i % side, i / side % side, i / side / side} {
			x[3*i+d] = 3.2*float64(cell) + 1.5*r.Float64()
		}
	}
	return x
}

// odd are molecules whose atoms need the rarer rules.
var odd = []string{
	"C1CC1", "C=C1CC1", "C1=CC1", "C1CCC1=O", "O1CC1", "c1ccc2c(c1)CC2", "C[NH3+]", "CC(=O)[O-]", "C[N+](=O)[O-]",
	"NC(=[NH2+])N", "CS(=O)(=O)NC", "CP(=O)(O)OC", "FS(F)(F)(F)(F)c1ccccc1", "FP(F)(F)(F)F", "CC#CC", "C=C=C", "N=[N+]=[N-]",
	"OB(O)C", "C[Si](C)(C)O[Si](C)(C)C", "CSSC", "C[Se]C", "O=Cl(=O)(=O)O", "CI", "[Na+].[Cl-]", "[He]", "[H][H]",
}

func TestSurfaceGradients(t *testing.T) {
	for _, text := range odd {
		for name, o := range map[string]Options{"reference": Reference(), "defaults": Defaults()} {
			t.Run(name+" "+text, func(t *testing.T) {
				m := parse(t, text)
				if m.NumAtoms() == 1 {
					return // no energy to differentiate; see TestSingleAtom
				}
				s, err := New(m, o)
				if err != nil {
					t.Fatal(err)
				}
				x := spread(m.NumAtoms(), 4)
				if err := s.FreezeCharges(x); err != nil {
					t.Fatal(err)
				}
				checkGradient(t, s, x)
			})
		}
	}
}

func checkGradient(t *testing.T, s *Surface, x []float64) {
	gradcheck.Run(t, x, 1e-3, 1e-8, func(x, grad []float64) float64 {
		p, err := s.Energy(t.Context(), x)
		if grad != nil {
			p, err = s.Gradient(t.Context(), grad, x)
		}
		if err != nil {
			t.Fatal(err)
		}
		return p.Energy
	})
}

func TestLigandGradients(t *testing.T) {
	for _, rec := range records(t, "uff", "ligands.sdf.gz")[:4] {
		s := defaultSurface(t, rec.Mol, rec.X)
		checkGradient(t, s, rec.X)
		checkGradient(t, s.Softened(), rec.X)
	}
}

func defaultSurface(t testing.TB, m *molecule.Molecule, x []float64) *Surface {
	t.Helper()
	s, err := New(m, Defaults())
	if err != nil {
		t.Fatal(err)
	}
	if err := s.FreezeCharges(x); err != nil {
		t.Fatal(err)
	}
	return s
}

// TestLaws: energies do not feel motions of the whole, nor mirroring; the
// gradient has no net force and no net torque.
func TestLaws(t *testing.T) {
	rec := records(t, "uff", "ligands.sdf.gz")[0]
	s := defaultSurface(t, rec.Mol, rec.X)
	x := slices.Clone(rec.X)
	grad := make([]float64, len(x))
	p, err := s.Gradient(t.Context(), grad, x)
	if err != nil {
		t.Fatal(err)
	}
	var parts float64
	for _, part := range p.Parts {
		parts += part.Energy
	}
	near(t, "sum of the parts", parts, p.Energy, 1e-14)
	var force, torque [3]float64
	for i := 0; i < len(x); i += 3 {
		g, r := vec{grad[i], grad[i+1], grad[i+2]}, vec{x[i], x[i+1], x[i+2]}
		c := cross(r, g)
		for d := range 3 {
			force[d] += g[d]
			torque[d] += c[d]
		}
	}
	for d := range 3 {
		near(t, "net force", force[d], 0, 1e-12)
		near(t, "net torque", torque[d], 0, 1e-10)
	}
	all := make([]int, rec.Mol.NumAtoms())
	for i := range all {
		all[i] = i
	}
	geom.RotateAbout(x, 0, 7, all, 1.234)
	for i := range x {
		x[i] += float64(i % 3)
	}
	moved, err := s.Energy(t.Context(), x)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "energy after a motion", moved.Energy, p.Energy, 1e-11)
	for i := 0; i < len(x); i += 3 {
		x[i] = -x[i]
	}
	mirrored, err := s.Energy(t.Context(), x)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "energy of the mirror image", mirrored.Energy, p.Energy, 1e-11)
}

func TestClonesAgree(t *testing.T) {
	rec := records(t, "uff", "ligands.sdf.gz")[1]
	s := defaultSurface(t, rec.Mol, rec.X)
	results := make(chan relax.Result)
	for range 4 {
		c := s.Clone()
		go func() {
			res, err := c.Minimise(context.Background(), slices.Clone(rec.X), loose)
			if err != nil {
				t.Error(err)
			}
			results <- res
		}()
	}
	first := <-results
	for range 3 {
		if r := <-results; r != first {
			t.Errorf("%+v differs from %+v", r, first)
		}
	}
}

func TestSoftenedHasNoCharges(t *testing.T) {
	rec := records(t, "uff", "ligands.sdf.gz")[0]
	p, err := defaultSurface(t, rec.Mol, rec.X).Softened().Energy(t.Context(), rec.X)
	if err != nil {
		t.Fatal(err)
	}
	for _, part := range p.Parts {
		if part.Name == "electrostatic" {
			t.Error("a softened surface has an electrostatic term")
		}
	}
}

// TestSoftStart: all atoms within a box of 3 bohr come apart without violence.
func TestSoftStart(t *testing.T) {
	m := parse(t, "CC(C)CC(=O)N1CCCC1")
	s, err := New(m, Defaults())
	if err != nil {
		t.Fatal(err)
	}
	x := spread(m.NumAtoms(), 2)
	for i := range x {
		x[i] *= 0.3
	}
	for _, surface := range []*Surface{s.Softened(), s} {
		res, err := surface.Minimise(t.Context(), x, loose)
		if err != nil || res.Status != relax.Converged {
			t.Fatalf("%+v, %v", res, err)
		}
	}
}

// TestModelHessianSavesGradients: the optimiser's model is worth at least half
// of the gradients of a ligand.
func TestModelHessianSavesGradients(t *testing.T) {
	for _, rec := range records(t, "uff", "ligands.sdf.gz")[:3] {
		s := defaultSurface(t, rec.Mol, rec.X)
		with, err := s.Minimise(t.Context(), slices.Clone(rec.X), loose)
		if err != nil {
			t.Fatal(err)
		}
		without, err := relax.Minimise(t.Context(), s.Slope(), slices.Clone(rec.X), loose)
		if err != nil {
			t.Fatal(err)
		}
		if with.Status != relax.Converged || without.Status != relax.Converged || 2*with.Gradients > without.Gradients {
			t.Errorf("%s: %+v with the model, %+v without", rec.Title, with, without)
		}
	}
}

func TestNoAllocationInTheSlope(t *testing.T) {
	rec := records(t, "uff", "ligands.sdf.gz")[0]
	slope := defaultSurface(t, rec.Mol, rec.X).Slope()
	grad := make([]float64, len(rec.X))
	n := testing.AllocsPerRun(20, func() {
		if _, err := slope.Gradient(t.Context(), grad, rec.X); err != nil {
			t.Fatal(err)
		}
	})
	if n != 0 {
		t.Errorf("%g allocations in a gradient", n)
	}
}

func TestSingleAtom(t *testing.T) {
	s, err := New(parse(t, "[He]"), Defaults())
	if err != nil {
		t.Fatal(err)
	}
	x := []float64{1, 2, 3}
	if err := s.FreezeCharges(x); err != nil {
		t.Fatal(err)
	}
	p, err := s.Gradient(t.Context(), make([]float64, 3), x)
	if err != nil || p.Energy != 0 {
		t.Errorf("energy %g, error %v; want 0 and none", p.Energy, err)
	}
}

func TestImpossibleGeometries(t *testing.T) {
	m := parse(t, "CCO")
	good := spread(m.NumAtoms(), 1)
	with := func(at int, v float64) []float64 {
		x := slices.Clone(good)
		x[at] = v
		return x
	}
	same := slices.Clone(good)
	copy(same[12:15], same[0:3])
	cancelled, cancel := context.WithCancel(t.Context())
	cancel()
	for _, c := range []struct {
		name string
		ctx  context.Context
		x    []float64
		want error
	}{
		{"not a number", t.Context(), with(4, math.NaN()), ErrNotFinite},
		{"infinite", t.Context(), with(4, math.Inf(-1)), ErrNotFinite},
		{"too far to square", t.Context(), with(4, 1e200), ErrNotFinite},
		{"coincident", t.Context(), same, ErrCoincident},
		{"interrupted", cancelled, good, context.Canceled},
	} {
		s, err := New(m, Defaults())
		if err != nil {
			t.Fatal(err)
		}
		if _, err := s.Gradient(c.ctx, make([]float64, len(c.x)), c.x); !errors.Is(err, c.want) {
			t.Errorf("%s: error %v, want %v", c.name, err, c.want)
		}
	}
}

func TestCoincidentAtomsHaveNoCharges(t *testing.T) {
	s, err := New(parse(t, "CCO"), Defaults())
	if err != nil {
		t.Fatal(err)
	}
	if err := s.FreezeCharges(make([]float64, 27)); err == nil {
		t.Error("charges of atoms at one place: no error")
	}
}

func TestRefusals(t *testing.T) {
	_, err := New(parse(t, "C[Rf]"), Defaults())
	var unsupported *Unsupported
	if !errors.As(err, &unsupported) || unsupported.Atom != 1 || !strings.Contains(err.Error(), "element Rf") {
		t.Errorf("rutherfordium: error %v, want *Unsupported for atom 1", err)
	}
	o := Defaults()
	o.Charges = "formal"
	if _, err := New(parse(t, "C"), o); err == nil {
		t.Error("unknown charges: no error")
	}
}

func TestWarnings(t *testing.T) {
	for text, want := range map[string]string{
		"C[Zn]C":                 "metal",
		"FP(F)(F)(F)F":           "5 neighbours",
		"FS(F)(F)(F)(F)c1ccccc1": "6 neighbours",
	} {
		m := parse(t, text)
		s, err := New(m, Defaults())
		if err != nil {
			t.Fatal(err)
		}
		p, err := s.Energy(t.Context(), spread(m.NumAtoms(), 3))
		if err != nil || len(p.Warnings) != 1 || !strings.Contains(p.Warnings[0], want) {
			t.Errorf("%s: warnings %q, error %v; want one about %q", text, p.Warnings, err, want)
		}
	}
}

// TestChargesAreSymmetric: equivalent atoms have equal charges, whatever the
// geometry they were taken at, and the sum is the molecule's charge.
func TestChargesAreSymmetric(t *testing.T) {
	m := parse(t, "CC(=O)[O-]")
	s := defaultSurface(t, m, spread(m.NumAtoms(), 6))
	var sum float64
	for _, q := range s.charges {
		sum += q
	}
	near(t, "total charge", sum, -1, 1e-12)
	near(t, "oxygens", s.charges[2], s.charges[3], 1e-14)
	near(t, "hydrogens", s.charges[4], s.charges[6], 1e-14)
}
