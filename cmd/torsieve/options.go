package main

import (
	"fmt"
	"runtime"
	"strconv"
	"strings"

	"torsieve/internal/linalg"
	"torsieve/screen"
	"torsieve/semiempirical/solvent"
)

// Options that several commands share, in groups. A group is embedded by the
// commands that it makes sense for.

// inputOptions say how to read a file whose name does not.
type inputOptions struct {
	Format       string `group:"Input" help:"Format of standard input: smi, csv, tsv, sdf, mol or xyz." enum:",smi,csv,tsv,sdf,mol,xyz" default:"" placeholder:"NAME"`
	IDField      string `group:"Input" name:"id-field" help:"SDF data item that holds the id (default: the title)." placeholder:"NAME"`
	SmilesColumn string `group:"Input" help:"Column of a table that holds the SMILES." placeholder:"NAME"`
	IDColumn     string `group:"Input" name:"id-column" help:"Column of a table that holds the id." placeholder:"NAME"`
	Charge       *int   `group:"Input" help:"Total charge, where a file cannot say (XYZ)." placeholder:"N"`
	Multiplicity *int   `group:"Input" help:"Spin multiplicity, where a file cannot say (XYZ)." placeholder:"N"`
}

// intakeOptions settle what an input leaves open.
type intakeOptions struct {
	Stereo string `group:"Input" help:"Unstated stereo: expand to at most 8 isomers, or refuse." enum:"expand,refuse" default:"expand"`
	Salts  string `group:"Input" help:"Several fragments: refuse, or strip to the largest organic one." enum:"refuse,strip" default:"refuse"`
}

// solventOptions choose what surrounds the molecule. A command that embeds them
// sets the variable solvent to its default.
type solventOptions struct {
	Solvent string `group:"Methods" help:"Implicit solvent of the semi-empirical level, or none: the gas phase. One of ${solvents} (default: ${default})." default:"${solvent}" placeholder:"NAME"`
}

// noSolvent is the word for the gas phase.
const noSolvent = "none"

// name returns the solvent's own name, empty for the gas phase. An unknown one
// is refused with those that look like it.
func (o solventOptions) name() (string, error) {
	if o.Solvent == "" || strings.EqualFold(o.Solvent, noSolvent) {
		return "", nil
	}
	name, err := solvent.Find(o.Solvent)
	if err != nil {
		return "", nothing(err, "--help lists the solvents; none is the gas phase")
	}
	return name, nil
}

// of is name for one tier alone: only the semi-empirical one has solvents.
func (o solventOptions) of(tier string) (string, error) {
	name, err := o.name()
	if err == nil && name != "" && tier != tierSemiempirical {
		return "", nothing(fmt.Errorf("solvent %s: the %s tier has none of its own", name, tier),
			"use --tier semiempirical; screen adds its solvation to the last tier's energies")
	}
	return name, err
}

// solventOf is the word for a tier's solvent in output.
func solventOf(t screen.Tier) string {
	if s, ok := t.(screen.Solvated); ok && s.Solvent() != "" {
		return s.Solvent()
	}
	return noSolvent
}

// finalOptions choose the theory of the last tier.
type finalOptions struct {
	Final string `group:"Methods" help:"Method of the last tier: hf-3c, hf-d3, hf, mp2, scs-mp2 or sos-mp2." enum:"hf-3c,hf-d3,hf,mp2,scs-mp2,sos-mp2" default:"hf-3c"`
	Basis string `group:"Methods" help:"Basis of the last tier (default: MINIX for hf-3c, def2-SVP for the others)." placeholder:"NAME"`

	TwoElectron string `group:"Methods" name:"two-electron" help:"Electron repulsion of the last tier: auto (exact in MINIX, fitted else), exact or fitted." enum:"auto,exact,fitted" default:"auto"`
}

// coreOptions bound the work on one machine.
type coreOptions struct {
	Jobs     int  `group:"Work" help:"Units of work at a time (default: all cores)." placeholder:"N"`
	Portable bool `group:"Work" help:"Use the kernels that every processor has, for the same bytes elsewhere."`
}

// AfterApply is called by kong before the command runs.
func (o coreOptions) AfterApply() error { //nolint:unparam // the signature is kong's
	if o.Portable {
		linalg.UsePortable()
	}
	return nil
}

// jobs is what was asked for, or all cores that this process may use.
func (o coreOptions) jobs() int {
	if o.Jobs == 0 {
		return runtime.GOMAXPROCS(0)
	}
	return o.Jobs
}

// check refuses a number of jobs that is none.
func (o coreOptions) check() error {
	if o.Jobs < 0 {
		return nothing(fmt.Errorf("jobs: want at least 1, have %d", o.Jobs), "")
	}
	return nil
}

// memoryOptions bound the memory of the quantum tiers.
type memoryOptions struct {
	Memory size `group:"Work" help:"What all surfaces together may hold (default: ${default})." default:"4GB" placeholder:"SIZE"`
}

// seedOptions make random choices repeatable.
type seedOptions struct {
	Seed uint64 `group:"Work" help:"Start of the random numbers (default: ${default})." default:"0" placeholder:"N"`
}

// A size is a number of bytes, written with a unit: 512MB, 4GB, 4GiB.
type size int64

var sizeUnits = []struct {
	name  string
	bytes float64
}{
	{"KiB", 1 << 10},
	{"MiB", 1 << 20},
	{"GiB", 1 << 30},
	{"TiB", 1 << 40},
	{"KB", 1e3},
	{"MB", 1e6},
	{"GB", 1e9},
	{"TB", 1e12},
	{"K", 1e3},
	{"M", 1e6},
	{"G", 1e9},
	{"T", 1e12},
	{"B", 1},
}

// UnmarshalText reads a size.
func (s *size) UnmarshalText(text []byte) error {
	number, factor := string(text), 1.0
	for _, u := range sizeUnits {
		if len(number) > len(u.name) && strings.EqualFold(number[len(number)-len(u.name):], u.name) {
			number, factor = number[:len(number)-len(u.name)], u.bytes
			break
		}
	}
	v, err := strconv.ParseFloat(strings.TrimSpace(number), 64)
	if err != nil || !(v >= 0) || v*factor > 1e15 {
		return fmt.Errorf("want a size such as 512MB or 4GB, have %q", text)
	}
	*s = size(v * factor)
	return nil
}
