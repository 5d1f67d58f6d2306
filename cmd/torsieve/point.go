package main

import (
	"context"
	"errors"
	"fmt"
	"time"

	"torsieve/internal/units"
	"torsieve/molecule"
	"torsieve/molecule/load"
	"torsieve/screen"
)

// pointCommand computes every structure of a file as it stands.
type pointCommand struct {
	File     string         `arg:"" help:"Structures with 3D coordinates: .sdf, .mol or .xyz, also gzip'd, or - with --format."`
	Tier     string         `help:"Level of theory: forcefield, semiempirical or hf." enum:"forcefield,semiempirical,hf" required:"" placeholder:"NAME"`
	Gradient bool           `help:"Print the gradient as well."`
	Accuracy float64        `group:"Methods" help:"Factor on the thresholds of self-consistency; smaller is tighter (default: ${default})." default:"0.1" placeholder:"X"`
	Input    inputOptions   `embed:""`
	Solvent  solventOptions `embed:"" set:"solvent=none"`
	Final    finalOptions   `embed:""`
	Cores    coreOptions    `embed:""`
	Memory   memoryOptions  `embed:""`
}

// Run computes and prints a line a record, in the file's order.
func (c *pointCommand) Run(s *session) error {
	solvent, err := c.Solvent.of(c.Tier)
	if err := errors.Join(err, c.Cores.check()); err != nil {
		return err
	}
	tier, err := newTier(c.Tier, tierOptions{finalOptions: c.Final, Accuracy: c.Accuracy, Solvent: solvent, Memory: int64(c.Memory.Memory)})
	if err != nil {
		return err
	}
	if c.Gradient && c.Tier == tierHF {
		return nothing(errors.New("the hf tier has no gradient"), "leave --gradient out")
	}
	var t tally
	err = inOrder(s, c.File, c.Input, c.Cores.jobs(), func(rec load.Record) any {
		return c.line(s.ctx, tier, rec)
	}, func(rec load.Record, line any) error {
		if f, failed := line.(failedLine); failed {
			t.failed++
			s.voice.failed("%s", f.said)
		} else {
			t.done++
		}
		return writeLine(s.stdout, line)
	})
	if err != nil {
		return err
	}
	return t.status()
}

// pointLine is the answer for one structure.
type pointLine struct {
	ID           string             `json:"id"`
	Record       int                `json:"record"`
	Tier         string             `json:"tier"`
	Method       string             `json:"method"`
	Solvent      string             `json:"solvent"`
	Charge       int                `json:"charge"`
	Multiplicity int                `json:"multiplicity"`
	Atoms        int                `json:"natoms"`
	Energy       float64            `json:"energy_hartree"`
	Components   map[string]float64 `json:"components_hartree"`
	Gradient     [][3]float64       `json:"gradient_hartree_per_bohr,omitempty"`
	Charges      []float64          `json:"charges_e,omitempty"`
	Dipole       []float64          `json:"dipole_debye,omitempty"`
	Iterations   int                `json:"iterations"`
	Seconds      float64            `json:"seconds"`
	Warnings     []string           `json:"warnings,omitempty"`
}

// failedLine is what stands for a structure that could not be computed.
type failedLine struct {
	ID     string `json:"id"`
	Record int    `json:"record"`
	Error  string `json:"error"`
	said   string // the same with its place, for a person
}

func (c *pointCommand) line(ctx context.Context, tier screen.Tier, rec load.Record) any {
	id := recordID(rec)
	if err := usable3D(rec); err != nil {
		return failedAt(c.File, rec, err)
	}
	begun := time.Now()
	p, grad, err := c.compute(ctx, tier, rec)
	if err != nil {
		return failedAt(c.File, rec, screen.TierError(tier, err))
	}
	line := pointLine{
		ID: id, Record: rec.Record, Tier: tier.Name(), Method: tier.Method(), Solvent: solventOf(tier),
		Charge: rec.Mol.Charge(), Multiplicity: rec.Mol.Multiplicity(), Atoms: rec.Mol.NumAtoms(),
		Energy: p.Energy, Components: map[string]float64{}, Charges: p.Charges,
		Iterations: p.Iterations, Seconds: time.Since(begun).Seconds(), Warnings: p.Warnings,
	}
	for _, part := range p.Parts {
		line.Components[part.Name] += part.Energy
	}
	for _, d := range p.Dipole {
		line.Dipole = append(line.Dipole, d/units.Debye)
	}
	for i := 0; i < len(grad); i += 3 {
		line.Gradient = append(line.Gradient, [3]float64{grad[i], grad[i+1], grad[i+2]})
	}
	return line
}

func (c *pointCommand) compute(ctx context.Context, tier screen.Tier, rec load.Record) (p molecule.Point, grad []float64, err error) {
	err = screen.Guard(func() error {
		surface, err := tier.Surface(rec.Mol)
		if err != nil {
			return err
		}
		if !c.Gradient {
			p, err = surface.Energy(ctx, rec.X)
			return err
		}
		sloped, ok := surface.(screen.Sloped)
		if !ok {
			return errors.New("this tier has no gradient")
		}
		grad = make([]float64, len(rec.X))
		p, err = sloped.Gradient(ctx, grad, rec.X)
		return err
	})
	return p, grad, err
}

// recordID is the name of a record in lines about structures: the whole title
// line of an SD record, else the id.
func recordID(rec load.Record) string {
	if rec.Title != "" {
		return rec.Title
	}
	return rec.ID
}

// usable3D refuses records that no tier can compute as they stand.
func usable3D(rec load.Record) error {
	switch {
	case rec.Err != nil:
		return rec.Err
	case rec.X == nil:
		return errors.New("no 3D coordinates (torsieve generate makes them)")
	case rec.Mol.NumAtoms() > screen.MaxAtoms:
		return fmt.Errorf("%d atoms are over the limit of %d", rec.Mol.NumAtoms(), screen.MaxAtoms)
	}
	return load.CheckGeometry(rec.Mol.Numbers(), rec.X)
}

func failedAt(file string, rec load.Record, err error) failedLine {
	said := err.Error()
	if !errors.As(err, new(*molecule.ParseError)) {
		said = fmt.Sprintf("%s: record %d (%s): %v", file, rec.Record, recordID(rec), err)
	}
	return failedLine{ID: recordID(rec), Record: rec.Record, Error: printable(said), said: said}
}
