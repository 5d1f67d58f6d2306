package gauss

// laneKernels lists the kernels by the names of linalg's.
func laneKernels() map[string]laneKernel {
	return map[string]laneKernel{
		"avx512": {raise: raiseAVX512, combine: combineAVX512},
		"avx2":   {raise: raiseAVX2, combine: combineAVX2},
	}
}

// raise512 is raiseGo for count > 0 steps and rows of 8 groups numbers, stride
// bytes apart.
//
//go:noescape
func raise512(next, cur, x *float64, steps *hermiteStep, count, stride, groups int)

// raise256 is raise512 for rows of 4 groups numbers.
//
//go:noescape
func raise256(next, cur, x *float64, steps *hermiteStep, count, stride, groups int)

// combine512 is combineGo for rows > 0 rows of 8 groups numbers, stride bytes
// apart.
//
//go:noescape
func combine512(dst, src *float64, terms *rowTerm, counts *int, rows, stride, groups int)

// combine256 is combine512 for rows of 4 groups numbers.
//
//go:noescape
func combine256(dst, src *float64, terms *rowTerm, counts *int, rows, stride, groups int)

func raiseAVX512(next, cur, x []float64, steps []hermiteStep, stride int) {
	if len(steps) > 0 {
		checkRaise(next, cur, x, steps, stride)
		raise512(&next[0], &cur[0], &x[0], &steps[0], len(steps), 8*stride, stride/8)
	}
}

func raiseAVX2(next, cur, x []float64, steps []hermiteStep, stride int) {
	if len(steps) > 0 {
		checkRaise(next, cur, x, steps, stride)
		raise256(&next[0], &cur[0], &x[0], &steps[0], len(steps), 8*stride, stride/4)
	}
}

func combineAVX512(dst, src []float64, terms []rowTerm, counts []int, stride int) {
	if len(counts) > 0 {
		checkCombine(dst, src, terms, counts, stride)
		combine512(&dst[0], &src[0], &terms[0], &counts[0], len(counts), 8*stride, stride/8)
	}
}

func combineAVX2(dst, src []float64, terms []rowTerm, counts []int, stride int) {
	if len(counts) > 0 {
		checkCombine(dst, src, terms, counts, stride)
		combine256(&dst[0], &src[0], &terms[0], &counts[0], len(counts), 8*stride, stride/4)
	}
}
