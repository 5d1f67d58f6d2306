package smiles

import (
	"torsieve/internal/element"
	"torsieve/molecule"
)

// organic lists the symbols that may stand without brackets.
var organic = map[string]int{
	"B": 5, "C": 6, "N": 7, "O": 8, "P": 15, "S": 16, "F": 9, "Cl": 17, "Br": 35, "I": 53,
	"b": 5, "c": 6, "n": 7, "o": 8, "p": 15, "s": 16,
}

// aromaticSymbols lists the lower-case symbols that may stand in brackets.
var aromaticSymbols = map[string]int{
	"b": 5, "c": 6, "n": 7, "o": 8, "p": 15, "s": 16, "as": 33, "se": 34, "te": 52,
}

func (p *parser) plainAtom() error {
	symbol := p.text[p.at : p.at+1]
	if p.at+1 < len(p.text) {
		if two := p.text[p.at : p.at+2]; two == "Cl" || two == "Br" {
			symbol = two
		}
	}
	number, ok := organic[symbol]
	switch c := symbol[0]; {
	case c == '*':
		return p.fail(p.at, "wildcard atom *: without an element there are no conformers")
	case !ok && c == ']':
		return p.fail(p.at, "a bracket is closed here that was never opened")
	case !ok && c >= 'A' && c <= 'Z' || c >= 'a' && c <= 'z' && !ok:
		return p.fail(p.at, "%q is no atom symbol outside brackets", symbol)
	case !ok:
		return p.fail(p.at, "unexpected character %q", p.text[p.at])
	}
	start := p.at
	p.at += len(symbol)
	return p.addAtom(start, molecule.BuilderAtom{
		Number: number, Aromatic: isLower(symbol[0]), Hydrogens: molecule.FillHydrogens,
	}, 0)
}

func isLower(c byte) bool { return c >= 'a' && c <= 'z' }
func isUpper(c byte) bool { return c >= 'A' && c <= 'Z' }
func isDigit(c byte) bool { return c >= '0' && c <= '9' }

// peek returns the next byte, or 0 at the end.
func (p *parser) peek() byte {
	if p.at < len(p.text) {
		return p.text[p.at]
	}
	return 0
}

// digits reads a number of at most max digits; ok is false if there is none.
func (p *parser) digits(max int) (value int, ok bool) {
	for n := 0; n < max && isDigit(p.peek()); n++ {
		value = 10*value + int(p.text[p.at]-'0')
		p.at++
		ok = true
	}
	return value, ok
}

// bracketAtom reads [isotope symbol chirality hydrogens charge class].
func (p *parser) bracketAtom() error {
	start := p.at
	p.at++
	var a molecule.BuilderAtom
	var err error
	a.Isotope, _ = p.digits(3)
	if a.Number, a.Aromatic, err = p.symbol(start); err != nil {
		return err
	}
	parity, err := p.chirality()
	if err != nil {
		return err
	}
	if p.peek() == 'H' {
		p.at++
		a.Hydrogens = 1
		if n, ok := p.digits(1); ok {
			a.Hydrogens = n
		}
		if a.Number == 1 && a.Hydrogens > 0 {
			return p.fail(start, "hydrogen that carries hydrogen: write the atoms as [H][H]")
		}
	}
	if a.Charge, err = p.charge(); err != nil {
		return err
	}
	if p.peek() == ':' {
		p.at++
		class, ok := p.digits(4)
		if !ok {
			return p.fail(p.at, "atom class: want a number after the colon")
		}
		a.Class = class
	}
	switch c := p.peek(); c {
	case ']':
		p.at++
	case 0:
		return p.fail(start, "the bracket opened here is never closed")
	default:
		return p.fail(p.at, "unexpected character %q in a bracket atom", c)
	}
	return p.addAtom(start, a, parity)
}

func (p *parser) symbol(start int) (number int, aromatic bool, err error) {
	rest := p.text[p.at:]
	switch {
	case rest == "":
		return 0, false, p.fail(start, "the bracket opened here is never closed")
	case rest[0] == '*':
		return 0, false, p.fail(p.at, "wildcard atom *: without an element there are no conformers")
	}
	for n := min(2, len(rest)); n > 0; n-- {
		if z, ok := aromaticSymbols[rest[:n]]; ok {
			p.at += n
			return z, true, nil
		}
		if z, ok := element.Number(rest[:n]); ok {
			p.at += n
			return z, false, nil
		}
	}
	if !isUpper(rest[0]) && !isLower(rest[0]) {
		return 0, false, p.fail(p.at, "want an element symbol, have %q", rest[0])
	}
	n := 1
	for n < len(rest) && n < 3 && isLower(rest[n]) {
		n++
	}
	hint := ""
	if rest[:n] == "D" || rest[:n] == "T" {
		hint = ": heavy hydrogen is written [2H] or [3H]"
	}
	return 0, false, p.fail(p.at, "unknown element %s%s", rest[:n], hint)
}

// chirality reads @, @@, @TH1 or @TH2.
func (p *parser) chirality() (molecule.Parity, error) {
	if p.peek() != '@' {
		return 0, nil
	}
	start := p.at
	p.at++
	if p.peek() == '@' {
		p.at++
		return -1, nil
	}
	if p.at+1 >= len(p.text) {
		return 1, nil
	}
	switch class := p.text[p.at : p.at+2]; class {
	case "TH":
		p.at += 2
		switch n, _ := p.digits(2); n {
		case 1:
			return 1, nil
		case 2:
			return -1, nil
		}
		return 0, p.fail(start, "chirality @TH: want @TH1 or @TH2")
	case "AL", "SP", "TB", "OH":
		return 0, p.fail(start, "chirality class @%s: not supported, only tetrahedral centres are", class)
	}
	return 1, nil
}

// charge reads +, ++, +n and the same with minus.
func (p *parser) charge() (int, error) {
	c := p.peek()
	if c != '+' && c != '-' {
		return 0, nil
	}
	start := p.at
	sign := 1
	if c == '-' {
		sign = -1
	}
	p.at++
	if n, ok := p.digits(3); ok {
		if n > 15 {
			return 0, p.fail(start, "charge %+d is not possible", sign*n)
		}
		return sign * n, nil
	}
	n := 1
	for p.peek() == c {
		n++
		p.at++
	}
	if n > 15 {
		return 0, p.fail(start, "charge %+d is not possible", sign*n)
	}
	return sign * n, nil
}

// addAtom hands an atom to the builder and bonds it to the one before it.
func (p *parser) addAtom(pos int, a molecule.BuilderAtom, parity molecule.Parity) error {
	if len(p.atoms) >= p.maxAtoms {
		return p.fail(pos, "more than %d atoms: over the limit", p.maxAtoms)
	}
	i := p.builder.AddAtom(a)
	state := atomState{pos: pos, aromatic: a.Aromatic, chirality: parity, hydrogens: a.Hydrogens}
	if p.last >= 0 {
		state.neighbours = append(state.neighbours, p.last)
		state.implicit = 1
	}
	p.atoms = append(p.atoms, state)
	if p.last >= 0 {
		p.atoms[p.last].neighbours = append(p.atoms[p.last].neighbours, i)
		if err := p.join(p.last, i, p.bond, pos); err != nil {
			return err
		}
	}
	p.last, p.bond = i, 0
	return nil
}

// join adds the bond between i and j, in the order of the string, with the
// given symbol.
func (p *parser) join(i, j int, symbol byte, pos int) error {
	order := 1
	switch symbol {
	case '=':
		order = 2
	case '#':
		order = 3
	case ':':
		order = molecule.AromaticOrder
	case 0:
		if p.atoms[i].aromatic && p.atoms[j].aromatic {
			order = molecule.AromaticOrder
		}
	case '/':
		p.bonds = append(p.bonds, direction{i, j, 1})
	case '\\':
		p.bonds = append(p.bonds, direction{i, j, -1})
	}
	if _, err := p.builder.AddBond(i, j, order); err != nil {
		return &Error{Pos: pos + 1, Msg: err.Error(), Err: err}
	}
	return nil
}
