package geom

import (
	"math"
	"testing"
)

// However a body was turned before, its points end at the same places but for
// the sense of two axes; the shape does not change, nor its hand.
func TestToPrincipalAxes(t *testing.T) {
	body := []float64{0.3, -0.2, 1, 2.5, 0.4, 0.1, -1.1, 0.9, 0.7, -3, 0.2, -0.6, 0.5, 1.4, -0.8}
	want := append([]float64(nil), body...)
	ToPrincipalAxes(want)
	if same, _ := RMSD(body, want); same > 1e-12 {
		t.Errorf("the shape changed by %g", same)
	}
	for _, angle := range []float64{0.4, 1.9, 3.3} {
		x := append([]float64(nil), body...)
		sin, cos := math.Sincos(angle)
		for i := 0; i < len(x); i += 3 {
			x[i], x[i+1] = cos*x[i]-sin*x[i+1]+4, sin*x[i]+cos*x[i+1]-1
			x[i+1], x[i+2] = cos*x[i+1]-sin*x[i+2], sin*x[i+1]+cos*x[i+2]+2
		}
		ToPrincipalAxes(x)
		product := 1.0
		for k := range 3 {
			sense := math.Copysign(1, x[k]*want[k])
			product *= sense
			for i := k; i < len(x); i += 3 {
				if math.Abs(sense*x[i]-want[i]) > 1e-12 {
					t.Errorf("turned by %g: coordinate %d is %g, want %g", angle, i, sense*x[i], want[i])
				}
			}
		}
		if product != 1 {
			t.Errorf("turned by %g: the hand changed", angle)
		}
	}
}

// A line, a point and nothing at all have their places too.
func TestToPrincipalAxesOfFewPoints(t *testing.T) {
	line := []float64{1, 1, 1, 2, 2, 2}
	ToPrincipalAxes(line)
	half := math.Sqrt(3) / 2
	for i, want := range []float64{half, 0, 0, -half, 0, 0} {
		if math.Abs(math.Abs(line[i])-math.Abs(want)) > 1e-12 {
			t.Errorf("line: coordinate %d is %g, want %g", i, line[i], want)
		}
	}
	point := []float64{3, 4, 5}
	ToPrincipalAxes(point)
	for _, v := range point {
		if v != 0 {
			t.Errorf("point: %v, want the origin", point)
		}
	}
	ToPrincipalAxes(nil)
}
