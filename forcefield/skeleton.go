package forcefield

// A skeleton is what the terms are built from: atoms with types, bonds with
// orders and natural lengths. It knows nothing of chemistry beyond that.
type skeleton struct {
	types []*atomType
	links []link
	arms  [][]arm // by atom, in bond order
}

// A link is a bond: its order in the force field's sense (aromatic 1.5, amide
// 1.41) and its natural length in bohr.
type link struct {
	i, j   int
	order  float64
	length float64
}

// An arm is a neighbour and the bond that leads there.
type arm struct{ atom, link int }

func newSkeleton(types []*atomType, links []link) *skeleton {
	s := &skeleton{types: types, links: links, arms: make([][]arm, len(types))}
	for n := range links {
		l := &links[n]
		if l.length == 0 {
			l.length = naturalLength(types[l.i], types[l.j], l.order)
		}
		s.arms[l.i] = append(s.arms[l.i], arm{l.j, n})
		s.arms[l.j] = append(s.arms[l.j], arm{l.i, n})
	}
	return s
}

// paths calls visit for every path i-j-k-l about the bond j-k, with i and l.
func (s *skeleton) paths(j, k int, visit func(i, l int)) {
	for _, a := range s.arms[j] {
		for _, b := range s.arms[k] {
			if a.atom != k && b.atom != j && a.atom != b.atom {
				visit(a.atom, b.atom)
			}
		}
	}
}

// flatNeighbour reports whether atom has an sp2 neighbour besides other.
func (s *skeleton) flatNeighbour(atom, other int) bool {
	for _, a := range s.arms[atom] {
		if a.atom != other && s.types[a.atom].Class == classSP2 {
			return true
		}
	}
	return false
}

// bondsApart returns the number of bonds between any two atoms, row by row, 4
// standing for 4 and more, and for no way at all.
func (s *skeleton) bondsApart() []int8 {
	n := len(s.types)
	apart := make([]int8, n*n)
	queue := make([]int, 0, n)
	for i := range n {
		row := apart[i*n : (i+1)*n]
		for j := range row {
			row[j] = 4
		}
		row[i] = 0
		queue = append(queue[:0], i)
		for q := 0; q < len(queue); q++ {
			at := queue[q]
			if row[at] == 3 {
				break
			}
			for _, a := range s.arms[at] {
				if row[a.atom] == 4 && row[at]+1 < 4 {
					row[a.atom] = row[at] + 1
					queue = append(queue, a.atom)
				}
			}
		}
	}
	return apart
}
