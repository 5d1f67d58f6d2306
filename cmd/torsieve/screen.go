package main

import (
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"runtime"
	"time"

	"torsieve/internal/linalg"
	"torsieve/internal/units"
	"torsieve/screen"
	"torsieve/screen/report"
)

// screenCommand is the main job.
type screenCommand struct {
	Ligands []string `arg:"" help:"Ligands: .smi, .csv, .tsv, .sdf, .mol, .xyz, also gzip'd, or - with --format."`
	Out     string   `help:"Run folder: made if it is not there." required:"" placeholder:"DIR"`
	Fresh   bool     `help:"Set the run in the folder aside first, instead of going on with it."`

	Slice slice `help:"Only every n-th ligand of the list, from the i-th on: one of n independent runs for merge." placeholder:"i/n"`

	Through       string    `group:"Methods" help:"Last tier to run: forcefield, semiempirical or hf." enum:"forcefield,semiempirical,hf" default:"hf"`
	MaxConformers int       `group:"Methods" help:"Cap on the conformers that enter the semi-empirical tier (default: ${default})." default:"${max_conformers}" placeholder:"N"`
	Window        *float64  `group:"Methods" help:"Energy window for the last tier (default: 5 to 10, by the rotatable bonds)." placeholder:"KCAL"`
	Temperature   []float64 `group:"Methods" help:"Temperature of the ensemble; may be repeated, the first one ranks (default: ${default})." default:"298.15" placeholder:"K"`
	Thermal       bool      `group:"Methods" help:"Add the free energy of the nuclei (quasi-RRHO), from vibrations at the semi-empirical level: six gradients per atom and conformer."`
	Accuracy      float64   `group:"Methods" help:"Factor on the thresholds of self-consistency; smaller is tighter (default: ${default})." default:"1" placeholder:"X"`

	Store string `group:"Work" help:"Database of the run: a file, or the URL of a PostgreSQL server (default: run.db in the run folder)." placeholder:"URL"`
	Log   string `group:"Work" help:"Log of every step, JSON lines (default: log.jsonl in the run folder)." placeholder:"FILE"`

	Input   inputOptions   `embed:""`
	Intake  intakeOptions  `embed:""`
	Solvent solventOptions `embed:"" set:"solvent=water"`
	Final   finalOptions   `embed:""`
	Cores   coreOptions    `embed:""`
	Memory  memoryOptions  `embed:""`
	Seed    seedOptions    `embed:""`
}

// Run reads the ligands, computes them, and leaves a run folder.
func (c *screenCommand) Run(s *session) error {
	begun := time.Now()
	tiers, options, err := c.settings()
	if err != nil {
		return err
	}
	solvent := solventAbove(tiers)
	ligands, inputs, err := s.ligands(c.Ligands, c.Input, c.Intake, solvent)
	if err != nil {
		return err
	}
	ligands = c.Slice.of(ligands)
	if !anyReadable(ligands) {
		return &failure{code: exitNothing} // nothing is written for it
	}
	run := c.describe(s, tiers, inputs, begun)
	folder, err := s.takeFolder(c.Out, c.Store, c.Fresh, run)
	if err != nil {
		return err
	}
	log, closeLog, err := c.openLog()
	if err != nil {
		return nothing(errors.Join(err, folder.close()), "")
	}
	defer closeLog()
	s.voice.note("%s", surroundings(solvent, len(tiers)))
	options.Store, options.Version, options.Begun = folder.store, identity(), run.Begun
	err = c.compute(s, ligands, tiers, options, folder, run, log)
	if closeErr := folder.close(); err == nil && closeErr != nil {
		return nothing(closeErr, "")
	}
	return err
}

// compute runs the ligands and writes what became of them, also when a signal
// ends it.
func (c *screenCommand) compute(s *session, ligands []*screen.Ligand, tiers []screen.Tier, o screen.Options,
	folder *runFolder, run *report.Run, log *logger,
) error {
	stages := len(tiers)
	if o.Thermal {
		stages++
	}
	watch := newWatcher(s.voice, log, ligands, stages)
	o.Watch = watch.see
	err := screen.Run(s.ctx, ligands, tiers, o, func(r *screen.Result) error {
		run.Counts.Add(r.Status)
		return folder.Keep(r)
	})
	watch.close()
	stopped := interrupted(s.ctx, err)
	if err != nil && !stopped {
		return nothing(err, "")
	}
	run.End(time.Now())
	if writeErr := folder.Close(run, !stopped); writeErr != nil {
		return nothing(writeErr, "")
	}
	s.voice.note("%s", summary(run.Counts, c.Out))
	if stopped {
		s.voice.note("the same command goes on from here")
		return err
	}
	return runStatus(run.Counts)
}

// settings turns options into those of the pipeline and checks them.
func (c *screenCommand) settings() ([]screen.Tier, screen.Options, error) {
	o := screen.Defaults()
	o.Temperatures = c.Temperature
	o.MaxConformers = c.MaxConformers
	if c.Window != nil {
		if !(*c.Window > 0) {
			return nil, o, nothing(fmt.Errorf("window: want more than 0 kcal/mol, have %g", *c.Window), "")
		}
		o.Window = *c.Window * units.KcalPerMol
	}
	o.Seed, o.Jobs, o.Memory = c.Seed.Seed, c.Cores.jobs(), int64(c.Memory.Memory)
	solvent, err := c.Solvent.name()
	if err != nil {
		return nil, o, err
	}
	if o.Thermal = c.Thermal; o.Thermal && c.Through == tierForceField {
		return nil, o, nothing(screen.ErrNoVibrations, "go --through semiempirical or hf")
	}
	if err := o.Check(); err != nil {
		return nil, o, nothing(err, "")
	}
	tiers, err := tiersThrough(c.Through, tierOptions{
		finalOptions: c.Final, Accuracy: c.Accuracy, Solvent: solvent, Memory: o.Memory, Steep: o.Thermal,
	})
	return tiers, o, err
}

// solventAbove is the solvent that the tiers of a run know, empty for none.
func solventAbove(tiers []screen.Tier) string {
	for _, t := range tiers {
		if s, ok := t.(screen.Solvated); ok && s.Solvent() != "" {
			return s.Solvent()
		}
	}
	return ""
}

// surroundings says once what the energies of a run are those of.
func surroundings(solvent string, tiers int) string {
	switch {
	case solvent != "" && tiers > 2:
		return "energies in " + solvent + ": ALPB at the semi-empirical level, its solvation added to the last one's"
	case solvent != "":
		return "energies in " + solvent + " (ALPB)"
	case tiers == 1:
		return "gas phase: the force field knows no solvent"
	}
	return "gas phase: no solvent"
}

// describe fills what run.json says before anything is computed.
func (c *screenCommand) describe(s *session, tiers []screen.Tier, inputs []report.Input, begun time.Time) *report.Run {
	run := &report.Run{
		Program: "torsieve", Version: fullVersion(), Go: runtime.Version(),
		Command: s.command, Settings: c.values(), Methods: map[string]string{}, Inputs: inputs,
		Machine: report.Machine{
			System: runtime.GOOS + "/" + runtime.GOARCH, Processor: processor(), Kernel: linalg.Kernel(),
			Cores: runtime.NumCPU(), Jobs: c.Cores.jobs(), Memory: int64(c.Memory.Memory),
		},
		Begun: begun.Format(time.RFC3339),
	}
	for _, t := range tiers {
		run.Methods[t.Name()] = t.Method()
	}
	if c.Thermal {
		run.Methods[screen.ThermalStage] = "quasi-rigid-rotor-harmonic-oscillator (Grimme 2012) at the semi-empirical level"
	}
	return run
}

// values are the settings that decide the results.
func (c *screenCommand) values() map[string]any {
	return map[string]any{
		"through": c.Through, "max-conformers": c.MaxConformers, "window": c.Window,
		"temperature": c.Temperature, "thermal": c.Thermal, "accuracy": c.Accuracy,
		"final": c.Final.Final, "basis": c.Final.Basis, "two-electron": c.Final.TwoElectron, "solvent": c.Solvent.Solvent,
		"stereo": c.Intake.Stereo, "salts": c.Intake.Salts, "seed": c.Seed.Seed, "memory": int64(c.Memory.Memory),
		"portable": c.Cores.Portable,
		"format":   c.Input.Format, "id-field": c.Input.IDField,
		"smiles-column": c.Input.SmilesColumn, "id-column": c.Input.IDColumn,
		"charge": c.Input.Charge, "multiplicity": c.Input.Multiplicity,
	}
}

// openLog opens the log, at its end where an earlier run has written one;
// closing it is told only where something was lost.
func (c *screenCommand) openLog() (*logger, func(), error) {
	path := c.Log
	if path == "" {
		path = filepath.Join(c.Out, report.LogFile)
	}
	f, err := os.OpenFile(path, os.O_WRONLY|os.O_CREATE|os.O_APPEND, 0o644)
	if err != nil {
		return nil, nil, err
	}
	return newLogger(f), func() { _ = f.Close() }, nil
}

func anyReadable(ligands []*screen.Ligand) bool {
	for _, l := range ligands {
		if l.Err == nil {
			return true
		}
	}
	return false
}

// summary is the last line of a run.
func summary(c report.Counts, dir string) string {
	text := fmt.Sprintf("%d of %d ligands done", c.Done, c.Ligands)
	for _, part := range []struct {
		n    int
		what string
	}{
		{c.Partial, "partial"},
		{c.Refused, "refused"},
		{c.Failed, "failed"},
		{c.Unreadable, "unreadable"},
		{c.Stopped, "stopped"},
	} {
		if part.n > 0 {
			text += fmt.Sprintf(", %d %s", part.n, part.what)
		}
	}
	return text + ": see " + filepath.Join(dir, report.LigandTable)
}

// runStatus is the exit status of a run that came to its end.
func runStatus(c report.Counts) error {
	good := c.Done + c.Partial
	switch {
	case c.Done == c.Ligands:
		return nil
	case good == 0:
		return &failure{code: exitNothing}
	}
	return &failure{code: exitPartly}
}
