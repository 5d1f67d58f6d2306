package store

import (
	"crypto/sha256"
	"encoding/hex"
	"fmt"
)

// A Key names settings: those of one level of a run and of all levels below it.
// It is the SHA-256 of their texts, 64 hexadecimal digits.
type Key string

// A Level is one step of the ladder that a structure climbs, the generator and
// its force field first, the ensemble last.
type Level struct {
	Tier string // what the step is called: "forcefield", "hf", "ensemble"
	// Settings are those that matter to the results of this step, as text: JSON
	// with sorted keys, say. Settings that decide how much is computed, a cap or
	// a window, do not belong to a tier but to the ensemble, which they decide.
	Settings string
}

// A Chain is the ladder of a run from below. Two runs share the results of the
// levels up to the first one in which they differ.
type Chain []Level

// Keys returns the key of every level.
func (c Chain) Keys() []Key {
	keys := make([]Key, len(c))
	below := Key("")
	for i, l := range c {
		below = keyOf(below, l)
		keys[i] = below
	}
	return keys
}

// Top is the key of the last level.
func (c Chain) Top() Key {
	keys := c.Keys()
	if len(keys) == 0 {
		return ""
	}
	return keys[len(keys)-1]
}

// keyOf hashes lengths along with the texts, so that no two levels run into one
// another.
func keyOf(below Key, l Level) Key {
	h := sha256.New()
	fmt.Fprintf(h, "torsieve settings 1\n%s\n%d %s\n%d %s\n", below, len(l.Tier), l.Tier, len(l.Settings), l.Settings)
	return Key(hex.EncodeToString(h.Sum(nil)))
}
