package dedupe

import "slices"

// A block is a small group of places that can be exchanged among themselves
// while all others stay: the edges of a phenyl ring, the fluorines of CF3, the
// arms of an isopropyl group. The renumberings of a molecule are those of its
// blocks, each by itself, followed by one of a few that move whole parts: sums
// take the place of products.
type block struct {
	places  []int   // ascending
	options [][]int // images of the places; the first changes nothing
}

// Limits of what is treated as a block: places that one exchange moves,
// renumberings of one block, and blocks. What goes beyond is searched with the
// rest.
const (
	widest      = 12
	mostOptions = 24
	mostBlocks  = 48
	swapSteps   = 2000
)

// blocks finds them. They are disjoint.
func (s *symmetry) blocks() []block {
	inside := s.exchanged()
	for {
		list, bad := s.split(inside)
		if bad == nil {
			return list
		}
		for _, k := range bad { // left to the search of the whole
			inside[k] = false
		}
	}
}

// exchanged marks the places that are moved by an exchange of two equivalent
// neighbours of one place, where that moves few.
func (s *symmetry) exchanged() []bool {
	inside := make([]bool, len(s.atoms))
	for v := range s.atoms {
		for n, u := range s.neighbours[v] {
			for _, w := range s.neighbours[v][:n] {
				if s.class[u] != s.class[w] {
					continue
				}
				p := s.exchange(u, w)
				moved := 0
				for k, q := range p {
					if k != q {
						moved++
					}
				}
				if moved == 0 || moved > widest || !s.harmless(p) {
					continue
				}
				for k, q := range p {
					inside[k] = inside[k] || k != q
				}
			}
		}
	}
	return inside
}

// exchange returns a renumbering that exchanges u and w and leaves in place
// what it can, nil if none turns up soon.
func (s *symmetry) exchange(u, w int) []int {
	b := newBacktrack(s, 1)
	b.most = swapSteps
	b.stay = true
	b.makeOrder(u, w)
	b.image[u], b.used[w], b.placed[u] = w, true, true
	b.image[w], b.used[u], b.placed[w] = u, true, true
	b.extend(2)
	if len(b.found) == 0 {
		return nil
	}
	return b.found[0]
}

// harmless says whether a renumbering keeps all stated stereo.
func (s *symmetry) harmless(p []int) bool {
	kept, _ := s.centres(p)
	return kept && s.keepsDoubleBonds(p)
}

// split sorts the marked places into blocks: connected parts with the same
// neighbours outside belong together. Where a block has too many renumberings,
// or one that changes stereo, it returns the places of that block instead.
func (s *symmetry) split(inside []bool) (list []block, bad []int) {
	seen := make([]bool, len(inside))
	var parts, borders [][]int
	for k := range inside {
		if !inside[k] || seen[k] {
			continue
		}
		part, border := s.connectedPart(k, inside, seen)
		at := slices.IndexFunc(borders, func(o []int) bool { return slices.Equal(o, border) })
		if at < 0 {
			at = len(parts)
			parts, borders = append(parts, nil), append(borders, border)
		}
		parts[at] = append(parts[at], part...)
	}
	for _, places := range parts {
		slices.Sort(places)
		options := s.within(places)
		if len(options) > mostOptions || len(list) == mostBlocks {
			return nil, places
		}
		b := block{places: places}
		for _, p := range options {
			if !s.harmless(p) {
				return nil, places
			}
			images := make([]int, len(places))
			for n, k := range places {
				images[n] = p[k]
			}
			b.options = append(b.options, images)
		}
		b.identityFirst()
		if len(b.options) > 1 {
			list = append(list, b)
		}
	}
	return list, nil
}

// identityFirst puts the option that changes nothing in front.
func (b *block) identityFirst() {
	at := slices.IndexFunc(b.options, func(o []int) bool { return slices.Equal(o, b.places) })
	b.options[0], b.options[at] = b.options[at], b.options[0]
}

// connectedPart returns the marked places that hang together with k, and their
// neighbours that are not marked.
func (s *symmetry) connectedPart(k int, inside, seen []bool) (part, border []int) {
	seen[k] = true
	part = []int{k}
	for at := 0; at < len(part); at++ {
		for _, j := range s.neighbours[part[at]] {
			switch {
			case !inside[j]:
				border = append(border, j)
			case !seen[j]:
				seen[j] = true
				part = append(part, j)
			}
		}
	}
	slices.Sort(border)
	return part, slices.Compact(border)
}

// within returns the renumberings that move nothing but the given places, at
// most one more than a block may have.
func (s *symmetry) within(places []int) [][]int {
	b := newBacktrack(s, mostOptions+1)
	b.most = swapSteps
	for k := range s.atoms {
		if !slices.Contains(places, k) {
			b.image[k], b.used[k], b.placed[k] = k, true, true
		}
	}
	b.makeOrder(places...)
	b.order, b.from = b.order[:len(places)], b.from[:len(places)]
	b.extend(0)
	if b.steps > b.most { // as good as too many
		return make([][]int, mostOptions+1)
	}
	return b.found
}

// lowest says whether the image of a block is the first, in the order of
// numbers, of all that its renumberings make of it.
func (b *block) lowest(image []int) bool {
	for _, o := range b.options[1:] {
		for n, k := range b.places {
			if d := image[o[n]] - image[k]; d < 0 {
				return false
			} else if d > 0 {
				break
			}
		}
	}
	return true
}
