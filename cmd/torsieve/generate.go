package main

import (
	"errors"
	"fmt"
	"io"
	"strconv"

	"torsieve/internal/units"
	"torsieve/molecule/sdf"
	"torsieve/screen"
	"torsieve/screen/generate"
)

// generateCommand stops after the generator and the force field.
type generateCommand struct {
	Ligands []string      `arg:"" help:"Ligands: .smi, .csv, .tsv, .sdf, .mol, .xyz, also gzip'd, or - with --format."`
	Out     string        `help:"SD file for the conformers." required:"" placeholder:"FILE.sdf"`
	Max     int           `help:"At most so many conformers per ligand; the first ones are the best choice of any smaller number (default: ${default})." default:"250" placeholder:"N"`
	Input   inputOptions  `embed:""`
	Intake  intakeOptions `embed:""`
	Cores   coreOptions   `embed:""`
	Seed    seedOptions   `embed:""`
}

// Run generates ligand by ligand, on several cores, and writes in the order of
// the input.
func (c *generateCommand) Run(s *session) error {
	if c.Max < 1 {
		return nothing(fmt.Errorf("max: want at least 1, have %d", c.Max), "")
	}
	if err := c.Cores.check(); err != nil {
		return err
	}
	ligands, _, err := s.ligands(c.Ligands, c.Input, c.Intake, "")
	if err != nil {
		return err
	}
	var t tally
	err = s.writeDone(c.Out, &t, func(w io.Writer) error { return c.all(s, ligands, w, &t) })
	if err != nil {
		return err
	}
	return t.status()
}

// found is what the generator made of one ligand.
type found struct {
	result generate.Result
	err    error
}

func (c *generateCommand) all(s *session, ligands []*screen.Ligand, w io.Writer, t *tally) error {
	progress := newProgress(s.voice)
	defer progress.close()
	answers := parallel(s.ctx, len(ligands), c.Cores.jobs(), func(i int) found { return c.one(s, ligands[i]) })
	for i, l := range ligands {
		f, err := answers(i)
		if err != nil {
			return err
		}
		switch {
		case l.Err != nil: // has been told
			t.failed++
		case f.err != nil:
			t.failed++
			s.voice.failed("%s: %v", l.Name(), f.err)
		default:
			t.done++
			if err := writeConformers(w, l, f.result); err != nil {
				return err
			}
			for _, warning := range f.result.Warnings {
				s.voice.warn("%s: %s", l.ID, warning)
			}
			s.voice.note("%d/%d %s: %s", i+1, len(ligands), l.ID, count(len(f.result.Conformers), "conformer"))
		}
		progress.set(float64(i+1)/float64(len(ligands)), fmt.Sprintf("%d/%d ligands", i+1, len(ligands)))
	}
	return nil
}

func (c *generateCommand) one(s *session, l *screen.Ligand) (f found) {
	if l.Err != nil {
		return f
	}
	f.err = screen.Guard(func() (err error) {
		o := generate.Spread()
		o.Max, o.Seed = c.Max, c.Seed.Seed
		f.result, err = screen.Shapes(s.ctx, l, o)
		return err
	})
	if f.err == nil && len(f.result.Conformers) == 0 {
		f.err = errors.New("no shape was found")
	}
	return f
}

// writeConformers writes the shapes of one ligand, every record titled with its
// id.
func writeConformers(w io.Writer, l *screen.Ligand, r generate.Result) error {
	lowest := r.Conformers[0].Energy
	for _, c := range r.Conformers {
		lowest = min(lowest, c.Energy)
	}
	for i, c := range r.Conformers {
		err := sdf.Write(w, sdf.Out{Mol: l.Mol, X: c.X, Title: l.ID, Fields: []sdf.Field{
			{Name: "ligand", Value: l.ID},
			{Name: "conformer", Value: strconv.Itoa(i + 1)},
			{Name: "e_forcefield_hartree", Value: strconv.FormatFloat(c.Energy, 'f', 9, 64)},
			{Name: "relative_kcal_mol", Value: strconv.FormatFloat((c.Energy-lowest)/units.KcalPerMol, 'f', 4, 64)},
			{Name: "family", Value: strconv.Itoa(c.Family)},
		}})
		if err != nil {
			return err
		}
	}
	return nil
}
