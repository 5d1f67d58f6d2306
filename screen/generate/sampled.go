package generate

import "context"

// batch is how many structures are drawn between two looks at the energies.
const batch = 50

// bredShare: of so many structures one is bred from those that are there. Minima
// are found by it; coverage is not made better.
func (s *search) bredShare() int {
	if s.o.Minima {
		return 2
	}
	return 4
}

// sampled draws structures in batches until the budget is spent or nothing new
// is to be expected. The first batches follow the table of torsions, the later
// ones also what turned out to be low. Where no minima are asked for and the grid
// has been through them rotors are held, so that what lies between is found too;
// where combinations are too many for a grid the places in the list are better
// given to their middles.
func (s *search) sampled(ctx context.Context, budget int, gridded bool) error {
	if len(s.assembly.turns) == 0 {
		return nil
	}
	b, bred := &breeder{s: s}, s.bredShare()
	t := s.newTally()
	for done := 0; done < budget && !t.exhausted(); done += batch {
		n := min(batch, budget-done)
		grid := latin(stream(s.o.Seed, s.id, streamGrid, done), n, len(s.assembly.turns))
		from := len(s.pool)
		b.learn()
		for k := range n {
			r := stream(s.o.Seed, s.id, streamDraw, done+k)
			x := make([]float64, 3*s.m.NumAtoms())
			rec, ok := recipe{}, false
			if k%bred == bred-1 && b.ready() {
				rec, ok = b.draw(r, x)
			}
			if !ok {
				rec, ok = s.sampler.draw(r, grid[k], x)
			}
			s.result.Starts++
			if !ok {
				continue
			}
			s.result.Embedded++
			held := gridded && !s.o.Minima
			if err := s.add(ctx, x, rec, held); err != nil {
				return err
			}
		}
		s.sampler.learn(s.pool[from:])
		t.take(s.pool)
	}
	s.result.Unseen = t.unseen()
	return nil
}
