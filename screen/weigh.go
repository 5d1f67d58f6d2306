package screen

import (
	"cmp"
	"fmt"
	"slices"

	"torsieve/screen/ensemble"
)

// weigh ranks what is left and gives every conformer its weight.
func (r *ligandRun) weigh() {
	kept := r.alive(len(r.tiers) - 1)
	slices.SortStableFunc(kept, func(a, b int) int {
		return cmp.Compare(r.conformers[a].Final(), r.conformers[b].Final())
	})
	shapes := make([][]float64, len(kept))
	for k, i := range kept {
		shapes[k] = r.conformers[i].X
	}
	copies, complete := ensemble.Copies(r.ligand.Mol, shapes)
	if !complete {
		r.warnf("the molecule has more symmetry than was searched: degeneracies count mirror images alone")
	}
	for k, i := range kept {
		c := &r.conformers[i]
		c.Rank, c.Copies, c.Why = k+1, copies[k], "kept"
	}
	r.result.Kept = kept
	r.tellDoubts()
	for t := range r.options.Temperatures {
		r.result.Ensembles = append(r.result.Ensembles, r.weights(t))
	}
	r.superpose(kept)
}

// tellDoubts sums up what the tiers were not sure of in the kept conformers.
func (r *ligandRun) tellDoubts() {
	n, first := 0, ""
	for _, i := range r.result.Kept {
		c := &r.conformers[i]
		if len(c.Doubts) == 0 {
			continue
		}
		if n++; n == 1 {
			first = fmt.Sprintf("conformer %d: %s", c.Number, c.Doubts[0])
		}
	}
	if n > 0 {
		r.warnf("%d of %d conformers came with doubts, the first: %s", n, len(r.result.Kept), first)
	}
}

// weights is the ensemble at a temperature of the run, by index.
func (r *ligandRun) weights(index int) Weights {
	t := r.options.Temperatures[index]
	states := make([]ensemble.State, len(r.result.Kept))
	for k, i := range r.result.Kept {
		c := &r.conformers[i]
		states[k] = ensemble.State{Energy: c.FinalAt(index), Copies: float64(c.Copies)}
	}
	w := Weights{Distribution: ensemble.Weigh(states, t)}
	if scatter, known := r.tiers[len(r.tiers)-1].Scatter(r.ligand.Mol); known {
		w.Bars = ensemble.Bars(states, t, scatter, [2]uint64{r.options.Seed, hash(searchedOf(r.ligand.Mol))})
	}
	return w
}

// superpose lays every kept conformer onto the lowest one.
func (r *ligandRun) superpose(kept []int) {
	best := r.conformers[kept[0]].X
	for _, i := range kept[1:] {
		r.comparer.Superpose(best, r.conformers[i].X)
	}
}
