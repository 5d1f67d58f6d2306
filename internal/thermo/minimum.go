package thermo

import (
	"fmt"
	"math"
	"strings"

	"torsieve/internal/units"
)

// Tolerated is the largest imaginary quantum, in magnitude, that is taken for
// the noise of a soft real mode, hartree.
//
// Its reason: a soft mode has little curvature, and a rough surface can turn its
// sign. In water, GFN2-xTB gives rotations, whose curvature is none, 5 to 20
// cm^-1 of either sign. The top of a methyl group's barrier shows 100 to 300
// cm^-1; that is a saddle. A mode in between that is taken as
// real of the same magnitude, as is common practice, counts for about what any
// soft mode counts for: from 10 to 50 cm^-1 its free energy at 298 K rises by
// 0.46 kcal/mol, while leaving it out would make it 0.5 to 0.9 kcal/mol too high.
const Tolerated = 50 * units.Wavenumber

// softest is the least quantum that a mode counts with, hartree: noise decides
// about less, and the plain harmonic entropy has no limit there.
const softest = 1 * units.Wavenumber

// A SaddleError says that a structure is no minimum of its surface.
type SaddleError struct {
	Modes  []int     // the imaginary ones beyond Tolerated, indices of Quanta
	Quanta []float64 // of these, hartree, negative
}

func (e *SaddleError) Error() string {
	var list []string
	for _, q := range e.Quanta {
		list = append(list, fmt.Sprintf("%.0fi", -q/units.Wavenumber))
	}
	what := "imaginary vibration"
	if len(list) > 1 {
		what += "s"
	}
	return fmt.Sprintf("no minimum but a saddle (%d %s: %s cm^-1): move the atoms along and relax again",
		len(list), what, strings.Join(list, ", "))
}

// Real returns the quanta as real ones, all at least softest, and how many of
// them, the first, are imaginary modes of at most Tolerated taken as real of the
// same magnitude: a caller with any says so. With a larger one the error is a
// *SaddleError, and Motion of its modes leads downhill.
func (m *Modes) Real() (quanta []float64, turned int, err error) {
	var saddle SaddleError
	for k, q := range m.Quanta {
		if q < 0 {
			turned++
		}
		if q < -Tolerated {
			saddle.Modes = append(saddle.Modes, k)
			saddle.Quanta = append(saddle.Quanta, q)
		}
		quanta = append(quanta, math.Max(softest, math.Abs(q)))
	}
	if len(saddle.Modes) > 0 {
		return nil, 0, &saddle
	}
	return quanta, turned, nil
}
