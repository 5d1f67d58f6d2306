package generate

import (
	"hash/fnv"
	"math/rand/v2"
)

// Purposes of random streams: no two uses share one.
const (
	streamShapes = iota + 1
	streamGrid
	streamDraw
	streamWhole
	streamKick
	streamLottery
	streamTally
)

// stream returns the random numbers that belong to one purpose and one index
// of a ligand in a run. What is drawn from it does not depend on what else has
// been drawn, so that work may be dealt out in any order.
func stream(seed uint64, id string, purpose, index int) *rand.Rand {
	h := fnv.New64a()
	h.Write([]byte(id))
	return rand.New(rand.NewPCG(mix(seed^mix(h.Sum64())), mix(uint64(purpose)<<32+uint64(index))))
}

// mix spreads the bits of a counter over the word.
// Source: the finaliser of SplitMix64, G. L. Steele Jr., D. Lea, C. H. Flood,
// OOPSLA 2014, doi:10.1145/2660193.2660195.
func mix(z uint64) uint64 {
	z += 0x9e3779b97f4a7c15
	z = (z ^ z>>30) * 0xbf58476d1ce4e5b9
	z = (z ^ z>>27) * 0x94d049bb133111eb
	return z ^ z>>31
}
