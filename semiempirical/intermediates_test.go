package semiempirical

import (
	"math"
	"testing"

	"torsieve/internal/gauss"
)

// intermediate holds matrices of one molecule in the converged state, with the
// functions of a p shell in the order y, z, x.
type intermediate struct {
	Molecule        string
	Functions       []string
	CN, Levels      []float64
	Overlap, H0     [][]float64
	Dipole          map[string][][]float64
	Quadrupole      map[string][][]float64
	Density         [][]float64
	GradientTerms   map[string][][]float64 `json:"gradient_terms"`
	Gamma           [][]float64
	Radii           []float64
	ShellPotential  []float64   `json:"shell_potential"`
	DipolePotential [][]float64 `json:"dipole_potential"`
	Rest            struct {
		QuadrupolePotential   [][][]float64 `json:"quadrupole_potential_converged_full_tensor"`
		EnergyWeightedDensity [][]float64   `json:"energy_weighted_density_converged"`
	}
}

func intermediates(t *testing.T) []intermediate {
	t.Helper()
	var file struct{ Molecules []intermediate }
	readReference(t, "intermediates.json.gz", &file)
	if len(file.Molecules) != 4 {
		t.Fatalf("%d molecules with intermediates, want 4", len(file.Molecules))
	}
	return file.Molecules
}

// order says at which place each of our functions stands in their matrices.
func order(b *basis) []int {
	var place []int
	for i, s := range b.shells {
		first := b.shellStart[i]
		if s.L == 1 {
			place = append(place, first+2, first, first+1)
			continue
		}
		for m := range 2*s.L + 1 {
			place = append(place, first+m)
		}
	}
	return place
}

// atGeometry prepares a model at a reference molecule's geometry.
func atGeometry(t *testing.T, name string) (*Surface, *referenceMolecule) {
	t.Helper()
	m := named(t, name)
	s := m.surface(t, 1e-4)
	if err := s.model.update(m.coordinates(), s.parts, true); err != nil {
		t.Fatal(err)
	}
	return s, m
}

func near(t *testing.T, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s: got %.13g, want %.13g (off by %.1e)", what, got, want, math.Abs(got-want))
	}
}

func allNear(t *testing.T, what string, got, want []float64, tol float64) {
	t.Helper()
	if len(got) != len(want) || len(want) == 0 {
		t.Errorf("%s: %d numbers, want %d", what, len(got), len(want))
		return
	}
	for i := range got {
		if !(math.Abs(got[i]-want[i]) <= tol) {
			t.Errorf("%s %d: got %.13g, want %.13g (off by %.1e)", what, i, got[i], want[i], math.Abs(got[i]-want[i]))
		}
	}
}

func TestIntegralsAndCoreHamiltonian(t *testing.T) {
	for _, want := range intermediates(t) {
		t.Run(want.Molecule, func(t *testing.T) {
			s, _ := atGeometry(t, want.Molecule)
			m := s.model
			n, at := m.basis.functions(), order(m.basis)
			allNear(t, "coordination number", m.cn.numbers, want.CN, 1e-10)
			allNear(t, "level", m.hamiltonian.level, want.Levels, 1e-10)
			allNear(t, "multipole radius", m.anisotropic.radius, want.Radii, 1e-9)
			for i := range n {
				for j := range n {
					near(t, "overlap", m.hamiltonian.s[i*n+j], want.Overlap[at[i]][at[j]], 1e-10)
					near(t, "H0", m.hamiltonian.h[i*n+j], want.H0[at[i]][at[j]], 1e-10)
				}
			}
			shells := len(m.basis.shells)
			for i := range shells {
				allNear(t, "gamma", m.coulomb.gamma[i*shells:(i+1)*shells], want.Gamma[i], 1e-10)
			}
			compareBlocks(t, m, &want, at)
		})
	}
}

// compareBlocks checks dipole and quadrupole integrals, both those with the
// origin on the second atom and, moved by toFirst, those on the first.
func compareBlocks(t *testing.T, m *model, want *intermediate, at []int) {
	t.Helper()
	b := m.basis
	for _, l := range m.hamiltonian.links {
		width := b.atomStart[l.b+1] - b.atomStart[l.b]
		for mu := b.atomStart[l.a]; mu < b.atomStart[l.a+1]; mu++ {
			for nu := b.atomStart[l.b]; nu < b.atomStart[l.b+1]; nu++ {
				x := [gauss.Operators]float64(l.block[((mu-b.atomStart[l.a])*width+nu-b.atomStart[l.b])*gauss.Operators:])
				compareOperators(t, want, &x, at[mu], at[nu])
				if l.a != l.b {
					toFirst(&x, &m.geometry.v[l.pair])
					compareOperators(t, want, &x, at[nu], at[mu])
				}
			}
		}
	}
}

func compareOperators(t *testing.T, want *intermediate, x *[gauss.Operators]float64, i, j int) {
	t.Helper()
	for k, axis := range []string{"x", "y", "z"} {
		near(t, "dipole "+axis, x[1+k], want.Dipole[axis][i][j], 1e-10)
	}
	for k, axes := range []string{"xx", "xy", "yy", "xz", "yz", "zz"} {
		row, column := [...]int{0, 0, 1, 0, 1, 2}[k], [...]int{0, 1, 1, 2, 2, 2}[k]
		var q float64
		for c := range 5 {
			q += x[4+c] * gauss.QuadrupoleTensor[c][row][column]
		}
		near(t, "quadrupole "+axes, q, want.Quadrupole[axes][i][j], 1e-10)
	}
}

// The stored density gives the converged moments, these the potentials, and
// these a Fock matrix whose orbitals give the same density again.
func TestDensityFedTerms(t *testing.T) {
	for _, want := range intermediates(t) {
		t.Run(want.Molecule, func(t *testing.T) {
			s, ref := atGeometry(t, want.Molecule)
			m, c := s.model, s.cycle
			n, at := m.basis.functions(), order(m.basis)
			for i := range n {
				for j := range n {
					c.density[i*n+j] = want.Density[at[i]][at[j]]
				}
			}
			core := m.hamiltonian.populate(c.out, c.density, m.geometry)
			near(t, "core energy", core, ref.Parts["core_hamiltonian_Tr_P_H0"], 1e-7)
			allNear(t, "charge", c.out.atom, ref.Charges, 2e-8)
			allNear(t, "shell charge", c.out.shell, ref.ShellCharges, 2e-8)
			allNear(t, "dipole", c.out.dipole, ref.AtomicDipoles, 2e-8)
			allNear(t, "quadrupole", c.out.quadrupole, ref.AtomicQuadrupoles, 2e-8)

			if err := c.orbitals.overlap(m.hamiltonian.s, false); err != nil {
				t.Fatal(err)
			}
			out, err := c.step(c.out.vec)
			if err != nil {
				t.Fatal(err)
			}
			comparePotentials(t, m.basis, c.potential, &want)
			allNear(t, "residual", out.Residual, make([]float64, len(out.Residual)), 1e-7)
			c.orbitals.energyDensity(s.energyRho, c.fock)
			for i := range n {
				for j := range n {
					near(t, "density", c.density[i*n+j], want.Density[at[i]][at[j]], 1e-7)
					near(t, "energy-weighted density", s.energyRho[i*n+j], want.Rest.EnergyWeightedDensity[at[i]][at[j]], 1e-7)
				}
			}
		})
	}
}

func comparePotentials(t *testing.T, b *basis, v *potential, want *intermediate) {
	t.Helper()
	for i := range b.shells {
		near(t, "shell potential", v.shell[i]+v.atom[b.shellAtom[i]], want.ShellPotential[i], 5e-8)
	}
	for a := range b.atoms() {
		allNear(t, "dipole potential", v.dipole[3*a:3*a+3], want.DipolePotential[a], 5e-8)
		q := v.quadrupole[6*a:]
		third := (q[0] + q[2] + q[5]) / 3 // the trace is of no consequence
		full := want.Rest.QuadrupolePotential[a]
		wantThird := (full[0][0] + full[1][1] + full[2][2]) / 3
		for k, ij := range [][2]int{{0, 0}, {0, 1}, {1, 1}, {0, 2}, {1, 2}, {2, 2}} {
			got, w := q[k], full[ij[0]][ij[1]]
			if ij[0] == ij[1] {
				got, w = got-third, w-wantThird
			}
			near(t, "quadrupole potential", got, w, 5e-8)
		}
	}
}

// Each part of the gradient alone, at the converged moments.
func TestGradientTerms(t *testing.T) {
	for _, want := range intermediates(t) {
		t.Run(want.Molecule, func(t *testing.T) {
			s, ref := atGeometry(t, want.Molecule)
			if _, err := s.Energy(t.Context(), ref.coordinates()); err != nil {
				t.Fatal(err)
			}
			m, c := s.model, s.cycle
			for name, add := range map[string]func(grad []float64){
				"repulsion":                       func(g []float64) { m.repulsion.energy(m.geometry, g) },
				"isotropic_second_order_explicit": func(g []float64) { m.coulomb.addGradient(m.geometry, c.out, g) },
				"anisotropic_ES_explicit_incl_radii": func(g []float64) {
					dEdCN := make([]float64, m.basis.atoms())
					m.anisotropic.addGradient(c.out, g, dEdCN)
					m.cn.addGradient(m.geometry, g, dEdCN)
				},
				"dispersion": func(g []float64) { m.dispersion.AddGradient(c.out.atom, g) },
			} {
				got := make([]float64, len(ref.X))
				add(got)
				terms := [][][]float64{want.GradientTerms[name]}
				if name == "dispersion" {
					terms = [][][]float64{want.GradientTerms["dispersion_two_body_explicit_incl_CN"], want.GradientTerms["dispersion_three_body"]}
				}
				for i := range got {
					var w float64
					for _, term := range terms {
						w += term[i/3][i%3]
					}
					near(t, name, got[i], w, 2e-9)
				}
			}
		})
	}
}
