package gauss

// potentialKernels lists the kernels by the names of linalg's. That a name is
// asked for says that the processor has what it needs.
func potentialKernels() map[string]potentialKernel {
	return map[string]potentialKernel{"avx512": potentialsAVX512, "avx2": potentialsAVX2}
}

// potentials512 fills groups of eight lanes; groups > 0.
//
//go:noescape
func potentials512(b *batch, p *primitive, table *fastRow, top, groups int)

func potentialsAVX512(b *batch, p *primitive, top int) {
	if b.lanes > 0 {
		potentials512(b, p, &fastTables()[top][0], top, (b.lanes+7)/8)
	}
}

// potentials256 fills groups of four lanes; groups > 0.
//
//go:noescape
func potentials256(b *batch, p *primitive, table *fastRow, top, groups int)

func potentialsAVX2(b *batch, p *primitive, top int) {
	if b.lanes > 0 {
		potentials256(b, p, &fastTables()[top][0], top, (b.lanes+3)/4)
	}
}
