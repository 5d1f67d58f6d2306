package semiempirical

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"
)

// followed prepares the orbitals of a converged molecule, and the Fock matrix
// that goes with them.
func followed(t *testing.T, name string) (o *orbitals, f []float64) {
	t.Helper()
	m := named(t, name)
	s := m.surface(t, 1e-4)
	if _, err := s.Energy(t.Context(), m.coordinates()); err != nil {
		t.Fatal(err)
	}
	o = s.cycle.orbitals
	if o.alpha == o.beta { // small molecules have none
		o.near = newSubspace(o.n, int(o.alpha))
	}
	if err := o.solve(s.cycle.fock, 0); err != nil {
		t.Fatal(err)
	}
	return o, s.cycle.fock
}

// shaken is a Fock matrix with symmetric noise of so many hartree.
func shaken(f []float64, n int, noise float64) []float64 {
	rng := rand.New(rand.NewPCG(3, 8))
	g := slices.Clone(f)
	for i := range n {
		for j := range i + 1 {
			d := noise * rng.NormFloat64()
			g[i*n+j] += d
			if i != j {
				g[j*n+i] += d
			}
		}
	}
	return g
}

// Following the occupied space gives the densities of the full solution, which
// is the judge; a smaller tolerance brings them nearer.
func TestSubspaceIsTheFullSolution(t *testing.T) {
	for _, name := range []string{"glycine", "fluoride-water-anion", "TiCl4", "H3O-cation"} {
		o, f := followed(t, name)
		n := o.n
		for _, noise := range []float64{1e-5, 1e-4} {
			for _, tol := range []float64{1e-7, 1e-12} {
				g := shaken(f, n, noise)
				p, w, wantP, wantW := make([]float64, n*n), make([]float64, n*n), make([]float64, n*n), make([]float64, n*n)
				if err := o.solve(g, tol); err != nil {
					t.Fatal(err)
				}
				if !o.isNear {
					t.Errorf("%s, noise %g: not followed", name, noise)
				}
				o.density(p)
				o.energyDensity(w, g)
				if err := o.solve(g, 0); err != nil {
					t.Fatal(err)
				}
				if o.isNear {
					t.Fatal("a full solution was asked for")
				}
				o.density(wantP)
				o.energyDensity(wantW, g)
				limit := 10*tol + 1e-13
				for i := range p {
					if math.Abs(p[i]-wantP[i]) > limit || math.Abs(w[i]-wantW[i]) > limit {
						t.Errorf("%s, noise %g, tolerance %g: density %d is %.15g, want %.15g; energy-weighted %.15g, want %.15g",
							name, noise, tol, i, p[i], wantP[i], w[i], wantW[i])
						break
					}
				}
				if err := o.solve(f, 0); err != nil { // back to the start
					t.Fatal(err)
				}
			}
		}
	}
}

// What cannot be followed is solved from the start: a matrix far away, levels
// that may be partly filled, spins that differ.
func TestSubspaceStepsBack(t *testing.T) {
	o, f := followed(t, "glycine")
	if err := o.solve(shaken(f, o.n, 0.3), 1e-9); err != nil || o.isNear {
		t.Errorf("followed to a matrix that has little to do with the first (%v)", err)
	}
	o, f = followed(t, "pdb-1o3m") // gap 0.42 eV
	if err := o.solve(shaken(f, o.n, 1e-6), 1e-9); err != nil || o.isNear {
		t.Errorf("followed with a small gap (%v)", err)
	}
	o, f = followed(t, "HOO-radical")
	if err := o.solve(shaken(f, o.n, 1e-6), 1e-9); err != nil || o.isNear {
		t.Errorf("followed an open shell (%v)", err)
	}
}
