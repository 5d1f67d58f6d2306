package smiles

// ringDigit opens or closes a ring bond: one digit, or % and two digits.
func (p *parser) ringDigit() error {
	pos := p.at
	number := 0
	if p.text[p.at] == '%' {
		p.at++
		first := p.at
		var ok bool
		if number, ok = p.digits(2); !ok || p.at-first != 2 {
			return p.fail(pos, "ring bond number: want two digits after %%")
		}
	} else {
		number, _ = p.digits(1)
	}
	if p.last < 0 {
		return p.fail(pos, "ring bond %d with no atom before it", number)
	}
	r := &p.rings[number]
	if !r.open {
		*r = ringBond{open: true, atom: p.last, bond: p.bond, pos: pos}
		state := &p.atoms[p.last]
		state.neighbours = append(state.neighbours, ^(number + openRing))
		p.bond = 0
		return nil
	}
	return p.closeRing(number, pos)
}

// openRing is added to the number of an open ring bond, so that its complement
// is no index of the builder (LonePair, ImplicitH).
const openRing = 1000

func (p *parser) closeRing(number, pos int) error {
	r := &p.rings[number]
	from, to := r.atom, p.last
	symbol, err := p.ringSymbol(r.bond, p.bond, number, pos)
	if err != nil {
		return err
	}
	if from == to {
		return p.fail(pos, "ring bond %d joins an atom to itself", number)
	}
	if p.builder.HasBond(from, to) {
		if other, ok := p.sameRing(from, to); ok {
			return p.fail(pos, "ring bonds %d and %d join the same two atoms", other, number)
		}
		return p.fail(pos, "ring bond %d joins two atoms that are bonded already", number)
	}
	opened := p.atoms[from].neighbours
	for n, j := range opened {
		if j == ^(number + openRing) {
			opened[n] = to
		}
	}
	p.atoms[to].neighbours = append(p.atoms[to].neighbours, from)
	r.open = false
	p.bond = 0
	p.closed = append(p.closed, closedRing{from, to, number})
	return p.join(from, to, symbol, pos)
}

// A closedRing remembers the number of a ring bond for messages.
type closedRing struct{ from, to, number int }

func (p *parser) sameRing(i, j int) (number int, ok bool) {
	for _, c := range p.closed {
		if c.from == i && c.to == j || c.from == j && c.to == i {
			return c.number, true
		}
	}
	return 0, false
}

// ringSymbol reconciles the bond symbols at the two digits of a ring bond. The
// result is in the sense from the opening to the closing atom.
func (p *parser) ringSymbol(opening, closing byte, number, pos int) (byte, error) {
	switch closing { // the mark points from the atom to its partner
	case '/':
		closing = '\\'
	case '\\':
		closing = '/'
	}
	switch {
	case opening == 0:
		return closing, nil
	case closing == 0 || opening == closing:
		return opening, nil
	case opening == '-' && isMark(closing):
		return closing, nil
	case closing == '-' && isMark(opening):
		return opening, nil
	case isMark(opening) && isMark(closing):
		return 0, p.fail(pos, "ring bond %d: the / and \\ marks at its two ends contradict each other", number)
	}
	return 0, p.fail(pos, "ring bond %d has two different bond orders: %q and %q", number, opening, closing)
}

func isMark(c byte) bool { return c == '/' || c == '\\' }
