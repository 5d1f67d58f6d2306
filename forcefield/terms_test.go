package forcefield

import (
	"math"
	"testing"

	"torsieve/internal/geom"
	"torsieve/internal/gradcheck"
)

// singleTerms is single_terms.json: constants and energies of single terms,
// computed from the formulas by an independent program.
type singleTerms struct {
	Bonds []struct {
		I, J  string
		Order float64
		RBO   float64 `json:"r_BO"`
		REN   float64 `json:"r_EN"`
		R0, K float64
	}
	Angles []struct {
		I, J    string
		Other   string  `json:"k"`
		OrderIJ float64 `json:"order_ij"`
		OrderJK float64 `json:"order_jk"`
		RIJ     float64 `json:"r_ij"`
		RJK     float64 `json:"r_jk"`
		KConst  float64 `json:"K"`
		E       map[string]float64
	}
	Torsions []struct {
		Bond  string
		Total float64 `json:"V_total"`
		N     int32
		Phi0  float64
		Paths int
		Per   float64 `json:"V_per_path"`
	}
	VdwPairs []struct {
		I, J string
		X    float64 `json:"x_ij"`
		D    float64 `json:"D_ij"`
		E    map[string]float64
	} `json:"vdw_pairs"`
	Inversions []struct {
		Centre string
		E      map[string]float64 `json:"E_single_term_over_3"`
	}
	Coulomb struct {
		Example struct{ Q1, Q2, R, Eps, E float64 }
	}
}

func loadSingleTerms(t *testing.T) (s singleTerms) {
	load(t, "single_terms.json", &s)
	return s
}

func TestSingleStretches(t *testing.T) {
	bonds := loadSingleTerms(t).Bonds
	if len(bonds) != 65 {
		t.Fatalf("%d bonds, want 65", len(bonds))
	}
	for _, b := range bonds {
		what := b.I + " " + b.J
		i, j := typeNamed(t, b.I), typeNamed(t, b.J)
		r0 := naturalLength(i, j, b.Order)
		near(t, what+" r_BO", orderCorrection(i, j, b.Order)/ang, b.RBO, 6e-7)
		near(t, what+" r_EN", electronegativityCorrection(i, j)/ang, b.REN, 6e-7)
		near(t, what+" r0", r0/ang, b.R0, 6e-7)
		near(t, what+" k", stretchConstant(i, j, r0)/kcal*ang*ang, b.K, 1e-4)
	}
}

// angled is three points with the given angle at the second.
func angled(degrees float64) []float64 {
	s, c := math.Sincos(degrees * degree)
	return []float64{2, 0, 0, 0, 0, 0, 2.5 * c, 2.5 * s, 0}
}

func TestSingleBends(t *testing.T) {
	angles := loadSingleTerms(t).Angles
	if len(angles) != 20 {
		t.Fatalf("%d angles, want 20", len(angles))
	}
	for _, a := range angles {
		what := a.I + " " + a.J + " " + a.Other
		types := []*atomType{typeNamed(t, a.I), typeNamed(t, a.J), typeNamed(t, a.Other)}
		s := newSkeleton(types, []link{{i: 0, j: 1, order: a.OrderIJ}, {i: 1, j: 2, order: a.OrderJK}})
		near(t, what+" r_ij", s.links[0].length/ang, a.RIJ, 6e-7)
		near(t, what+" r_jk", s.links[1].length/ang, a.RJK, 6e-7)
		k := bendConstant(types[0], types[2], s.links[0].length, s.links[1].length, math.Cos(types[1].Angle))
		near(t, what+" K", k/kcal, a.KConst, 1e-4)
		bs := s.bends(nil, false)
		for degrees, want := range a.E {
			near(t, what+" at "+degrees, bs.addTo(nil, angled(number(t, degrees)))/kcal, want, 2e-6)
		}
	}
}

func TestSingleTorsions(t *testing.T) {
	// The bonds of the file by their types, the order between them, and the
	// type of the further neighbours of each end.
	ends := map[string]struct {
		j, k         string
		order        float64
		jNext, kNext bool
	}{
		"C_3-C_3 ethane":                    {"C_3", "C_3", 1, false, false},
		"C_3-N_3 methylamine":               {"C_3", "N_3", 1, false, false},
		"C_3-O_3 methanol":                  {"C_3", "O_3", 1, false, false},
		"C_3-S_3+2 methanethiol":            {"C_3", "S_3+2", 1, false, false},
		"C_3-P_3+3 methylphosphine":         {"C_3", "P_3+3", 1, false, false},
		"C_3-Si3":                           {"C_3", "Si3", 1, false, false},
		"O_3-O_3":                           {"O_3", "O_3", 1, false, false},
		"S_3+2-S_3+2":                       {"S_3+2", "S_3+2", 1, false, false},
		"O_3-S_3+2":                         {"O_3", "S_3+2", 1, false, false},
		"C_2=C_2 ethylene":                  {"C_2", "C_2", 2, false, false},
		"C_R:C_R benzene":                   {"C_R", "C_R", 1.5, true, true},
		"C_R-C_R single (biaryl, diene)":    {"C_R", "C_R", 1, true, true},
		"C_R-N_R amide":                     {"C_R", "N_R", 1.41, true, false},
		"C_R-O_R (aryl ether, ester, acid)": {"C_R", "O_R", 1, true, false},
		"C_R-S_R thioanisole":               {"C_R", "S_R", 1, true, false},
		"O_3(three-coordinate)-C_2":         {"O_3", "C_2", 1, false, true},
		"S_3+6-C_R aryl sulfone":            {"S_3+6", "C_R", 1, true, true},
		"C_3-C_2 propene":                   {"C_3", "C_2", 1, false, true},
		"C_3-C_R toluene":                   {"C_3", "C_R", 1, false, true},
		"C_3-N_R N-methylamide":             {"C_3", "N_R", 1, false, true},
		"C_3-C_2 with no sp2 neighbour (ketene-like, cumulene)": {"C_3", "C_2", 1, false, false},
	}
	torsions := loadSingleTerms(t).Torsions
	if len(torsions) != len(ends) {
		t.Fatalf("%d torsions, want %d", len(torsions), len(ends))
	}
	for _, want := range torsions {
		e, ok := ends[want.Bond]
		if !ok {
			t.Fatalf("no case for %q", want.Bond)
		}
		j, k := typeNamed(t, e.j), typeNamed(t, e.k)
		for _, got := range []rule{
			torsionRule(j, k, e.order, e.jNext, e.kNext),
			torsionRule(k, j, e.order, e.kNext, e.jNext),
		} {
			near(t, want.Bond+" V", got.barrier/kcal, want.Total, 1e-6)
			near(t, want.Bond+" V per path", got.barrier/kcal/float64(want.Paths), want.Per, 1e-6)
			near(t, want.Bond+" n", float64(got.n), float64(want.N), 0)
			near(t, want.Bond+" cos(n phi0)", got.sign, math.Cos(float64(want.N)*want.Phi0*degree), 1e-12)
		}
	}
}

func TestSinglePairs(t *testing.T) {
	list := loadSingleTerms(t).VdwPairs
	if len(list) != 11 {
		t.Fatalf("%d pairs, want 11", len(list))
	}
	for _, p := range list {
		x2, d := wellOf(typeNamed(t, p.I), typeNamed(t, p.J))
		near(t, p.I+" "+p.J+" x", math.Sqrt(x2)/ang, p.X, 6e-7)
		near(t, p.I+" "+p.J+" D", d/kcal, p.D, 6e-7)
		ps := only(0, pair{1, x2, d, 0})
		for r, want := range p.E {
			x := []float64{0, 0, 0, 0, number(t, r) * ang, 0}
			vdw, _ := ps.addTo(nil, x)
			near(t, p.I+" "+p.J+" at "+r, vdw/kcal, want, 6e-7*math.Max(1, math.Abs(want)))
		}
	}
}

func TestSingleInversions(t *testing.T) {
	list := loadSingleTerms(t).Inversions
	terms := map[string]inversion{
		"C_2/C_R, no O_2":       planarInversion(6 * kcal),
		"C_2/C_R bonded to O_2": planarInversion(50 * kcal),
		"P_3+3":                 pyramidInversion(84.4339 * degree),
	}
	if len(list) != len(terms) {
		t.Fatalf("%d inversions, want %d", len(list), len(terms))
	}
	for _, want := range list {
		v, ok := terms[want.Centre]
		if !ok {
			t.Fatalf("no case for %q", want.Centre)
		}
		v.c, v.i, v.j, v.l = 0, 1, 2, 3
		for degrees, e := range want.E {
			s, c := math.Sincos(number(t, degrees) * degree)
			x := []float64{0, 0, 0, 1, 0, 0, 0.3, 1, 0, -c, 0, s}
			near(t, want.Centre+" at "+degrees, inversions{v}.addTo(nil, x)/kcal, e, 6e-7)
		}
	}
}

func TestCoulombExample(t *testing.T) {
	// The example has a constant dielectric: put the atoms where ours has the
	// same product of dielectric and distance.
	e := loadSingleTerms(t).Coulomb.Example
	r := math.Sqrt((e.Eps*e.R - screeningOffset) / screening)
	_, energy := only(0, pair{1, 1, 0, coulombEnergy * e.Q1 * e.Q2}).addTo(nil, []float64{0, 0, 0, r, 0, 0})
	near(t, "energy", energy/kcal, e.E, 1e-6)
}

// bentFour is four bonded points of no symmetry.
var bentFour = []float64{2.1, 1.3, -0.4, 0, 0, 0.1, -0.2, 2.6, 0.3, -1.9, 3.5, 1.8}

func TestTermGradients(t *testing.T) {
	nearlyStraight := []float64{2, 0.2, 0.05, 0, 0, 0, -2.5, 0, 0.1, -4.4, 0.5, 0.2}
	for _, c := range []struct {
		name string
		term term
		x    []float64
	}{
		{"stretch", stretches{{0, 2, 0.7, 2.2}}, bentFour},
		{"linear", bends{{0, 1, 2, linearBend(1)}}, bentFour},
		{"trigonal", bends{{0, 1, 2, trigonalBend(1)}}, bentFour},
		{"square", bends{{0, 1, 2, squareBend(1)}}, bentFour},
		{"right", bends{{0, 1, 2, rightBend(1)}}, bentFour},
		{"general", bends{{0, 1, 2, generalBend(1, -0.3)}}, bentFour},
		{"crowded", bends{{0, 1, 2, crowdedBend(1)}}, bentFour},
		{"threefold", torsions{{0, 1, 2, 3, 3, 1, -1}}, bentFour},
		{"sixfold", torsions{{0, 1, 2, 3, 6, 1, 1}}, bentFour},
		{"fading torsion", torsions{{0, 1, 2, 3, 2, 1, 1}}, nearlyStraight},
		{"planar", inversions{{0, 1, 2, 3, 1, 1, -1, 0}}, bentFour},
		{"pyramid", inversions{{0, 1, 2, 3, 1, 1.02, -0.39, 1}}, bentFour},
		{"pair", whole{only(0, pair{3, 20, 1, 0})}, bentFour},
		{"charges", whole{only(0, pair{3, 0, 0, 1})}, bentFour},
		{"soft pair inside", soft{only(0, pair{3, 200, 0.1, 0})}, bentFour},
		{"soft pair outside", soft{only(0, pair{1, 4, 1, 0})}, bentFour},
	} {
		t.Run(c.name, func(t *testing.T) {
			x := append([]float64(nil), c.x...)
			gradcheck.Run(t, x, 5e-4, 1e-8, func(x, grad []float64) float64 {
				return c.term.addTo(grad, x)
			})
		})
	}
}

// only is a sum over one pair.
func only(i int, p pair) *nonbonded {
	n := &nonbonded{}
	n.add(i, p)
	return n
}

// whole and soft are the nonbonded sums as terms.
type (
	whole struct{ *nonbonded }
	soft  struct{ *nonbonded }
)

func (whole) name() string { return vanDerWaals }
func (soft) name() string  { return vanDerWaals }

func (w whole) addTo(grad, x []float64) float64 {
	vdw, electrostatic := w.nonbonded.addTo(grad, x)
	return vdw + electrostatic
}

func (s soft) addTo(grad, x []float64) float64 { return s.addSoftTo(grad, x) }

func TestSoftCoreTouchesThePair(t *testing.T) {
	p := only(0, pair{1, 36, 0.001, 0})
	for _, share := range []float64{0.6, 0.600001, 1.5} {
		x := []float64{0, 0, 0, 0, 0, 6 * share}
		hard, _ := p.addTo(nil, x)
		near(t, "energy", p.addSoftTo(nil, x), hard, 1e-12)
	}
	hard, soft := make([]float64, 6), make([]float64, 6)
	x := []float64{0, 0, 0, 0, 0, 6 * (softCore - 1e-9)}
	p.addTo(hard, x)
	p.addSoftTo(soft, x)
	near(t, "slope", soft[5], hard[5], 1e-6*math.Abs(hard[5]))
}

func TestTorsionVanishesOnALine(t *testing.T) {
	x := []float64{2, 0, 0, 0, 0, 0, -2.5, 0, 0, -4.4, 0.5, 0.2}
	if geom.Angle(x, 0, 1, 2) != math.Pi {
		t.Fatal("the points are not on a line")
	}
	grad := make([]float64, len(x))
	if e := (torsions{{0, 1, 2, 3, 2, 1, 1}}).addTo(grad, x); e != 0 {
		t.Errorf("energy %g, want 0", e)
	}
	for i, g := range grad {
		if g != 0 {
			t.Errorf("component %d is %g, want 0", i, g)
		}
	}
}
