package ensemble

import (
	"math"
	"slices"
	"testing"

	"torsieve/internal/units"
)

var someScatter = Scatter{Scale: 0.5 * units.KcalPerMol, Freedom: 4}

func pairs(n int, distance func(i, j int) float64) [][]float64 {
	d := make([][]float64, n)
	for i := range d {
		d[i] = make([]float64, n)
		for j := range d[i] {
			if i != j {
				d[i][j] = distance(i, j)
			}
		}
	}
	return d
}

// Shapes far apart have independent errors, identical ones the same error: then
// their ratio has no bar. Between the two the bars shrink with the distance.
func TestSimilarShapesShareTheirError(t *testing.T) {
	two := states([]float64{0, 0.4}, []float64{1, 1})
	width := func(angstrom float64) float64 {
		d := pairs(2, func(i, j int) float64 { return angstrom * units.Angstrom })
		p := Imagine(two, Doubt{Scatter: someScatter, Distances: d}, [2]uint64{1, 2}).At(298.15, nil).Populations()[0]
		return p.High - p.Low
	}
	if w := width(0); w > 1e-3 {
		t.Errorf("identical shapes: bar of %.4f, want none", w)
	}
	apart, near := width(9), width(0.02)
	// Far apart: independent errors of the deviation that sharing had hidden.
	whole := someScatter
	whole.Scale /= math.Sqrt(1 - usuallyShared)
	independent := Bars(two, 298.15, whole, [2]uint64{1, 2})[0]
	if math.Abs(apart-(independent.High-independent.Low)) > 0.03 || near > 0.8*apart {
		t.Errorf("bars of %.3f far apart, %.3f at 0.02 A, %.3f independent", apart, near, independent.High-independent.Low)
	}
}

// The errors drawn have the correlation that is asked for, and distances that
// no points in space can have are borne: variances stay.
func TestCorrelationOfErrors(t *testing.T) {
	three := states([]float64{0, 1, 2}, []float64{1, 1, 1})
	moments := func(d [][]float64) (variance [3]float64, covariance float64) {
		w := Imagine(three, Doubt{Scatter: Scatter{Scale: math.Sqrt(1 - usuallyShared), Freedom: 1e9}, Distances: d}, [2]uint64{5, 6})
		for k := range draws {
			row := w.row(k)
			for i, v := range row {
				variance[i] += float64(v) * float64(v) / draws
			}
			covariance += float64(row[0]) * float64(row[1]) / draws
		}
		return variance, covariance
	}
	// Standard errors of 4000 draws: 0.022 of a variance, at most that of a
	// covariance; four of them are allowed.
	variance, covariance := moments(pairs(3, func(i, j int) float64 { return 0.02 * units.Angstrom }))
	// 0.78 exp(-0.4) + 0.22 exp(-0.0002).
	if want := 0.7428; math.Abs(covariance-want) > 0.09 || math.Abs(variance[0]-1) > 0.09 {
		t.Errorf("variance %.3f, covariance %.3f, want 1 and %.3f", variance[0], covariance, want)
	}
	impossible := pairs(3, func(i, j int) float64 {
		if i+j == 3 { // 1 and 2 are far apart though both are at 0
			return 5 * units.Angstrom
		}
		return 0
	})
	if variance, _ = moments(impossible); slices.Max(variance[:]) > 1.09 || slices.Min(variance[:]) < 0.91 {
		t.Errorf("impossible distances: variances %v", variance)
	}
}

// More states than are drawn together.
func TestManyStates(t *testing.T) {
	n := manyShared + 20
	energies, copies := make([]float64, n), make([]float64, n)
	for i := range energies {
		energies[i], copies[i] = 0.01*float64(n-i), 1
	}
	d := pairs(n, func(i, j int) float64 { return 0.02 * math.Abs(float64(i-j)) * units.Angstrom })
	o := Imagine(states(energies, copies), Doubt{Scatter: someScatter, Distances: d}, [2]uint64{1, 1}).At(298.15, nil)
	var sum float64
	for _, p := range o.Populations() {
		sum += p.Mean
	}
	if math.Abs(sum-1) > 1e-9 {
		t.Errorf("populations sum to %g", sum)
	}
}

// Without errors to speak of the outlook is what Weigh says; what is missed
// lowers every population alike and stands beside them.
func TestOutlookWithoutDoubt(t *testing.T) {
	three := states([]float64{0, 0.4, 1}, []float64{1, 2, 1})
	sure := Doubt{Scatter: Scatter{Scale: 1e-9, Freedom: 100}}
	w := Imagine(three, sure, [2]uint64{1, 1})
	d := Weigh(three, 300)
	o := w.At(300, nil)
	for i, p := range o.Populations() {
		if math.Abs(p.Mean-d.Populations[i]) > 1e-5 || p.High-p.Low > 1e-4 {
			t.Errorf("population %d: %+v, want %.5f", i, p, d.Populations[i])
		}
	}
	if e := o.Energy(); math.Abs(e.Mean-(d.Energy-three[0].Energy)) > 1e-7 {
		t.Errorf("energy %+v, want %g", e, d.Energy-three[0].Energy)
	}
	if s := o.Entropy(); math.Abs(s.Mean-d.Entropy) > 1e-9 {
		t.Errorf("entropy %+v, want %g", s, d.Entropy)
	}
	if m := o.Missed(); m != (Range{}) {
		t.Errorf("missed %+v, want none", m)
	}
	if a := o.Average([]float64{1, 1, 1}); math.Abs(a.Mean-1) > 1e-9 {
		t.Errorf("the average of 1 is %+v", a)
	}
	if c := w.Lowest(); c[0] != 1 {
		t.Errorf("chances to be lowest %v", c)
	}
	lost := w.At(300, []float64{0.1, 0.1, 0.1})
	if m := lost.Missed(); math.Abs(m.Mean-0.1) > 1e-9 {
		t.Errorf("missed %+v, want 0.1", m)
	}
	all := lost.Joint([]int{0, 1, 2})
	if p := lost.Populations()[0]; math.Abs(p.Mean-0.9*d.Populations[0]) > 1e-5 || math.Abs(all.Mean-0.9) > 1e-9 {
		t.Errorf("with a tenth missed: %+v and all %+v", p, all)
	}
}

// Two states that are level are each the global minimum in half of the worlds
// (standard error 0.8 %), and a family has the weight of its members.
func TestLowestAndFamilies(t *testing.T) {
	w := Imagine(states([]float64{0, 0, 30}, []float64{1, 1, 1}), Doubt{Scatter: someScatter}, [2]uint64{3, 3})
	c := w.Lowest()
	if math.Abs(c[0]-0.5) > 0.032 || math.Abs(c[0]+c[1]+c[2]-1) > 1e-9 {
		t.Errorf("chances %v, want half and half", c)
	}
	o := w.At(298.15, nil)
	if j := o.Joint([]int{0, 1}); j.Mean < 0.99 || j.Low < o.Populations()[0].Low {
		t.Errorf("joint weight %+v", j)
	}
	// The bar of a family is narrower than those of its members.
	if j, p := o.Joint([]int{0, 1}), o.Populations()[0]; j.High-j.Low > p.High-p.Low {
		t.Errorf("bar of the family %+v, of a member %+v", j, p)
	}
}

func TestFamilies(t *testing.T) {
	byLabel := FamiliesByLabel([][]int{{0, 1}, {1, 1}, {0, 1}, {1, 0}})
	if want := []Family{{0, 2}, {1}, {3}}; !slices.EqualFunc(byLabel, want, slices.Equal) {
		t.Errorf("by label: %v, want %v", byLabel, want)
	}
	at := []float64{0, 0.4, 3, 0.9, 3.3}
	near := FamiliesByDistance(pairs(len(at), func(i, j int) float64 { return math.Abs(at[i] - at[j]) }), 0.5)
	if want := []Family{{0, 1}, {2, 4}, {3}}; !slices.EqualFunc(near, want, slices.Equal) {
		t.Errorf("by distance: %v, want %v", near, want)
	}
	if f := FamiliesByLabel(nil); len(f) != 0 {
		t.Errorf("of nothing: %v", f)
	}
}

// Gauche, anti and gauche of a chain, the anti well across 180 degrees and a
// planar one across 0: three wells and one; turning an angle by a full turn
// changes nothing.
func TestWells(t *testing.T) {
	const degree = math.Pi / 180
	torsions := [][]float64{{65, 4}, {-62, -6}, {178, 359}, {-175, 2}, {58, 364}, {295, -1}}
	for _, row := range torsions {
		row[0], row[1] = row[0]*degree, row[1]*degree
	}
	want := [][]int{{0, 0}, {2, 0}, {1, 0}, {1, 0}, {0, 0}, {2, 0}}
	if got := Wells(torsions); !slices.EqualFunc(got, want, slices.Equal) {
		t.Errorf("wells %v, want %v", got, want)
	}
	if got := Wells(nil); len(got) != 0 {
		t.Errorf("wells of nothing: %v", got)
	}
}

func TestOutlookRefuses(t *testing.T) {
	one := states([]float64{0}, []float64{1})
	good := Doubt{Scatter: someScatter}
	for name, f := range map[string]func(){
		"no states":        func() { Imagine(nil, good, [2]uint64{}) },
		"no scatter":       func() { Imagine(one, Doubt{}, [2]uint64{}) },
		"distances":        func() { Imagine(one, Doubt{Scatter: someScatter, Distances: [][]float64{{0, 1}}}, [2]uint64{}) },
		"NaN distance":     func() { Imagine(one, Doubt{Scatter: someScatter, Distances: [][]float64{{math.NaN()}}}, [2]uint64{}) },
		"temperature":      func() { Imagine(one, good, [2]uint64{}).At(0, nil) },
		"missed share":     func() { Imagine(one, good, [2]uint64{}).At(300, []float64{1.5}) },
		"number of values": func() { Imagine(one, good, [2]uint64{}).At(300, nil).Average(nil) },
	} {
		func() {
			defer func() {
				if recover() == nil {
					t.Errorf("%s: no panic", name)
				}
			}()
			f()
		}()
	}
}
