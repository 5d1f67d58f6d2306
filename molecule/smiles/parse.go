package smiles

import (
	"errors"
	"fmt"
	"slices"

	"torsieve/molecule"
)

// MaxAtoms is the number of atoms, without implicit hydrogens, up to which
// Parse reads a string.
const MaxAtoms = 20000

// Parse reads one SMILES string. The warnings name what was odd but could be
// read. An error is an *Error.
//
// The atoms of the molecule stand in the order of the string, the implicit
// hydrogens behind them.
func Parse(s string) (*molecule.Molecule, []string, error) { return ParseLimit(s, MaxAtoms) }

// ParseLimit is Parse with another limit than MaxAtoms.
func ParseLimit(s string, maxAtoms int) (*molecule.Molecule, []string, error) {
	p := &parser{text: s, maxAtoms: maxAtoms, builder: molecule.NewBuilder(), last: -1}
	if err := p.run(); err != nil {
		return nil, nil, err
	}
	if err := p.stateStereo(); err != nil {
		return nil, nil, err
	}
	m, warnings, err := p.builder.Build()
	if err != nil {
		return nil, nil, p.locate(err)
	}
	return m, slices.Concat(p.warnings, warnings, p.emptyMarks(m)), nil
}

// locate gives an error of the builder its place in the string.
func (p *parser) locate(err error) error {
	var be *molecule.BuildError
	if errors.As(err, &be) && be.Atom >= 0 && be.Atom < len(p.atoms) {
		return &Error{Pos: p.atoms[be.Atom].pos + 1, Msg: be.Msg, Err: err}
	}
	return &Error{Msg: err.Error(), Err: err}
}

// A parser walks once along the string.
type parser struct {
	text     string
	at       int
	maxAtoms int
	builder  *molecule.Builder
	atoms    []atomState
	bonds    []direction // marked single bonds
	rings    [100]ringBond
	closed   []closedRing
	doubles  [][2]int // double bonds with marks at both ends
	open     []branch // branches not yet closed
	last     int      // atom that the next one is bonded to, -1 at the start of a part
	bond     byte     // bond symbol that waits for its second atom, 0 if none
	bondPos  int
	warnings []string
}

// An atomState is what of an atom the builder does not keep.
type atomState struct {
	pos        int
	aromatic   bool
	chirality  molecule.Parity
	neighbours []int // in the order of the specification; ^n: ring bond number n, still open
	implicit   int   // index in neighbours where an implicit H or lone pair belongs
	hydrogens  int
	ignored    bool // its chirality mark has been complained of
}

// A direction is a / or \ bond, brought to the sense of one of its atoms: seen
// from the atom from, the atom to is up (+1) or down (-1).
type direction struct{ from, to, up int }

type ringBond struct {
	open bool
	atom int
	bond byte
	pos  int
}

type branch struct{ atom, pos int }

func (p *parser) fail(pos int, format string, args ...any) error {
	return &Error{Pos: pos + 1, Msg: fmt.Sprintf(format, args...)}
}

func (p *parser) run() error {
	if p.text == "" {
		return &Error{Msg: "the string is empty"}
	}
	for p.at < len(p.text) {
		if err := p.step(); err != nil {
			return err
		}
	}
	return p.finish()
}

func (p *parser) finish() error {
	end := len(p.text)
	switch {
	case p.bond != 0:
		return p.fail(p.bondPos, "bond symbol %q with nothing after it", p.bond)
	case len(p.open) > 0:
		return p.fail(p.open[len(p.open)-1].pos, "the branch opened here is never closed")
	case p.last < 0:
		return p.fail(end-1, "dot with nothing after it")
	}
	for n, r := range p.rings {
		if r.open {
			return p.fail(r.pos, "ring bond %d is never closed", n)
		}
	}
	return nil
}

// step reads the next element of the string.
func (p *parser) step() error {
	c := p.text[p.at]
	switch {
	case c == '[':
		return p.bracketAtom()
	case c == '(':
		return p.openBranch()
	case c == ')':
		return p.closeBranch()
	case c == '.':
		return p.dot()
	case c == '%' || c >= '0' && c <= '9':
		return p.ringDigit()
	case c == '$':
		return p.fail(p.at, "quadruple bond $: not supported")
	case c == '-' || c == '=' || c == '#' || c == ':' || c == '/' || c == '\\':
		return p.bondSymbol(c)
	case c == ' ' || c == '\t' || c == '\n' || c == '\r':
		return p.fail(p.at, "blank inside the string")
	}
	return p.plainAtom()
}

func (p *parser) bondSymbol(c byte) error {
	if p.bond != 0 {
		return p.fail(p.at, "two bond symbols in a row: %q after %q", c, p.bond)
	}
	if p.last < 0 {
		return p.fail(p.at, "bond symbol %q with no atom before it", c)
	}
	p.bond, p.bondPos = c, p.at
	p.at++
	return nil
}

func (p *parser) openBranch() error {
	switch {
	case p.last < 0:
		return p.fail(p.at, "a branch with no atom before it")
	case p.bond != 0:
		return p.fail(p.bondPos, "bond symbol %q with a branch after it, not an atom", p.bond)
	}
	if p.at+1 < len(p.text) && p.text[p.at+1] == ')' {
		return p.fail(p.at, "an empty branch")
	}
	p.open = append(p.open, branch{p.last, p.at})
	p.at++
	return nil
}

func (p *parser) closeBranch() error {
	switch {
	case p.bond != 0:
		return p.fail(p.bondPos, "bond symbol %q with nothing after it", p.bond)
	case len(p.open) == 0:
		return p.fail(p.at, "a branch is closed here that was never opened")
	case p.last < 0:
		return p.fail(p.at, "dot with nothing after it")
	case p.text[p.at-1] == '(':
		return p.fail(p.at, "an empty branch")
	}
	p.last = p.open[len(p.open)-1].atom
	p.open = p.open[:len(p.open)-1]
	p.at++
	return nil
}

func (p *parser) dot() error {
	switch {
	case p.bond != 0:
		return p.fail(p.bondPos, "bond symbol %q with nothing after it", p.bond)
	case p.last < 0:
		return p.fail(p.at, "dot with nothing before it")
	}
	p.last = -1
	p.at++
	return nil
}
