package store

import (
	"encoding/binary"
	"fmt"
	"math"
)

// coordinates are kept as little-endian float64, eight bytes a number: every bit
// comes back. nil stays nil, which is NULL.
func packCoordinates(x []float64) any {
	if x == nil {
		return nil
	}
	b := make([]byte, 0, 8*len(x))
	for _, v := range x {
		b = binary.LittleEndian.AppendUint64(b, math.Float64bits(v))
	}
	return b
}

func unpackCoordinates(b []byte) ([]float64, error) {
	if b == nil {
		return nil, nil
	}
	if len(b)%24 != 0 {
		return nil, fmt.Errorf("%d bytes of coordinates are no whole number of atoms", len(b))
	}
	x := make([]float64, len(b)/8)
	for i := range x {
		x[i] = math.Float64frombits(binary.LittleEndian.Uint64(b[8*i:]))
	}
	return x, nil
}

// checkCoordinates refuses what could not be read again, or should not have been
// made.
func checkCoordinates(x []float64, natoms int) error {
	if x != nil && len(x) != 3*natoms {
		return fmt.Errorf("%d coordinates for %d atoms", len(x), natoms)
	}
	for _, v := range x {
		if math.IsNaN(v) || math.IsInf(v, 0) {
			return fmt.Errorf("coordinate %g", v)
		}
	}
	return nil
}

// maybe is a number that need not be there: NaN is NULL. A zero loses its sign,
// which SQLite would not keep either.
func maybe(v float64) any {
	if math.IsNaN(v) {
		return nil
	}
	return v + 0
}

// number is a float64 as it stands in a column, NaN for NULL.
type number struct{ v *float64 }

// Scan takes the column's value.
func (n number) Scan(v any) error {
	switch v := v.(type) {
	case nil:
		*n.v = math.NaN()
	case float64:
		*n.v = v
	case int64: // SQLite may hand a whole number over as one
		*n.v = float64(v)
	default:
		return fmt.Errorf("want a number, have %T", v)
	}
	return nil
}

func checkFinite(what string, values ...float64) error {
	for _, v := range values {
		if math.IsInf(v, 0) {
			return fmt.Errorf("%s is %g", what, v)
		}
	}
	return nil
}

// yes is a bool as both databases keep it.
func yes(b bool) int {
	if b {
		return 1
	}
	return 0
}
