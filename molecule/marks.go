package molecule

import "slices"

// markDoubleBonds chooses the single bonds that carry / and \ so that a reader
// finds the configuration of every stated double bond and of no other.
//
// Double bonds in conjugation share the bond between them. Where that leads to
// a contradiction or would state a double bond that is not, the marks go to
// bonds that are not shared, at worst to hydrogens written for the purpose.
func (w *writer) markDoubleBonds() {
	if w.tryMarks(true) {
		return
	}
	w.tryMarks(false)
}

// tryMarks returns false if the marks contradict each other or say too much.
func (w *writer) tryMarks(share bool) bool {
	w.marks, w.shownH = map[int]int{}, map[int]int{}
	good := true
	done := map[int]bool{}
	for _, s := range w.statedInOrder() {
		if done[s.Bond] {
			continue
		}
		done[s.Bond] = true
		queue := []StereoBond{s}
		for at := 0; at < len(queue); at++ {
			if !w.markBond(queue[at], share) {
				good = false
			}
			for _, next := range w.sharing(queue[at]) {
				if !done[next.Bond] {
					done[next.Bond] = true
					queue = append(queue, next)
				}
			}
		}
	}
	return good && !w.saysTooMuch()
}

// statedInOrder returns the stated double bonds of the fragment in the order of
// the text.
func (w *writer) statedInOrder() []StereoBond {
	var list []StereoBond
	for _, s := range w.m.stereoBonds {
		if s.Known && w.m.shared.fragment[s.J] == w.f {
			list = append(list, s)
		}
	}
	slices.SortFunc(list, func(a, b StereoBond) int { return w.firstPosition(a) - w.firstPosition(b) })
	return list
}

// sharing returns the stated double bonds that are one single bond away.
func (w *writer) sharing(s StereoBond) []StereoBond {
	var list []StereoBond
	for _, pair := range [2][2]int{{s.J, s.K}, {s.K, s.J}} {
		for _, j := range w.m.substituents(pair[0], pair[1]) {
			for _, t := range w.m.stereoBonds {
				if t.Known && t.Bond != s.Bond && (t.J == j || t.K == j) {
					list = append(list, t)
				}
			}
		}
	}
	slices.SortFunc(list, func(a, b StereoBond) int { return w.firstPosition(a) - w.firstPosition(b) })
	return list
}

func (w *writer) firstPosition(s StereoBond) int { return min(w.position[s.J], w.position[s.K]) }

// markBond marks one bond at each end of s, the earlier end first.
func (w *writer) markBond(s StereoBond, share bool) bool {
	if w.position[s.K] < w.position[s.J] {
		s.J, s.K, s.A, s.B = s.K, s.J, s.B, s.A
	}
	first, up := w.carrier(s.J, s.K, share)
	second, given := w.carrier(s.K, s.J, share)
	if first < 0 || second < 0 {
		return false
	}
	if up == 0 {
		up = 1
		if w.sense(s.J, first) < 0 {
			up = -1 // so that the text shows /
		}
		if given != 0 { // the other end is bound already
			up = given
			if !w.cis(s, first, second) {
				up = -given
			}
		}
		if !w.set(s.J, first, up) {
			return false
		}
	}
	want := up
	if !w.cis(s, first, second) {
		want = -up
	}
	if given != 0 {
		return given == want
	}
	return w.set(s.K, second, want)
}

// cis gives the configuration of s with respect to other substituents.
func (w *writer) cis(s StereoBond, a, b int) bool { return s.Cis != ((a != s.A) != (b != s.B)) }

// sense is +1 if the text runs from i to j, else -1.
func (w *writer) sense(i, j int) int {
	if w.v.node[j] < 0 || w.position[i] < w.position[j] {
		return 1
	}
	return -1
}

// carrier returns the substituent of end i whose bond is to carry the mark, and
// where it lies as seen from i if the bond has a mark already.
func (w *writer) carrier(i, other int, share bool) (j, up int) {
	hydrogen, shared, own := -1, -1, -1
	for _, n := range w.m.substituents(i, other) {
		k, _ := w.m.bondBetween(i, n)
		switch {
		case w.marks[k] != 0:
			return n, w.marks[k] * w.sense(i, n)
		case w.m.bonds[k].Order != 1 || w.m.bonds[k].Aromatic:
		case w.v.node[n] < 0:
			hydrogen = n
		case w.endsDoubleBond(n):
			shared = earlier(w, shared, n)
		default:
			own = earlier(w, own, n)
		}
	}
	choices := [3]int{own, shared, hydrogen}
	if !share {
		choices = [3]int{own, hydrogen, shared}
	}
	for _, n := range choices {
		if n >= 0 {
			return n, 0
		}
	}
	return -1, 0
}

func earlier(w *writer, a, b int) int {
	if a < 0 || w.position[b] < w.position[a] {
		return b
	}
	return a
}

func (w *writer) endsDoubleBond(i int) bool {
	for _, k := range w.m.neighbourBonds[i] {
		if w.m.bonds[k].Order == 2 && !w.m.bonds[k].Aromatic {
			return true
		}
	}
	return false
}

// set marks the bond i-j: seen from i, j is up (+1) or down (-1). It returns
// false if the mark contradicts another at j.
func (w *writer) set(i, j, up int) bool {
	k, _ := w.m.bondBetween(i, j)
	w.marks[k] = up * w.sense(i, j)
	if w.v.node[j] < 0 {
		w.shownH[i] = j
	}
	for _, end := range [2]int{i, j} {
		if !w.endsDoubleBond(end) {
			continue
		}
		sum, n := 0, 0
		for at, other := range w.m.neighbours[end] {
			if up := w.marks[w.m.neighbourBonds[end][at]]; up != 0 {
				sum += up * w.sense(end, other)
				n++
			}
		}
		if n == 2 && sum != 0 || n > 2 {
			return false
		}
	}
	return true
}

// saysTooMuch says whether a double bond whose configuration is not stated has
// marks at both ends.
func (w *writer) saysTooMuch() bool {
	if len(w.marks) == 0 {
		return false
	}
	known := map[int]bool{}
	for _, s := range w.m.stereoBonds {
		known[s.Bond] = s.Known
	}
	for k, b := range w.m.bonds {
		if w.m.shared.fragment[b.A] != w.f {
			continue
		}
		if b.Order != 2 || known[k] || !w.marked(b.A) || !w.marked(b.B) {
			continue
		}
		if _, ok := w.m.doubleCandidate(k); ok {
			return true
		}
	}
	return false
}

func (w *writer) marked(i int) bool {
	for _, k := range w.m.neighbourBonds[i] {
		if w.marks[k] != 0 {
			return true
		}
	}
	return false
}
