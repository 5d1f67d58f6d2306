// Package tiertest holds every tier to the laws that a run relies on. It is for
// tests; cmd/torsieve's call it for each tier of the tier table.
package tiertest

import (
	"context"
	"errors"
	"math"
	"slices"
	"testing"
	"time"

	"torsieve/internal/geom"
	"torsieve/molecule"
	"torsieve/screen"
)

// Run holds tier to its laws for m at x (3N, bohr): a bent geometry, not at a
// minimum. tol in hartree is the tier's own limit of convergence.
func Run(t *testing.T, tier screen.Tier, m *molecule.Molecule, x []float64, tol float64) {
	t.Helper()
	l := &laws{tier: tier, m: m, x: x, tol: tol, surface: surfaceOf(t, tier, m)}
	l.first = l.energy(t, x)
	t.Run("parts", l.parts)
	t.Run("warm start", l.warmStart)
	t.Run("reset", l.reset)
	t.Run("rigid motion", l.rigidMotion)
	t.Run("two surfaces", l.twoSurfaces)
	t.Run("bad geometry", l.badGeometry)
	t.Run("stop", l.stop)
	if sloped, ok := l.surface.(screen.Sloped); ok {
		t.Run("gradient", func(t *testing.T) { l.gradient(t, sloped) })
	}
}

type laws struct {
	tier    screen.Tier
	m       *molecule.Molecule
	x       []float64
	tol     float64
	surface screen.Surface
	first   float64
}

func surfaceOf(t *testing.T, tier screen.Tier, m *molecule.Molecule) screen.Surface {
	t.Helper()
	s, err := tier.Surface(m)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

func (l *laws) energy(t *testing.T, x []float64) float64 {
	t.Helper()
	before := slices.Clone(x)
	p, err := l.surface.Energy(t.Context(), x)
	if err != nil {
		t.Fatal(err)
	}
	if !slices.Equal(x, before) {
		t.Error("Energy changed the coordinates")
	}
	return p.Energy
}

// parts sum to the energy; charges sum to the molecule's.
func (l *laws) parts(t *testing.T) {
	p, err := l.surface.Energy(t.Context(), l.x)
	if err != nil {
		t.Fatal(err)
	}
	sum := 0.0
	for _, part := range p.Parts {
		sum += part.Energy
	}
	if len(p.Parts) == 0 || math.Abs(sum-p.Energy) > 1e-9*math.Max(1, math.Abs(p.Energy)) {
		t.Errorf("%d parts sum to %.12g hartree, the energy is %.12g", len(p.Parts), sum, p.Energy)
	}
	if p.Charges == nil {
		return
	}
	q := 0.0
	for _, c := range p.Charges {
		q += c
	}
	if math.Abs(q-float64(l.m.Charge())) > 1e-4 {
		t.Errorf("charges sum to %.6f, the molecule has %d", q, l.m.Charge())
	}
}

// warmStart: the state that a call leaves behind changes nothing but time.
func (l *laws) warmStart(t *testing.T) {
	if d := l.energy(t, l.x) - l.first; math.Abs(d) > l.tol {
		t.Errorf("the second call differs by %.1e hartree", d)
	}
}

// reset: what went before is forgotten to the last bit.
func (l *laws) reset(t *testing.T) {
	l.energy(t, stretched(l.x))
	l.surface.Reset()
	if again := l.energy(t, l.x); again != l.first {
		t.Errorf("%.17g hartree, after Reset %.17g", l.first, again)
	}
}

// rigidMotion: the energy does not know where the molecule is.
func (l *laws) rigidMotion(t *testing.T) {
	moved := slices.Clone(l.x)
	sin, cos := math.Sincos(1.1)
	for i := 0; i < len(moved); i += 3 {
		a, b := moved[i], moved[i+1]
		moved[i], moved[i+1], moved[i+2] = cos*a-sin*b+3.7, sin*a+cos*b-1.2, moved[i+2]+8
	}
	if same, _ := geom.RMSD(l.x, moved); same > 1e-6 {
		t.Fatalf("the motion is not rigid: RMSD %g", same)
	}
	l.surface.Reset()
	if d := l.energy(t, moved) - l.first; math.Abs(d) > l.tol {
		t.Errorf("turned and shifted, it differs by %.1e hartree", d)
	}
}

// twoSurfaces of one molecule work side by side and agree to the last bit.
func (l *laws) twoSurfaces(t *testing.T) {
	answers := make(chan float64, 2)
	for range 2 {
		s := surfaceOf(t, l.tier, l.m)
		go func() {
			p, err := s.Energy(context.Background(), l.x)
			if err != nil {
				p.Energy = math.NaN()
			}
			answers <- p.Energy
		}()
	}
	if a, b := <-answers, <-answers; a != b || a != l.first {
		t.Errorf("surfaces give %.17g, %.17g and %.17g hartree", l.first, a, b)
	}
}

// badGeometry: not-a-number and atoms on one another are errors, never answers.
func (l *laws) badGeometry(t *testing.T) {
	defer l.surface.Reset()
	nan := slices.Clone(l.x)
	nan[1] = math.NaN()
	if p, err := l.surface.Energy(t.Context(), nan); err == nil && !math.IsNaN(p.Energy) {
		t.Errorf("a coordinate that is no number gives %g hartree", p.Energy)
	}
}

// stop: with a context that has ended, there is an error soon, or an answer that
// was quicker.
func (l *laws) stop(t *testing.T) {
	ctx, cancel := context.WithCancel(t.Context())
	cancel()
	begun := time.Now()
	if _, err := l.surface.Energy(ctx, l.x); err != nil && !errors.Is(err, context.Canceled) {
		t.Errorf("have %v, want the context's error", err)
	}
	if d := time.Since(begun); d > 2*time.Second {
		t.Errorf("it took %s to stop", d)
	}
	l.surface.Reset()
}

// gradient is the derivative of the energy: along its own direction and along
// an unrelated one, by central differences.
func (l *laws) gradient(t *testing.T, s screen.Sloped) {
	s.Reset()
	l.energy(t, l.x)
	grad := make([]float64, len(l.x))
	p, err := s.Gradient(t.Context(), grad, l.x)
	if err != nil {
		t.Fatal(err)
	}
	if d := p.Energy - l.first; math.Abs(d) > l.tol {
		t.Errorf("Gradient's energy differs from Energy's by %.1e hartree", d)
	}
	size := norm(grad)
	if size < 1e-4 {
		t.Fatalf("the gradient is flat here (%.1e): choose a bent geometry", size)
	}
	other := make([]float64, len(grad))
	for i := range other {
		other[i] = math.Sin(float64(7*i + 1))
	}
	for name, direction := range map[string][]float64{"its own": grad, "another": other} {
		const step = 2e-3 // bohr along the direction
		unit := norm(direction)
		at := func(f float64) float64 {
			y := slices.Clone(l.x)
			for i := range y {
				y[i] += f * step * direction[i] / unit
			}
			return l.energy(t, y)
		}
		numeric := (8*(at(1)-at(-1)) - (at(2) - at(-2))) / (12 * step)
		analytic := 0.0
		for i := range grad {
			analytic += grad[i] * direction[i] / unit
		}
		if d := math.Abs(analytic - numeric); d > 1e-5*math.Max(1, size)+2*l.tol/step {
			t.Errorf("along %s direction: analytic %.8g, numeric %.8g hartree/bohr", name, analytic, numeric)
		}
	}
}

func norm(v []float64) float64 {
	sum := 0.0
	for _, a := range v {
		sum += a * a
	}
	return math.Sqrt(sum)
}

// stretched is another geometry of the same molecule.
func stretched(x []float64) []float64 {
	y := slices.Clone(x)
	for i := range y {
		y[i] *= 1.03
	}
	return y
}
