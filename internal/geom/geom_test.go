package geom

import (
	"fmt"
	"math"
	"math/rand/v2"
	"testing"

	"torsieve/internal/gradcheck"
)

const degree = math.Pi / 180

// crooked returns n points with no two, three or four in a special position.
func crooked(n int, seed uint64) []float64 {
	r := rand.New(rand.NewPCG(seed, 1))
	x := make([]float64, 3*n)
	for i := range x {
		x[i] = 4*r.Float64() - 2
	}
	return x
}

func TestDihedralSign(t *testing.T) {
	// Clockwise is positive: IUPAC Compendium of Chemical Terminology, "torsion
	// angle"; this arrangement is -90 degrees.
	x := []float64{1, 1, 0, 1, 0, 0, 0, 0, 0, 0, 0, 1}
	if got := Dihedral(x, 0, 1, 2, 3) / degree; math.Abs(got+90) > 1e-12 {
		t.Errorf("dihedral %g degrees, want -90", got)
	}
}

// chain builds four points from three lengths, two angles and a dihedral with
// the textbook rotation matrices, without any function of this package.
func chain(a, b, c, alpha, beta, phi float64) []float64 {
	sa, ca := math.Sincos(alpha)
	sb, cb := math.Sincos(beta)
	sp, cp := math.Sincos(phi)
	return []float64{
		a * ca, a * sa, 0,
		0, 0, 0,
		b, 0, 0,
		b - c*cb, c * sb * cp, c * sb * sp,
	}
}

func TestFourPointChain(t *testing.T) {
	// 1-4 distances from the closed form d^2 = (b - a cos A - c cos B)^2 + ...;
	// computed independently, see testdata/reference/uff/README.md.
	for _, c := range []struct{ a, b, c, alpha, beta, phi, d float64 }{
		{1.53, 1.53, 1.53, 112, 112, 0, 2.676296},
		{1.53, 1.53, 1.53, 112, 112, 60, 3.02902},
		{1.53, 1.53, 1.53, 112, 112, 65, 3.080001},
		{1.53, 1.53, 1.53, 112, 112, 120, 3.633148},
		{1.53, 1.53, 1.53, 112, 112, 180, 3.900278},
		{1.09, 1.34, 1.5, 121, 124, 0, 2.757576},
		{1.09, 1.34, 1.5, 121, 124, 180, 3.500243},
	} {
		x := chain(c.a, c.b, c.c, c.alpha*degree, c.beta*degree, c.phi*degree)
		check := func(what string, got, want, tol float64) {
			if math.Abs(got-want) > tol {
				t.Errorf("%v: %s is %.8g, want %.8g", c, what, got, want)
			}
		}
		check("1-4 distance", Distance(x, 0, 3), c.d, 1e-6)
		check("angle at 1", Angle(x, 0, 1, 2)/degree, c.alpha, 1e-9)
		check("angle at 2", Angle(x, 1, 2, 3)/degree, c.beta, 1e-9)
		check("dihedral", math.Abs(Dihedral(x, 0, 1, 2, 3)/degree), c.phi, 1e-9)
	}
}

func TestSignedVolume(t *testing.T) {
	// Seen from the first point the others run anticlockwise: positive.
	// Independent value, see testdata/reference/uff/README.md.
	x := []float64{0, 0, 1, 1, 0, -0.3, -0.5, 0.866, -0.3, -0.5, -0.866, -0.3}
	if got := SignedVolume(x, 0, 1, 2, 3); math.Abs(got-3.3774) > 1e-4 {
		t.Errorf("signed volume %g, want 3.3774", got)
	}
}

func TestDerivatives(t *testing.T) {
	x := crooked(4, 7)
	for _, c := range []struct {
		name  string
		value func(x []float64) float64
		add   func(grad, x []float64, f float64)
	}{
		{"distance", func(x []float64) float64 { return Distance(x, 0, 2) },
			func(g, x []float64, f float64) { AddDistance(g, x, 0, 2, f) }},
		{"angle", func(x []float64) float64 { return Angle(x, 0, 1, 2) },
			func(g, x []float64, f float64) { AddAngle(g, x, 0, 1, 2, f) }},
		{"dihedral", func(x []float64) float64 { return Dihedral(x, 0, 1, 2, 3) },
			func(g, x []float64, f float64) { AddDihedral(g, x, 0, 1, 2, 3, f) }},
	} {
		t.Run(c.name, func(t *testing.T) {
			gradcheck.Run(t, x, 1e-3, 1e-9, func(x, grad []float64) float64 {
				if grad != nil {
					c.add(grad, x, 3)
				}
				return 3 * c.value(x)
			})
		})
	}
}

func TestDerivativesOnALine(t *testing.T) {
	x := []float64{0, 0, 0, 1, 0, 0, 2, 0, 0, 3, 1, 0}
	grad := make([]float64, len(x))
	AddAngle(grad, x, 0, 1, 2, 1)
	AddDihedral(grad, x, 0, 1, 2, 3, 1)
	AddDistance(grad, x, 0, 0, 1)
	for i, g := range grad {
		if g != 0 {
			t.Errorf("component %d is %g, want 0 where the angle is undefined", i, g)
		}
	}
}

func TestRotateAbout(t *testing.T) {
	x := crooked(6, 3)
	before := append([]float64(nil), x...)
	moving := []int{3, 4, 5}
	RotateAbout(x, 1, 2, moving, 40*degree)
	for _, m := range moving {
		turned := math.Remainder(Dihedral(x, 0, 1, 2, m)-Dihedral(before, 0, 1, 2, m), 2*math.Pi)
		if math.Abs(turned-40*degree) > 1e-12 {
			t.Errorf("point %d turned by %g degrees, want 40", m, turned/degree)
		}
		for j := range 6 {
			fixed := j == 1 || j == 2 || j > 2 // axis and its own side
			if d := Distance(x, m, j) - Distance(before, m, j); fixed && math.Abs(d) > 1e-12 {
				t.Errorf("distance %d-%d changed by %g", m, j, d)
			}
		}
	}
	for i := range 9 {
		if x[i] != before[i] {
			t.Fatalf("number %d of a point that stays changed", i)
		}
	}
}

func ExampleRotateAbout() {
	x := []float64{0, 1, 0, 0, 0, 0, 1, 0, 0, 1, 1, 0} // eclipsed
	RotateAbout(x, 1, 2, []int{3}, 60*degree)
	fmt.Printf("%.0f\n", Dihedral(x, 0, 1, 2, 3)/degree)
	// Output: 60
}
