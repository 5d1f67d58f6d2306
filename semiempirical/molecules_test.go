package semiempirical

import (
	"math"
	"slices"
	"testing"

	"torsieve/molecule"
)

// partNames translates the names of the reference's energy components.
var partNames = map[string]string{
	"repulsion":                          "repulsion",
	"core_hamiltonian_Tr_P_H0":           "core Hamiltonian",
	"isotropic_second_order_ES":          "second-order electrostatics",
	"isotropic_third_order_ES":           "third-order electrostatics",
	"anisotropic_ES":                     "anisotropic electrostatics",
	"anisotropic_XC":                     "anisotropic exchange-correlation",
	"dispersion_two_body_selfconsistent": "two-body dispersion",
	"dispersion_three_body_zero_charge":  "three-body dispersion",
	"electronic_entropy_minus_TS":        "electronic entropy",
}

// small and large divide the 60 molecules between the quick and the full suite.
func small(m *referenceMolecule) bool { return len(m.Elements) <= 31 }

func large(m *referenceMolecule) bool { return !small(m) }

func TestSmallMolecules(t *testing.T) { compareMolecules(t, small) }

// compareMolecules holds the chosen molecules to the reference, with limits as
// tight as the reference's (accuracy 1e-4) and with those of a relaxation.
//
// pdb-1o3m has a gap of 0.42 eV; the reference ends its search for the Fermi
// level 1.5e-8 electrons short, which shows there and in no other molecule.
func compareMolecules(t *testing.T, chosen func(*referenceMolecule) bool) {
	all := molecules(t)
	for i := range all {
		m := &all[i]
		if !chosen(m) {
			continue
		}
		t.Run(m.Name, func(t *testing.T) {
			tight := 2e-10
			if m.Name == "pdb-1o3m" {
				tight = 1e-9
			}
			compareMolecule(t, m, 1e-4, tight, 2e-9, 1e-8)
			compareMolecule(t, m, 0.1, 1e-8, 5e-6, 5e-5)
		})
	}
}

func compareMolecule(t *testing.T, m *referenceMolecule, accuracy, energy, gradient, charges float64) {
	t.Helper()
	s := m.surface(t, accuracy)
	grad := make([]float64, len(m.X))
	p, err := s.Gradient(t.Context(), grad, m.coordinates())
	if err != nil {
		t.Fatal(err)
	}
	near(t, "energy", p.Energy, m.Energy, energy)
	allNear(t, "gradient", grad, m.Gradient, gradient)
	allNear(t, "charges", p.Charges, m.Charges, charges)
	if accuracy > 1e-3 {
		return
	}
	allNear(t, "dipole", p.Dipole, m.Dipole, 2e-7)
	allNear(t, "shell charges", s.cycle.out.shell, m.ShellCharges, charges)
	allNear(t, "atomic dipoles", s.cycle.out.dipole, m.AtomicDipoles, 2e-8)
	allNear(t, "atomic quadrupoles", s.cycle.out.quadrupole, m.AtomicQuadrupoles, 2e-8)
	allNear(t, "coordination numbers", s.model.cn.numbers, m.CoordinationNumbers, 1e-9)
	compareOrbitals(t, s, m)
	for theirs, ours := range partNames {
		k := slices.IndexFunc(p.Parts, func(part molecule.Part) bool { return part.Name == ours })
		if k < 0 {
			t.Fatalf("no part %q", ours)
		}
		near(t, ours, p.Parts[k].Energy, m.Parts[theirs], 2e-8)
	}
}

func compareOrbitals(t *testing.T, s *Surface, m *referenceMolecule) {
	t.Helper()
	if m.OrbitalEnergies == nil {
		return
	}
	if err := s.cycle.orbitals.solve(s.cycle.fock, 0); err != nil {
		t.Fatal(err)
	}
	allNear(t, "orbital energies", s.cycle.orbitals.energy, m.OrbitalEnergies, 2e-8)
	for k, want := range m.Occupations {
		near(t, "occupation", s.cycle.orbitals.occAlpha[k]+s.cycle.orbitals.occBeta[k], want, 2e-7)
	}
}

// With the same mixing, self-consistency takes the reference's number of
// cycles.
func TestCycles(t *testing.T) {
	all := molecules(t)
	for i := range all {
		m := &all[i]
		if !small(m) {
			continue
		}
		for accuracy, want := range map[float64]int{1e-4: m.CyclesTight, 1: m.CyclesDefault} {
			p, err := m.surface(t, accuracy).Energy(t.Context(), m.coordinates())
			if err != nil {
				t.Fatal(err)
			}
			if p.Iterations != want {
				t.Errorf("%s at accuracy %g: %d cycles, reference %d", m.Name, accuracy, p.Iterations, want)
			}
		}
	}
}

// Ozone and the CN radical with cold and hot electrons.
func TestElectronicTemperature(t *testing.T) {
	var file struct{ Molecules []referenceMolecule }
	readReference(t, "electronic-temperature.json.gz", &file)
	hot := 0
	for i := range file.Molecules {
		m := &file.Molecules[i]
		t.Run(m.Name, func(t *testing.T) {
			compareMolecule(t, m, 1e-4, 2e-9, 2e-9, 2e-8)
			if math.Abs(m.Parts["electronic_entropy_minus_TS"]) > 1e-3 {
				hot++
			}
		})
	}
	if hot == 0 {
		t.Error("no case with a visible entropy")
	}
}
