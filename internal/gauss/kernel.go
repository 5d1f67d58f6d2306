package gauss

import "torsieve/internal/linalg"

// A potentialKernel is one way to fill the potentials of a batch, orders up to
// fastTop; see potentialsGo.
type potentialKernel func(b *batch, p *primitive, top int)

// potentialsFor returns the kernel that goes with the one of linalg: results
// differ between kernels in the last digits, and one switch serves all.
func potentialsFor(name string) potentialKernel {
	if k, ok := potentialKernels()[name]; ok {
		return k
	}
	return potentialsGo
}

func activePotentials() potentialKernel { return potentialsFor(linalg.Kernel()) }
