package gauss

import "torsieve/internal/linalg"

// Numbers of many auxiliary Gaussians stand side by side in rows of lanes,
// and the loops of fitting integrals run over whole rows. Rows are stride numbers
// long, a multiple of eight.

// A rowTerm is coef times row number row.
type rowTerm struct {
	row  int
	coef float64
}

// laneKernel holds the inner loops over lanes.
type laneKernel struct {
	// raise writes rows next[k] = x[axis] cur[down] + times cur[down2], one for
	// each step; see hermiteStep.
	raise func(next, cur, x []float64, steps []hermiteStep, stride int)
	// combine writes row k of dst as the sum of counts[k] terms over rows of src.
	combine func(dst, src []float64, terms []rowTerm, counts []int, stride int)
}

var portableLanes = laneKernel{raise: raiseGo, combine: combineGo}

// activeLanes returns the kernel that goes with the one of linalg.
func activeLanes() laneKernel { return lanesFor(linalg.Kernel()) }

func lanesFor(name string) laneKernel {
	if k, ok := laneKernels()[name]; ok {
		return k
	}
	return portableLanes
}

func raiseGo(next, cur, x []float64, steps []hermiteStep, stride int) {
	for k := range steps {
		s := &steps[k]
		out := next[k*stride:][:stride]
		a, u, v := cur[s.down*stride:][:stride], x[s.axis*stride:][:stride], cur[s.down2*stride:][:stride]
		for i := range out {
			out[i] = u[i]*a[i] + s.times*v[i]
		}
	}
}

func combineGo(dst, src []float64, terms []rowTerm, counts []int, stride int) {
	for k, n := range counts {
		out := dst[k*stride:][:stride]
		clear(out)
		for _, t := range terms[:n] {
			addScaled(out, t.coef, src[t.row*stride:])
		}
		terms = terms[n:]
	}
}

// checkRaise panics where assembly would leave its slices.
func checkRaise(next, cur, x []float64, steps []hermiteStep, stride int) {
	if stride%8 != 0 || stride <= 0 || len(next) < len(steps)*stride || len(x) < 3*stride {
		panic("gauss: rows of the wrong size")
	}
	top := len(cur)/stride - 1
	for k := range steps {
		s := &steps[k]
		if s.down > top || s.down2 > top || uint(s.axis) > 2 || s.down < 0 || s.down2 < 0 {
			panic("gauss: rows of the wrong size")
		}
	}
}

func checkCombine(dst, src []float64, terms []rowTerm, counts []int, stride int) {
	if stride%8 != 0 || stride <= 0 || len(dst) < len(counts)*stride {
		panic("gauss: rows of the wrong size")
	}
	all, top := 0, len(src)/stride
	for _, n := range counts {
		all += n
		if n < 1 {
			panic("gauss: a row of no terms")
		}
	}
	_ = terms[:all]
	for k := range terms {
		if uint(terms[k].row) >= uint(top) {
			panic("gauss: rows of the wrong size")
		}
	}
}
