//go:build !amd64

package linalg

// available lists what the processor has, the fastest first.
func available() []*kernel { return []*kernel{&portable} }
