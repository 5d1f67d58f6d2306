package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"runtime"
	"strconv"
	"strings"

	"github.com/alecthomas/kong"
	kongcompletion "github.com/jotaen/kong-completion"

	"torsieve/screen"
	"torsieve/semiempirical/solvent"
)

// commands is the command line: one field a command, one file a command.
type commands struct {
	Config kong.ConfigFlag `help:"TOML file with options; the command line wins." placeholder:"FILE"`
	Quiet  bool            `help:"Say nothing but errors." short:"q"`

	Screen   screenCommand   `cmd:"" help:"The main job: from ligands to weighted ensembles."`
	Status   statusCommand   `cmd:"" help:"How far a run is; also while it is under way."`
	Show     showCommand     `cmd:"" help:"The answer of a run in the terminal: its ligands, or the conformers of one."`
	Merge    mergeCommand    `cmd:"" help:"Join runs that were made of slices of one list."`
	Generate generateCommand `cmd:"" help:"Conformers of the generator and the force field only."`
	Point    pointCommand    `cmd:"" help:"Single-point energies, one JSON object a line."`
	Relax    relaxCommand    `cmd:"" help:"Optimise structures at a tier."`
	Dedupe   dedupeCommand   `cmd:"" help:"Drop duplicates by symmetry-aware RMSD."`
	Inspect  inspectCommand  `cmd:"" help:"What was understood of each record, one JSON object a line."`
	Verify   verifyCommand   `cmd:"" help:"Check this build on this machine against published values."`
	Version  versionCommand  `cmd:"" help:"The version of this build."`

	Completion kongcompletion.Completion `cmd:"" help:"Code for shell completion: bash, zsh or fish."`
}

const about = "From ligands to Boltzmann-weighted conformer ensembles through three tiers of theory: " +
	"force field, semi-empirical, Hartree-Fock."

// A failure is an error with its exit status and what could be done about it.
type failure struct {
	code int
	err  error // nil where everything has been said already
	hint string
}

func (f *failure) Error() string {
	if f.err == nil {
		return fmt.Sprintf("exit status %d", f.code)
	}
	return f.err.Error()
}

func (f *failure) Unwrap() error { return f.err }

// nothing is the failure of a command that could do nothing.
func nothing(err error, hint string) error { return &failure{code: exitNothing, err: err, hint: hint} }

// exited is what kong's own way out (--help) panics with.
type exited int

// run is the whole program as a function: what it prints and its exit status.
func run(ctx context.Context, args []string, stdin io.Reader, stdout, stderr io.Writer) (code int) {
	defer func() {
		if v := recover(); v != nil {
			status, ok := v.(exited)
			if !ok { // no stack for a person, but the place of the fault
				fault := &screen.Fault{Value: v}
				newVoice(stderr).complain(fmt.Errorf("%w (at %s)", fault, faultPlace()), "")
				status = exitNothing
			}
			code = int(status)
		}
	}()
	var c commands
	v := newVoice(stderr)
	parser := newParser(&c, stdout, stderr)
	kongcompletion.Register(parser)
	chosen, err := parser.Parse(args)
	if err != nil {
		v.complain(err, usageHint(err))
		return exitNothing
	}
	v.quiet = c.Quiet
	s := &session{ctx: ctx, stdin: stdin, stdout: stdout, voice: v, command: args}
	return v.end(ctx, chosen.Run(s))
}

// usageHint points to the help that belongs to a wrong command line.
func usageHint(err error) string {
	var parse *kong.ParseError
	if errors.As(err, &parse) && parse.Context != nil {
		if command := parse.Context.Command(); command != "" {
			return "torsieve " + strings.Fields(command)[0] + " --help lists what there is"
		}
	}
	return "torsieve --help lists the commands"
}

// end turns a command's error into an exit status and says it.
func (v *voice) end(ctx context.Context, err error) int {
	if err == nil {
		return exitDone
	}
	if errors.Is(context.Cause(ctx), errInterrupted) {
		v.complain(errInterrupted, "")
		return exitStopped
	}
	var f *failure
	if !errors.As(err, &f) {
		f = &failure{code: exitNothing, err: err}
	}
	if f.err != nil {
		v.complain(f.err, f.hint)
	}
	return f.code
}

// newParser builds the command line around c.
func newParser(c *commands, stdout, stderr io.Writer) *kong.Kong {
	return kong.Must(c,
		kong.Name("torsieve"), kong.Description(about),
		kong.Writers(stdout, stderr), kong.Exit(func(code int) { panic(exited(code)) }),
		kong.Vars{
			"max_conformers": strconv.Itoa(screen.Defaults().MaxConformers),
			"solvents":       strings.Join(solvent.Names(), ", "),
		},
		kong.WithHyphenPrefixedParameters(true), // --charge -1
		kong.Configuration(loadSettings), kong.ConfigureHelp(kong.HelpOptions{Compact: true, WrapUpperBound: 100}),
	)
}

// faultPlace is the function of this program that panicked, called from the
// function that recovers.
func faultPlace() string {
	callers := make([]uintptr, 32)
	frames := runtime.CallersFrames(callers[:runtime.Callers(3, callers)])
	for {
		f, more := frames.Next()
		if strings.HasPrefix(f.Function, "torsieve/") || !more {
			return fmt.Sprintf("%s, line %d", f.Function, f.Line)
		}
	}
}
