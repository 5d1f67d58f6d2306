package hf

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/integrate/quad"
)

func TestSlaterOverlap(t *testing.T) {
	var file struct {
		Values []struct {
			NA    int     `json:"n_a"`
			NB    int     `json:"n_b"`
			ZA    float64 `json:"zeta_a"`
			ZB    float64 `json:"zeta_b"`
			R     float64
			S     float64
			Slope float64 `json:"dS_dR"`
		}
	}
	decodeFile(t, "../testdata/reference/gcp/slater-overlap.json", &file)
	if len(file.Values) != 13 {
		t.Fatalf("%d values, want 13", len(file.Values))
	}
	for _, v := range file.Values {
		s, slope := slaterOverlap(v.NA, v.NB, v.ZA, v.ZB, v.R)
		if math.Abs(s-v.S) > 1e-12*v.S || math.Abs(slope-v.Slope) > 1e-12*math.Abs(v.Slope) {
			t.Errorf("%+v: overlap %.13g, slope %.13g", v, s, slope)
		}
		if slow := slaterOverlapSlow(v.NA, v.NB, v.ZA, v.ZB, v.R); math.Abs(s-slow) > 1e-10*slow {
			t.Errorf("%+v: overlap %.13g, by quadrature %.13g", v, s, slow)
		}
	}
}

// slaterOverlapSlow integrates the product of the functions in elliptic
// coordinates numerically: the distances from the centres are r(x+y)/2 and
// r(x-y)/2, the volume element is r^3/8 (x^2-y^2) dx dy, after the angle.
func slaterOverlapSlow(n, m int, za, zb, r float64) float64 {
	decay := 0.5 * (za + zb) * r
	inner := func(x float64) float64 {
		return quad.Fixed(func(y float64) float64 {
			ra, rb := 0.5*r*(x+y), 0.5*r*(x-y)
			return math.Pow(ra, float64(n-1)) * math.Pow(rb, float64(m-1)) * math.Exp(-za*ra-zb*rb) * (x*x - y*y)
		}, -1, 1, 60, quad.Legendre{}, 0)
	}
	// The tail beyond 45 decay lengths is below 1e-17 of the whole.
	whole := quad.Fixed(inner, 1, 1+45/decay, 120, quad.Legendre{}, 0)
	return 0.5 * slaterNorm(n, za) * slaterNorm(m, zb) * r * r * r / 8 * whole
}

// The recursion and the series for the auxiliary integrals meet at t = 4.
func TestSlaterB(t *testing.T) {
	for _, x := range []float64{4, -4, 7.5, -20} {
		b := make([]float64, 8)
		slaterB(x, b)
		for l, got := range b {
			if want := slaterBSeries(l, x); math.Abs(got-want) > 1e-13*math.Abs(want) {
				t.Errorf("B%d(%g) = %.16g, series %.16g", l, x, got, want)
			}
		}
	}
}
