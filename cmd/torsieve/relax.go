package main

import (
	"context"
	"errors"
	"io"
	"slices"
	"strconv"

	"torsieve/molecule/load"
	"torsieve/molecule/sdf"
	"torsieve/screen"
)

// relaxCommand optimises every structure of a file.
type relaxCommand struct {
	File     string         `arg:"" help:"Structures with 3D coordinates: .sdf, .mol or .xyz, also gzip'd, or - with --format."`
	Tier     string         `help:"Level of theory: forcefield or semiempirical." enum:"forcefield,semiempirical,hf" required:"" placeholder:"NAME"`
	Out      string         `help:"SD file for the relaxed structures." required:"" placeholder:"FILE.sdf"`
	Accuracy float64        `group:"Methods" help:"Factor on the thresholds of self-consistency; smaller is tighter (default: ${default})." default:"1" placeholder:"X"`
	Input    inputOptions   `embed:""`
	Solvent  solventOptions `embed:"" set:"solvent=none"`
	Cores    coreOptions    `embed:""`
}

// Run relaxes and writes the structures in the file's order.
func (c *relaxCommand) Run(s *session) error {
	solvent, err := c.Solvent.of(c.Tier)
	if err := errors.Join(err, c.Cores.check()); err != nil {
		return err
	}
	if c.Tier == tierHF {
		return nothing(errors.New("the hf tier has no gradient yet: it cannot relax"), "use --tier semiempirical")
	}
	tier, err := newTier(c.Tier, tierOptions{Accuracy: c.Accuracy, Solvent: solvent})
	if err != nil {
		return err
	}
	var t tally
	err = s.writeDone(c.Out, &t, func(w io.Writer) error {
		return inOrder(s, c.File, c.Input, c.Cores.jobs(), func(rec load.Record) relaxed {
			return c.relax(s.ctx, tier, rec)
		}, func(rec load.Record, r relaxed) error {
			if r.differs != nil {
				s.voice.warn("%s: record %d (%s): %v: the bonds written are those that were read", c.File, rec.Record, recordID(rec), r.differs)
			}
			if r.err == nil {
				t.done++
				return sdf.Write(w, r.out)
			}
			t.failed++
			s.voice.failed("%s", failedAt(c.File, rec, r.err).said)
			return nil
		})
	})
	if err != nil {
		return err
	}
	return t.status()
}

// relaxed is what became of one structure; differs says how it is no longer the
// molecule that was read.
type relaxed struct {
	out          sdf.Out
	err, differs error
}

func (c *relaxCommand) relax(ctx context.Context, tier screen.Tier, rec load.Record) (r relaxed) {
	if r.err = usable3D(rec); r.err != nil {
		return r
	}
	x := slices.Clone(rec.X)
	r.err = screen.Guard(func() error {
		surface, err := tier.Surface(rec.Mol)
		if err != nil {
			return err
		}
		sloped, ok := surface.(screen.Sloped)
		if !ok {
			return errors.New("this tier has no gradient")
		}
		set := screen.RelaxDefaults()
		set.Numbers = rec.Mol.Numbers()
		p, _, err := screen.Relax(ctx, sloped, x, set)
		if err != nil {
			return err
		}
		r.differs = screen.SameMolecule(rec.Mol, x)
		r.out = sdf.Out{Mol: rec.Mol, X: x, Title: recordID(rec), Fields: relaxedFields(rec, tier, p.Energy)}
		return nil
	})
	return r
}

// relaxedFields keeps the record's own data items and adds what was found. An
// item of the same name is replaced: it was true for the geometry before.
func relaxedFields(rec load.Record, tier screen.Tier, energy float64) []sdf.Field {
	fresh := []sdf.Field{
		{Name: "method", Value: tier.Method()},
		{Name: energyField(tier), Value: strconv.FormatFloat(energy, 'f', 9, 64)},
	}
	var fields []sdf.Field
	for _, f := range rec.Fields {
		if !slices.ContainsFunc(fresh, func(n sdf.Field) bool { return n.Name == f.Name }) {
			fields = append(fields, f)
		}
	}
	return append(fields, fresh...)
}

// energyField is the name of a tier's energy in SD files and tables.
func energyField(tier screen.Tier) string { return "e_" + tier.Name() + "_hartree" }
