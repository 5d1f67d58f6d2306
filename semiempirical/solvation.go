package semiempirical

import (
	"strings"

	"torsieve/molecule"
	"torsieve/semiempirical/solvent"
)

// newSolvent prepares the solvent of a molecule; nil for the gas phase.
func newSolvent(numbers []int, name string) (*solvent.Model, error) {
	if name == "" || strings.EqualFold(name, "none") {
		return nil, nil
	}
	return solvent.New(numbers, name)
}

// A reactionField is the field with which the solvent answers the charges. The
// model's update moves the solvent before all else, for that may fail.
type reactionField struct {
	model *solvent.Model
}

var _ contribution = reactionField{}

func (reactionField) name() string { return "solvent reaction field" }

func (reactionField) update(*geometry) {}

func (f reactionField) energy(m *moments, v *potential) float64 {
	return f.model.ReactionField(m.atom, v.atom)
}

// A hydrogenBonds is the energy of the hydrogen bonds to the solvent.
type hydrogenBonds struct {
	model *solvent.Model
}

var _ contribution = hydrogenBonds{}

func (hydrogenBonds) name() string { return "solvent hydrogen bonds" }

func (hydrogenBonds) update(*geometry) {}

func (h hydrogenBonds) energy(m *moments, v *potential) float64 {
	return h.model.HydrogenBonds(m.atom, v.atom)
}

// solventConstants are the parts of the solvent's energy that do not follow the
// charges.
func (m *model) solventConstants() []molecule.Part {
	if m.solvent == nil {
		return nil
	}
	return []molecule.Part{
		{Name: "solvent surface", Energy: m.solvent.Surface()},
		{Name: "solvent shift", Energy: m.solvent.Shift()},
	}
}
