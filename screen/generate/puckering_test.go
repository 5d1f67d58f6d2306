package generate

import (
	"fmt"
	"math"
	"testing"

	"torsieve/internal/geom"
)

// Rings and their coordinates, computed independently (see the file of checks).
func TestPuckering(t *testing.T) {
	for _, c := range readChecks(t).CremerPople {
		var ring []float64
		for _, p := range c.XYZ {
			ring = append(ring, p[:]...)
		}
		p := geom.PuckeringOf(ring)
		if math.Abs(p.Total()-c.Total) > 2e-6 {
			t.Errorf("ring of %d: Q %.6f, want %.6f", c.N, p.Total(), c.Total)
		}
		for k := range p.Amplitude {
			want := c.Modes[fmt.Sprint(k+2)]
			if math.Abs(p.Amplitude[k]-want[0]) > 2e-6 {
				t.Errorf("ring of %d: q%d %.6f, want %.6f", c.N, k+2, p.Amplitude[k], want[0])
			}
			if len(want) < 2 || want[0] < 1e-3 {
				continue // no phase, or none that means anything
			}
			if off := math.Remainder(p.Phase[k]-want[1]*degree, 2*math.Pi); math.Abs(off) > 1e-4 {
				t.Errorf("ring of %d: phi%d %.4f degrees, want %.4f", c.N, k+2, p.Phase[k]/degree, want[1])
			}
		}
		for j, z := range p.Heights(c.N) {
			if want := geom.OutOfPlane(ring)[j]; math.Abs(z-want) > 1e-9 {
				t.Errorf("ring of %d: height %d is %.9f, want %.9f", c.N, j, z, want)
			}
		}
	}
}
