package pattern

import (
	"strconv"

	"torsieve/molecule"
)

// list reads tests between the operators of one rank: semicolons (and), inside
// them commas (or), inside them the implicit and.
func (r *reader) list(operator byte) (atomTest, error) {
	var tests []atomTest
	for {
		var test atomTest
		var err error
		if operator == ';' {
			test, err = r.list(',')
		} else {
			test, err = r.conjunction()
		}
		if err != nil {
			return nil, err
		}
		tests = append(tests, test)
		if !r.take(operator) {
			break
		}
	}
	if len(tests) == 1 {
		return tests[0], nil
	}
	if operator == ';' {
		return all(tests), nil
	}
	return func(m *molecule.Molecule, i int) bool {
		for _, t := range tests {
			if t(m, i) {
				return true
			}
		}
		return false
	}, nil
}

func all(tests []atomTest) atomTest {
	return func(m *molecule.Molecule, i int) bool {
		for _, t := range tests {
			if !t(m, i) {
				return false
			}
		}
		return true
	}
}

func (r *reader) conjunction() (atomTest, error) {
	var tests []atomTest
	for {
		switch r.peek() {
		case 0, ']', ',', ';':
			if len(tests) == 0 {
				return nil, r.fail("want a test of the atom")
			}
			return all(tests), nil
		}
		test, err := r.primitive()
		if err != nil {
			return nil, err
		}
		tests = append(tests, test)
	}
}

func (r *reader) primitive() (atomTest, error) {
	switch {
	case r.take('!'):
		test, err := r.primitive()
		if err != nil {
			return nil, err
		}
		return func(m *molecule.Molecule, i int) bool { return !test(m, i) }, nil
	case r.take('#'):
		n, ok := r.number()
		if !ok {
			return nil, r.fail("want an atomic number")
		}
		return func(m *molecule.Molecule, i int) bool { return m.Atom(i).Number == n }, nil
	case r.take('X'):
		n, ok := r.number()
		if !ok {
			return nil, r.fail("want a number of neighbours")
		}
		return func(m *molecule.Molecule, i int) bool { return len(m.Neighbours(i)) == n }, nil
	case r.take('H'):
		n, ok := r.number()
		if !ok {
			n = 1
		}
		return func(m *molecule.Molecule, i int) bool { return hydrogens(m, i) == n }, nil
	case r.take('+'):
		return func(m *molecule.Molecule, i int) bool { return m.Atom(i).Charge == 1 }, nil
	case r.take('-'):
		return func(m *molecule.Molecule, i int) bool { return m.Atom(i).Charge == -1 }, nil
	case r.take('$'):
		return r.recursive()
	}
	return r.symbol()
}

// recursive reads the parenthesis of $(...).
func (r *reader) recursive() (atomTest, error) {
	if !r.take('(') {
		return nil, r.fail("want ( after $")
	}
	p, err := r.pattern()
	if err != nil {
		return nil, err
	}
	if !r.take(')') {
		return nil, r.fail("want ) after the inner pattern")
	}
	return p.StartsAt, nil
}

func (r *reader) number() (n int, ok bool) {
	from := r.at
	for c := r.peek(); c >= '0' && c <= '9'; c = r.peek() {
		r.at++
	}
	n, err := strconv.Atoi(r.text[from:r.at])
	return n, err == nil
}

func hydrogens(m *molecule.Molecule, i int) int {
	count := 0
	for _, j := range m.Neighbours(i) {
		if m.Atom(j).Number == 1 {
			count++
		}
	}
	return count
}
