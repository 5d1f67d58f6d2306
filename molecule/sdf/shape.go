package sdf

import "math"

// A shape says what the coordinates of a table are good for.
type shape int

const (
	nowhere shape = iota // all atoms at one place: no coordinates
	drawing              // a formula on paper: wedges hold the configuration
	space                // three-dimensional
)

// flatness in angstrom: what differs less in z lies in the plane of the paper.
const flatness = 1e-3

// shape decides by the coordinates; the dimension code of the second line
// (columns 21 and 22) only where they lie in a plane, as planar molecules do.
func (t *table) shape() shape {
	low, high := t.atoms[0].x, t.atoms[0].x
	for _, a := range t.atoms {
		for k, c := range a.x {
			low[k], high[k] = math.Min(low[k], c), math.Max(high[k], c)
		}
	}
	switch extent := [3]float64{high[0] - low[0], high[1] - low[1], high[2] - low[2]}; {
	case extent[2] > flatness:
		return space
	case len(t.atoms) > 1 && extent[0] <= flatness && extent[1] <= flatness:
		return nowhere
	}
	if len(t.atoms) == 1 || column(t.program, 20, 22) == "3D" && !t.hasMarks() && !t.hasFourfold() {
		return space
	}
	return drawing
}

// hasFourfold says whether an atom has four neighbours or more, as no planar
// molecule of ours has.
func (t *table) hasFourfold() bool {
	for _, list := range t.neighbours() {
		if len(list) >= 4 {
			return true
		}
	}
	return false
}

func (t *table) hasMarks() bool {
	for _, b := range t.bonds {
		if b.mark != plain {
			return true
		}
	}
	return false
}
