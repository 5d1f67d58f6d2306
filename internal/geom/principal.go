package geom

import (
	"cmp"
	"slices"
)

// ToPrincipalAxes moves x (3N) as a rigid body, without reflection: its centroid
// to the origin and the axes along which its points lie farthest apart, the
// second farthest and the least to x, y and z. Where two of the extensions are
// equal the axes between them are any; so is the sense of each axis.
func ToPrincipalAxes(x []float64) {
	if len(x) == 0 {
		return
	}
	c := Centroid(x)
	var spread, axes [4][4]float64 // the fourth row and column stay apart
	for i := range axes {
		axes[i][i] = 1
	}
	for i := 0; i < len(x); i += 3 {
		for k := range 3 {
			x[i+k] -= c[k]
		}
		for k := range 3 {
			for l := range 3 {
				spread[k][l] += x[i+k] * x[i+l]
			}
		}
	}
	diagonalise(&spread, &axes)
	order := []int{0, 1, 2}
	slices.SortStableFunc(order, func(k, l int) int { return cmp.Compare(spread[l][l], spread[k][k]) })
	var frame [3]vec
	for row, k := range order[:2] {
		frame[row] = vec{axes[0][k], axes[1][k], axes[2][k]}
	}
	frame[2] = cross(frame[0], frame[1])
	for i := 0; i < len(x); i += 3 {
		p := at(x, i/3)
		for k := range 3 {
			x[i+k] = dot(frame[k], p)
		}
	}
}
