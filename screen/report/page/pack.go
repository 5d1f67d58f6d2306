package page

import (
	"encoding/base64"
	"encoding/binary"
	"math"

	"torsieve/internal/units"
	"torsieve/screen"
)

// finest is the step of coordinates where it suffices, angstrom.
const finest = 0.001

// stepFor is the smallest step, angstrom, with which 16 bits hold every
// coordinate about the centre of the first conformer.
func stepFor(r *screen.Result, n int) float64 {
	centre := centreOf(r)
	var most float64
	for _, i := range r.Kept[:n] {
		for k, x := range r.Conformers[i].X {
			most = math.Max(most, math.Abs(x-centre[k%3])/units.Angstrom)
		}
	}
	return math.Max(finest, math.Ceil(most/32767/finest)*finest)
}

func centreOf(r *screen.Result) [3]float64 {
	x := r.Conformers[r.Kept[0]].X
	var centre [3]float64
	for k, v := range x {
		centre[k%3] += 3 * v / float64(len(x))
	}
	return centre
}

// coordinatesPerLigand bounds what the shapes of one ligand fill, in bytes
// before they become text.
const coordinatesPerLigand = 24000

// pack turns as many of the shapes as there is room for into steps about the
// centre of the first one.
func (f *figures) pack(r *screen.Result, kept []int) [][]int16 {
	room := max(1, coordinatesPerLigand/(6*len(f.Elements)))
	centre := centreOf(r)
	var shapes [][]int16
	for _, i := range kept[:min(room, len(kept))] {
		x := r.Conformers[i].X
		shape := make([]int16, len(x))
		for k, v := range x {
			shape[k] = int16(math.Round((v - centre[k%3]) / units.Angstrom / f.Step))
		}
		shapes = append(shapes, shape)
	}
	return shapes
}

// fill writes the shapes as text: 16 bits a number, the low byte first, base 64.
func (f *figures) fill() {
	var bytes []byte
	for _, shape := range f.shapes {
		for _, v := range shape {
			bytes = binary.LittleEndian.AppendUint16(bytes, uint16(v))
		}
	}
	f.Coordinates = base64.StdEncoding.EncodeToString(bytes)
}
