package main

import (
	"bytes"
	"context"
	_ "embed"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"math"
	"slices"
	"strings"

	"torsieve/forcefield"
	"torsieve/internal/element"
	"torsieve/internal/geom"
	"torsieve/internal/units"
	"torsieve/molecule"
	"torsieve/screen"
)

//go:embed data/verify.json
var verifyJSON []byte

// verifyCommand checks this build on this machine.
type verifyCommand struct{}

// A check is one published value and how to come to it.
type check struct {
	Tier      string    `json:"tier"`
	Name      string    `json:"name"`
	Measure   string    `json:"measure"` // energy, part, bond or angle
	Part      string    `json:"part"`    // of the energy, for the measure part
	Atoms     []int     `json:"atoms"`   // from 1, for bond and angle
	Final     string    `json:"final"`   // method of the hf tier
	Basis     string    `json:"basis"`
	Solvent   string    `json:"solvent"` // of the semi-empirical tier; empty: the gas phase
	Charge    int       `json:"charge"`
	Symbols   []string  `json:"symbols"`
	XBohr     []float64 `json:"x_bohr"`
	XAngstrom []float64 `json:"x_angstrom"`
	Value     float64   `json:"value"` // hartree, angstrom or degrees
	Tolerance float64   `json:"tolerance"`
	Source    string    `json:"source"`
}

// loadChecks decodes the embedded values; a field that the code does not know
// and a value without its source are errors.
func loadChecks() ([]check, error) {
	dec := json.NewDecoder(bytes.NewReader(verifyJSON))
	dec.DisallowUnknownFields()
	var checks []check
	if err := dec.Decode(&checks); err != nil {
		return nil, fmt.Errorf("verify: built-in values: %w", err)
	}
	for i := range checks {
		c := &checks[i]
		if c.Source == "" || !(c.Tolerance > 0) {
			return nil, fmt.Errorf("verify: built-in value %d (%s): no source or tolerance", i+1, c.Name)
		}
		for _, v := range c.XAngstrom {
			c.XBohr = append(c.XBohr, v*units.Angstrom)
		}
	}
	return checks, nil
}

// Run prints every check with its source and whether this build meets it.
func (verifyCommand) Run(s *session) error {
	checks, err := loadChecks()
	if err != nil {
		return nothing(err, "")
	}
	var t tally
	source := ""
	for _, c := range checks {
		if c.Source != source {
			source = c.Source
			if _, err := fmt.Fprintf(s.stdout, "# %s\n", source); err != nil {
				return err
			}
		}
		var got float64
		err := screen.Guard(func() (err error) {
			got, err = c.compute(s.ctx)
			return err
		})
		if s.ctx.Err() != nil {
			return context.Cause(s.ctx)
		}
		if err := c.print(s.stdout, got, err, &t); err != nil {
			return err
		}
	}
	if _, err := fmt.Fprintf(s.stdout, "# %d checks, %d failed\n", len(checks), t.failed); err != nil {
		return err
	}
	return t.status()
}

// print writes one line: verdict, tier, what, value, deviation.
func (c check) print(w io.Writer, got float64, err error, t *tally) error {
	what := fmt.Sprintf("%-14s %-44s", c.Tier, c.title())
	if err != nil {
		t.failed++
		_, err := fmt.Fprintf(w, "FAILED %s %s\n", what, printable(err.Error()))
		return err
	}
	verdict := "ok    "
	if d := math.Abs(got - c.Value); !(d <= c.Tolerance) {
		verdict = "FAILED"
		t.failed++
	} else {
		t.done++
	}
	unit, digits := c.unit()
	_, err = fmt.Fprintf(w, "%s %s %.*f, published %.*f %s, off by %.1e\n", verdict, what, digits, got, digits, c.Value, unit, got-c.Value)
	return err
}

func (c check) title() string {
	name := c.Name
	switch c.Measure {
	case "bond", "angle":
		labels := make([]string, len(c.Atoms))
		for i, a := range c.Atoms {
			labels[i] = fmt.Sprintf("%s%d", c.Symbols[a-1], a)
		}
		name += ", " + c.Measure + " " + strings.Join(labels, "-")
	case "part":
		name += ", " + c.Final + ", " + c.Part
	case "energy":
		if c.Basis != "" {
			name += ", " + c.Final + "/" + c.Basis
		}
	}
	return name
}

// unit is that of the value, and the decimals that it is printed with.
func (c check) unit() (name string, digits int) {
	switch c.Measure {
	case "bond":
		return "angstrom", 4
	case "angle":
		return "degrees", 2
	}
	return "hartree", 8
}

// compute finds this build's value.
func (c check) compute(ctx context.Context) (float64, error) {
	atoms := make([]molecule.Atom, len(c.Symbols))
	for i, symbol := range c.Symbols {
		z, ok := element.Number(symbol)
		if !ok {
			return 0, fmt.Errorf("no element %q", symbol)
		}
		atoms[i].Number = z
	}
	m, _, err := molecule.Perceive(atoms, c.XBohr, c.Charge, 1)
	if err != nil {
		return 0, err
	}
	if c.Tier == tierForceField {
		return c.relaxed(ctx, m)
	}
	tier, err := newTier(c.Tier, tierOptions{
		finalOptions: finalOptions{Final: c.Final, Basis: c.Basis, TwoElectron: "exact"}, Accuracy: 0.1, Solvent: c.Solvent,
	})
	if err != nil {
		return 0, err
	}
	surface, err := tier.Surface(m)
	if err != nil {
		return 0, err
	}
	p, err := surface.Energy(ctx, c.XBohr)
	if err != nil || c.Measure == "energy" {
		return p.Energy, err
	}
	for _, part := range p.Parts {
		if part.Name == c.Part {
			return part.Energy, nil
		}
	}
	return 0, fmt.Errorf("the energy has no part %q", c.Part)
}

// relaxed is a bond or an angle of the molecule at the minimum of the published
// force field.
func (c check) relaxed(ctx context.Context, m *molecule.Molecule) (float64, error) {
	surface, err := forcefield.New(m, forcefield.Reference())
	if err != nil {
		return 0, err
	}
	x := slices.Clone(c.XBohr)
	set := screen.RelaxDefaults()
	set.RMSGradient, set.MaxGradient, set.EnergyChange, set.Noise = 1e-6, 4e-6, 0, 1e-12
	if _, _, err := screen.Relax(ctx, surface, x, set); err != nil {
		return 0, err
	}
	switch a := c.Atoms; c.Measure {
	case "bond":
		return geom.Distance(x, a[0]-1, a[1]-1) / units.Angstrom, nil
	case "angle":
		return geom.Angle(x, a[0]-1, a[1]-1, a[2]-1) * 180 / math.Pi, nil
	}
	return 0, errors.New("unknown measure " + c.Measure)
}
