package dedupe

import (
	"context"

	"torsieve/internal/geom"
)

// RMSD returns the smallest root-mean-square distance of the compared atoms of
// two shapes, and whether b had to be mirrored for it. Panics if a or b is not
// a shape of the Comparer's molecule.
func (c *Comparer) RMSD(a, b []float64) (rmsd float64, mirrored bool) {
	f := c.fitter().best(c.take(a), c.take(b))
	return f.rmsd, f.mirrored
}

// Distances returns the RMSD of every pair of shapes, in bohr: a symmetric
// table. The error is ctx.Err().
func (c *Comparer) Distances(ctx context.Context, xs [][]float64) ([][]float64, error) {
	clouds := make([]cloud, len(xs))
	out := make([][]float64, len(xs))
	for i, x := range xs {
		clouds[i] = c.take(x)
		out[i] = make([]float64, len(xs))
	}
	fit := c.fitter()
	for i := range xs {
		if ctx.Err() != nil {
			return nil, ctx.Err()
		}
		for j := range i {
			d := fit.best(clouds[i], clouds[j]).rmsd
			out[i][j], out[j][i] = d, d
		}
	}
	return out, nil
}

// take picks the compared atoms out of a shape.
func (c *Comparer) take(x []float64) cloud {
	if len(x) != 3*c.m.NumAtoms() {
		panic("dedupe: shape of another molecule")
	}
	out := make([]float64, 0, 3*len(c.atoms))
	for _, i := range c.atoms {
		out = append(out, x[3*i], x[3*i+1], x[3*i+2])
	}
	return newCloud(out)
}

// exact computes the RMSD of a fit point by point.
func (c *Comparer) exact(a, b cloud, mirrored bool, lays []int) float64 {
	moved := renumbered(b.x, lays)
	if mirrored {
		mirror(moved)
	}
	return geom.Align(a.x, moved).RMSD
}

// renumbered returns the atoms of b in the order in which p lays them on a.
func renumbered(b []float64, p []int) []float64 {
	out := make([]float64, len(b))
	for k, q := range p {
		copy(out[3*k:3*k+3], b[3*q:])
	}
	return out
}

func mirror(x []float64) {
	for i := 2; i < len(x); i += 3 {
		x[i] = -x[i]
	}
}

// Superpose lays the shape x onto the shape onto, in place, all atoms of it:
// turned and moved, never mirrored and never renumbered. The fit is the best
// over all renumberings of the compared atoms.
func (c *Comparer) Superpose(onto, x []float64) {
	a, b := c.take(onto), c.take(x)
	f := c.fitter()
	lays := f.lays(f.among(a, b, c.same, false))
	var to, from []float64 // the compared atoms where they are
	for k, i := range c.atoms {
		j := c.atoms[lays[k]]
		to = append(to, onto[3*i:3*i+3]...)
		from = append(from, x[3*j:3*j+3]...)
	}
	geom.Align(to, from).Apply(x)
}

// SelfMirror returns the RMSD of a shape to its own mirror image, and false
// where the molecule is not its own mirror image. Where it is and the RMSD is
// not small, the shape stands for two of the same energy.
func (c *Comparer) SelfMirror(x []float64) (rmsd float64, ok bool) {
	if !c.Mirrors() {
		return 0, false
	}
	a := c.take(x)
	f := c.fitter()
	best := f.among(a, a, c.inverse, true)
	if best.rmsd < exactly {
		return c.exact(a, a, best.mirrored, f.lays(best)), true
	}
	return best.rmsd, true
}
