package geom

import (
	"math"
	"testing"
)

// Two six-point sets and their superposition by singular value decomposition,
// computed independently; see testdata/reference/uff/README.md.
var (
	setA = []float64{0.4571, -1.56, 1.1257, 1.4108, -2.9266, -1.9533, 0.1918, -0.4744, -0.0252,
		-1.2796, 1.3191, 1.1667, 0.099, 1.6909, 0.7013, -1.2889, 0.5531, -1.4383}
	setB = []float64{3.0179, -2.6009, 0.4772, 2.2964, -2.4749, -2.9846, 1.3172, -2.1899, 0.2666,
		0.2772, -2.1527, 2.5865, 0.71, -0.9543, 1.7508, -0.9626, -2.5862, 0.2361}
)

const (
	setRMSD       = 0.15218016
	setMirrorRMSD = 1.01530175
)

func TestReferenceSuperposition(t *testing.T) {
	if s := Align(setA, setB); math.Abs(s.RMSD-setRMSD) > 1e-8 {
		t.Errorf("Align: RMSD %.9f, want %.9f", s.RMSD, setRMSD)
	}
	same, mirrored := RMSD(setA, setB)
	if math.Abs(same-setRMSD) > 1e-8 || math.Abs(mirrored-setMirrorRMSD) > 1e-8 {
		t.Errorf("RMSD: %.9f and mirrored %.9f, want %.9f and %.9f", same, mirrored, setRMSD, setMirrorRMSD)
	}
}

// moved turns x about two of its own bonds, as one body, and shifts it.
func moved(x []float64, a, b float64) []float64 {
	y := append([]float64(nil), x...)
	all := make([]int, len(x)/3)
	for i := range all {
		all[i] = i
	}
	RotateAbout(y, 0, 1, all, a)
	RotateAbout(y, 1, 2, all, b)
	for i := range y {
		y[i] += float64(1+i%3) * 1.7
	}
	return y
}

func TestAlignUndoesAMotion(t *testing.T) {
	for _, c := range []struct {
		name string
		x    []float64
	}{
		{"crooked", crooked(9, 5)},
		{"tetrahedron", []float64{1, 1, 1, 1, -1, -1, -1, 1, -1, -1, -1, 1}},
		{"square", []float64{1, 0, 0, 0, 1, 0, -1, 0, 0, 0, -1, 0}},
		{"points on a line", []float64{0, 0, 0, 1, 0, 0, 2.5, 0, 0}},
	} {
		for _, angles := range [][2]float64{{0, 0}, {0.4, 1.1}, {math.Pi, 0}, {math.Pi, math.Pi / 2}, {2.9, -2.2}} {
			y := moved(c.x, angles[0], angles[1])
			s := Align(c.x, y)
			if s.RMSD > 1e-12 {
				t.Errorf("%s after %v: RMSD %g, want 0", c.name, angles, s.RMSD)
			}
			s.Apply(y)
			for i := range y {
				if math.Abs(y[i]-c.x[i]) > 1e-12 {
					t.Fatalf("%s after %v: number %d is %g, want %g", c.name, angles, i, y[i], c.x[i])
				}
			}
		}
	}
}

func TestRotationIsProper(t *testing.T) {
	mirror := append([]float64(nil), setB...)
	for i := 2; i < len(mirror); i += 3 {
		mirror[i] = -mirror[i]
	}
	s := Align(setA, mirror)
	r := s.Rotation
	det := r[0]*(r[4]*r[8]-r[5]*r[7]) - r[1]*(r[3]*r[8]-r[5]*r[6]) + r[2]*(r[3]*r[7]-r[4]*r[6])
	if math.Abs(det-1) > 1e-13 {
		t.Errorf("determinant %.15f, want 1", det)
	}
	if math.Abs(s.RMSD-setMirrorRMSD) > 1e-8 {
		t.Errorf("RMSD onto the mirror image %.9f, want %.9f", s.RMSD, setMirrorRMSD)
	}
}

func TestRMSDDoesNotFeelMotions(t *testing.T) {
	a, b := crooked(12, 1), crooked(12, 2)
	same, mirrored := RMSD(a, b)
	same2, mirrored2 := RMSD(moved(a, 1, 2), moved(b, -0.3, 0.7))
	if math.Abs(same-same2) > 1e-13 || math.Abs(mirrored-mirrored2) > 1e-13 {
		t.Errorf("(%g, %g) became (%g, %g) by motions", same, mirrored, same2, mirrored2)
	}
}

func BenchmarkRMSD(b *testing.B) {
	p, q := crooked(30, 1), crooked(30, 2)
	for b.Loop() {
		RMSD(p, q)
	}
}
