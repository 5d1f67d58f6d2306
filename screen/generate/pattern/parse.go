package pattern

import (
	"fmt"

	"torsieve/internal/element"
	"torsieve/molecule"
)

// Parse reads a pattern. The error says at which byte, from 1, it cannot go on.
func Parse(text string) (*Pattern, error) {
	r := &reader{text: text}
	p, err := r.pattern()
	if err != nil {
		return nil, err
	}
	if r.at != len(text) {
		return nil, r.fail("want an atom or a bond")
	}
	return p, nil
}

type reader struct {
	text string
	at   int
}

func (r *reader) fail(why string) error {
	return fmt.Errorf("pattern %q, byte %d: %s", r.text, r.at+1, why)
}

// peek returns the next byte, 0 at the end.
func (r *reader) peek() byte {
	if r.at == len(r.text) {
		return 0
	}
	return r.text[r.at]
}

func (r *reader) take(c byte) bool {
	if r.peek() != c || c == 0 {
		return false
	}
	r.at++
	return true
}

// pattern reads up to the end of the text or an unmatched closing parenthesis.
func (r *reader) pattern() (*Pattern, error) {
	p := new(Pattern)
	last := -1
	var branches []int // the atoms that open parentheses hang on
	for {
		switch c := r.peek(); {
		case c == 0 || c == ')' && len(branches) == 0:
			if last < 0 || len(branches) > 0 {
				return nil, r.fail("the pattern ends too early")
			}
			return p, nil
		case c == '(':
			if last < 0 {
				return nil, r.fail("a branch needs an atom before it")
			}
			r.at++
			branches = append(branches, last)
		case c == ')':
			r.at++
			last = branches[len(branches)-1]
			branches = branches[:len(branches)-1]
		default:
			bond := r.bond()
			test, err := r.atom()
			if err != nil {
				return nil, err
			}
			p.nodes = append(p.nodes, node{test: test, parent: last, bond: bond})
			last = len(p.nodes) - 1
			if len(branches) == 0 {
				p.chain = append(p.chain, last)
			}
		}
	}
}

func (r *reader) bond() bondTest {
	order := func(n int) bondTest {
		return func(b molecule.Bond) bool { return b.Order == n && !b.Aromatic }
	}
	switch {
	case r.take('-'):
		return order(1)
	case r.take('='):
		return order(2)
	case r.take('#'):
		return order(3)
	case r.take(':'):
		return func(b molecule.Bond) bool { return b.Aromatic }
	case r.take('~'):
		return func(molecule.Bond) bool { return true }
	}
	return func(b molecule.Bond) bool { return b.Aromatic || b.Order == 1 }
}

func (r *reader) atom() (atomTest, error) {
	if !r.take('[') {
		return r.symbol()
	}
	test, err := r.list(';')
	if err != nil {
		return nil, err
	}
	if !r.take(']') {
		return nil, r.fail("want ]")
	}
	return test, nil
}

// symbol reads an element: two letters where they are one, aliphatic in
// capitals, aromatic in small letters.
func (r *reader) symbol() (atomTest, error) {
	c := r.peek()
	if r.take('*') {
		return func(*molecule.Molecule, int) bool { return true }, nil
	}
	name := string(c)
	if r.at+2 <= len(r.text) && (r.text[r.at:r.at+2] == "Cl" || r.text[r.at:r.at+2] == "Br") {
		name = r.text[r.at : r.at+2]
	}
	aromatic := false
	switch c {
	case 'c', 'n', 'o', 's', 'p':
		aromatic, name = true, string(c-'a'+'A')
	case 'C', 'N', 'O', 'S', 'P', 'B', 'F', 'I':
	default:
		return nil, r.fail("want an atom")
	}
	r.at += len(name)
	number, _ := element.Number(name)
	return func(m *molecule.Molecule, i int) bool {
		a := m.Atom(i)
		return a.Number == number && a.Aromatic == aromatic
	}, nil
}
