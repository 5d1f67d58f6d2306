package thermo_test

import (
	"testing"

	"torsieve/internal/thermo"
	"torsieve/internal/units"
	"torsieve/screen/ensemble"
)

// Symmetry is counted once, in the copies or in the rotation, and both ways give
// the same ensemble. Pentane: on the whole surface of its two torsions there are
// 1 tt, 4 tg, 2 gg and 4 gx minima (each pair of signs +- splits in two), as every
// textbook on conformations has them. As molecules: tt (C2v) and gg (C2) have
// sigma 2, the others 1; tg, gg and gx are chiral and stand for their mirror
// image too. Copies = common m/sigma, common being 2:
//
//	    sigma  mirror m  copies
//	tt    2       1        1
//	tg    1       2        4
//	gg    2       2        2
//	gx    1       2        4
//
// Sigma in the rotation and copies of 1, 2, 2, 2 (the mirror images alone) is the
// other way; sigma in the rotation and 1, 4, 2, 4 counts it twice, and tt with
// half of its weight. Butane: anti (C2h) sigma 2, m 1; gauche (C2) sigma 2, m 2:
// 1 : 2 either way, sigma being common.
func TestSymmetryIsCountedOnce(t *testing.T) {
	type shape struct {
		kcal                  float64 // above the lowest, about what is published
		sigma, mirror, copies int
		lowest                float64 // softest mode, cm^-1, made up
	}
	for name, shapes := range map[string][]shape{
		"pentane": {{0, 2, 1, 1, 110}, {0.6, 1, 2, 4, 100}, {1.0, 2, 2, 2, 95}, {2.9, 1, 2, 4, 80}},
		"butane":  {{0, 2, 1, 1, 120}, {0.6, 2, 2, 2, 110}},
	} {
		t.Run(name, func(t *testing.T) {
			var inCopies, inRotation, twice []ensemble.State
			for _, s := range shapes {
				species := thermo.Species{
					Body:     thermo.Body{Mass: 72 * units.Dalton, Axes: 3, Moments: [3]float64{2e5, 1e6, 1.1e6}},
					Symmetry: 1, Quanta: []float64{s.lowest * units.Wavenumber},
				}
				energy := s.kcal * units.KcalPerMol
				g := energy + species.At(298.15, thermo.OneBar).FreeEnergy()
				species.Symmetry = s.sigma
				gSigma := energy + species.At(298.15, thermo.OneBar).FreeEnergy()
				inCopies = append(inCopies, ensemble.State{Energy: g, Copies: float64(s.copies)})
				inRotation = append(inRotation, ensemble.State{Energy: gSigma, Copies: float64(s.mirror)})
				twice = append(twice, ensemble.State{Energy: gSigma, Copies: float64(s.copies)})
			}
			want := ensemble.Weigh(inRotation, 298.15).Populations
			for k, p := range ensemble.Weigh(inCopies, 298.15).Populations {
				near(t, "population", p, want[k], 1e-12)
			}
			wrong := ensemble.Weigh(twice, 298.15).Populations
			if ratio := wrong[0] / wrong[1] / (want[0] / want[1]); name == "pentane" {
				near(t, "tt to tg, symmetry counted twice", ratio, 0.5, 1e-12)
			}
		})
	}
}
