package screen

import (
	"fmt"
	"math"
	"testing"

	"torsieve/internal/relax"
	"torsieve/molecule"
	"torsieve/molecule/smiles"
	"torsieve/screen/generate"
	"torsieve/semiempirical"
)

const (
	shapesEach  = 6
	sameMinimum = 1e-5 // hartree
)

// A trial is one relaxation from the force field's geometry: as screen does it,
// and to a gradient that is smaller by far.
type trial struct {
	id           string
	m            *molecule.Molecule
	from         []float64
	loose, tight relax.Result
	failed       error
	changed      error
}

// TestRelaxationsReachTheMinimum is TestRelaxationsOfLigands in small: one ligand
// with an amide, a methyl group and a hydroxyl group.
func TestRelaxationsReachTheMinimum(t *testing.T) {
	starts, err := startsOf(t, "paracetamol", "CC(=O)Nc1ccc(O)cc1")
	if err != nil || len(starts) == 0 {
		t.Fatalf("%d shapes, %v", len(starts), err)
	}
	for _, solvent := range []string{"none", "water"} {
		r := starts[0]
		if err := r.run(t, solvent); err != nil || r.failed != nil || r.changed != nil {
			t.Fatal(err, r.failed, r.changed)
		}
		if off := r.loose.Energy - r.tight.Energy; math.Abs(off) > sameMinimum || r.loose.Gradients > 35 {
			t.Errorf("solvent %s: %.1e hartree above the tight relaxation after %d gradients", solvent, off, r.loose.Gradients)
		}
	}
}

// startsOf are shapes of a ligand as the generator hands them over.
func startsOf(t *testing.T, id, text string) ([]trial, error) {
	m, _, err := smiles.Parse(text)
	if err != nil {
		return nil, fmt.Errorf("%s: %w", id, err)
	}
	isomers, err := m.Isomers(64)
	if err != nil {
		return nil, fmt.Errorf("%s: %w", id, err)
	}
	o := generate.Defaults()
	o.Max, o.Relaxations = shapesEach, 30
	found, err := generate.Conformers(t.Context(), isomers[0], text, o)
	if err != nil {
		return nil, fmt.Errorf("%s: %w", id, err)
	}
	var out []trial
	for _, c := range found.Conformers {
		out = append(out, trial{id: id, m: isomers[0], from: c.X})
	}
	return out, nil
}

// run relaxes twice. Only a surface that cannot be had is an error.
func (r *trial) run(t *testing.T, solvent string) error {
	set := RelaxDefaults()
	set.Numbers = r.m.Numbers()
	var x []float64
	var err error
	if x, r.loose, err = r.relax(t, semiempirical.Options{Solvent: solvent}, set); err != nil {
		r.failed = err
		return nil //nolint:nilerr // it is counted
	}
	r.changed = SameMolecule(r.m, x)
	set.RMSGradient, set.MaxGradient, set.Descent, set.MaxGradients = 1e-5, 0, 1e-8, 2000
	_, r.tight, err = r.relax(t, semiempirical.Options{Solvent: solvent, Accuracy: 0.1}, set)
	return err
}

func (r *trial) relax(t *testing.T, o semiempirical.Options, set relax.Settings) ([]float64, relax.Result, error) {
	s, err := semiempirical.New(r.m.Numbers(), r.m.Charge(), r.m.Multiplicity(), o)
	if err != nil {
		return nil, relax.Result{}, err
	}
	x := offSaddle(r.m, r.from)
	_, res, err := Relax(t.Context(), s, x, set)
	return x, res, err
}
