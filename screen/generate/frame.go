package generate

import "math"

// A frame is a right-handed set of axes: the origin at one end of a bond, z
// along the bond, x towards a neighbour.
type frame struct {
	origin  [3]float64
	x, y, z [3]float64
}

// bondFrame has its origin at the point tip, z from root to tip and x on the
// side of the point beside, which is bonded to either of them.
func bondFrame(p []float64, root, tip, beside int) frame {
	var f frame
	var side [3]float64
	for d := range 3 {
		f.origin[d] = p[3*tip+d]
		f.z[d] = p[3*tip+d] - p[3*root+d]
		side[d] = p[3*beside+d] - p[3*tip+d]
	}
	f.z = unit(f.z)
	along := dot(side, f.z)
	for d := range 3 {
		side[d] -= along * f.z[d]
	}
	if dot(side, side) < 1e-6 { // on the axis: any direction does
		side = [3]float64{1, 0, 0}
		if math.Abs(f.z[0]) > 0.8 {
			side = [3]float64{0, 1, 0}
		}
		along = dot(side, f.z)
		for d := range 3 {
			side[d] -= along * f.z[d]
		}
	}
	f.x = unit(side)
	f.y = cross(f.z, f.x)
	return f
}

// turned returns the frame rotated about z by angle, clockwise looking along z.
func (f frame) turned(angle float64) frame {
	s, c := math.Sincos(angle)
	x := f.x
	for d := range 3 {
		f.x[d] = c*x[d] + s*f.y[d]
	}
	f.y = cross(f.z, f.x)
	return f
}

// into writes the points p in the axes of f.
func (f frame) into(dst, p []float64) {
	for i := 0; i < len(p); i += 3 {
		v := [3]float64{p[i] - f.origin[0], p[i+1] - f.origin[1], p[i+2] - f.origin[2]}
		dst[i], dst[i+1], dst[i+2] = dot(v, f.x), dot(v, f.y), dot(v, f.z)
	}
}

// outOf writes points given in the axes of f in space.
func (f frame) outOf(dst, p []float64) {
	for i := 0; i < len(p); i += 3 {
		for d := range 3 {
			dst[i+d] = f.origin[d] + p[i]*f.x[d] + p[i+1]*f.y[d] + p[i+2]*f.z[d]
		}
	}
}

func dot(a, b [3]float64) float64 { return a[0]*b[0] + a[1]*b[1] + a[2]*b[2] }

func cross(a, b [3]float64) [3]float64 {
	return [3]float64{a[1]*b[2] - a[2]*b[1], a[2]*b[0] - a[0]*b[2], a[0]*b[1] - a[1]*b[0]}
}

func unit(a [3]float64) [3]float64 {
	n := math.Sqrt(dot(a, a))
	return [3]float64{a[0] / n, a[1] / n, a[2] / n}
}
