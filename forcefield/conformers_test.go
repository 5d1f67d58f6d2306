package forcefield

import (
	"math"
	"testing"

	"torsieve/internal/geom"
)

// The values here are conformers.json: what the published force field gives in
// an independent program, right or wrong. Scans there are relaxed from one
// point to the next, ours from the minimum: 0.01 to 0.02 kcal/mol apart.

func TestModelConformers(t *testing.T) {
	butane := hold{0, 1, 2, 3, 180}
	for _, c := range []struct {
		name, smiles string
		from, to     []hold
		want         float64
	}{
		{"butane gauche", "CCCC", []hold{butane}, []hold{{0, 1, 2, 3, 65}}, 1.146},
		{"pentane tg", "CCCCC", []hold{butane, {1, 2, 3, 4, 180}}, []hold{butane, {1, 2, 3, 4, 65}}, 1.169},
		{"pentane gg", "CCCCC", []hold{butane, {1, 2, 3, 4, 180}}, []hold{{0, 1, 2, 3, 60}, {1, 2, 3, 4, 60}}, 2.4226},
		{"pentane g+g-", "CCCCC", []hold{butane, {1, 2, 3, 4, 180}}, []hold{{0, 1, 2, 3, 67}, {1, 2, 3, 4, -101}}, 3.9972},
		{"butadiene s-cis", "C=CC=C", []hold{butane}, []hold{{0, 1, 2, 3, 0}}, 3.454},
		{"methyl vinyl ether s-trans", "C=COC", []hold{{0, 1, 2, 3, 0}}, []hold{{0, 1, 2, 3, 180}}, -6.06},
		{"acetic acid E", "CC(=O)O", []hold{{2, 1, 3, 7, 0}}, []hold{{2, 1, 3, 7, 180}}, -0.015},
		{"methyl formate E", "O=COC", []hold{{0, 1, 2, 3, 0}}, []hold{{0, 1, 2, 3, 180}}, -2.49},
		{"N-methylformamide E", "O=CNC", []hold{{0, 1, 2, 3, 0}}, []hold{{0, 1, 2, 3, 180}}, -0.931},
		{"N-methylacetamide E", "CC(=O)NC", []hold{{2, 1, 3, 4, 0}}, []hold{{2, 1, 3, 4, 180}}, 0.6313},
		{"difluoroethane gauche", "FCCF", []hold{butane}, []hold{{0, 1, 2, 3, 65}}, 0.051},
	} {
		l := newLab(t, c.smiles, Reference(), 6)
		a, _ := l.near(c.from...)
		b, _ := l.near(c.to...)
		near(t, c.name, b-a, c.want, 2e-3)
	}
}

func TestModelDihedrals(t *testing.T) {
	l := newLab(t, "CCCC", Reference(), 4)
	_, x := l.near(hold{0, 1, 2, 3, 65})
	near(t, "butane gauche", geom.Dihedral(x, 0, 1, 2, 3)/degree, 70.42, 0.02)
	l = newLab(t, "CCCCC", Reference(), 4)
	_, x = l.near(hold{0, 1, 2, 3, 67}, hold{1, 2, 3, 4, -101})
	near(t, "pentane g+", geom.Dihedral(x, 0, 1, 2, 3)/degree, 67.3, 0.06)
	near(t, "pentane g-", geom.Dihedral(x, 1, 2, 3, 4)/degree, -101.5, 0.06)
}

// TestModelScans compares relaxed scans, each relative to its lowest point.
func TestModelScans(t *testing.T) {
	var file struct{ Scans map[string][][2]float64 }
	load(t, "conformers.json", &file)
	for _, c := range []struct {
		key, smiles string
		h           hold
		also        []hold // held all along
	}{
		{"butadiene_scan_CCCC", "C=CC=C", hold{0, 1, 2, 3, 0}, nil},
		{"methyl_vinyl_ether_scan_COCC", "C=COC", hold{0, 1, 2, 3, 0}, nil},
		{"acetic_acid_scan_OCOH", "CC(=O)O", hold{2, 1, 3, 7, 0}, nil},
		{"methyl_formate_scan_OCOC", "O=COC", hold{0, 1, 2, 3, 0}, nil},
		{"propene_scan_CCCH", "C=CC", hold{0, 1, 2, 6, 0}, nil},
		{"biphenyl_scan", "c1ccccc1-c1ccccc1", hold{4, 5, 6, 7, 0}, nil},
	} {
		scan, ok := file.Scans[c.key]
		if !ok {
			t.Fatalf("no scan %q", c.key)
		}
		l := newLab(t, c.smiles, Reference(), 6)
		energies, lowest := make([]float64, len(scan)), math.Inf(1)
		for n, point := range scan {
			h := c.h
			h.degrees = point[0]
			energies[n] = l.above(h)
			lowest = math.Min(lowest, energies[n])
		}
		for n, point := range scan {
			near(t, c.key, energies[n]-lowest, point[1], 0.02)
		}
	}
}

func TestModelCyclohexane(t *testing.T) {
	l := newLab(t, "C1CCCCC1", Reference(), 8)
	ring := func(i int) int { return i % 6 }
	near(t, "C-C", geom.Distance(l.x, 0, 1)/ang, 1.534, 6e-4)
	near(t, "C-C-C", geom.Angle(l.x, 0, 1, 2)/degree, 111.03, 6e-3)
	near(t, "C-C-C-C", math.Abs(geom.Dihedral(l.x, 0, 1, 2, 3)/degree), 55.96, 6e-3)
	boat := []hold{{0, 1, 2, 3, 0}, {3, 4, 5, ring(6), 0}}
	near(t, "boat - chair", l.above(boat...), 9.8266, 2e-3)
	twist, _ := l.near(hold{0, 1, 2, 3, 30}, hold{3, 4, 5, ring(6), 30})
	near(t, "twist-boat - chair", twist, 8.8458, 2e-3)
}

// TestModelHexane goes to the dihedrals of each of the nine minima that the
// reference reached from 27 staggered starts.
func TestModelHexane(t *testing.T) {
	l := newLab(t, "CCCCCC", Reference(), 4)
	lowest, _ := l.near(hold{0, 1, 2, 3, 180}, hold{1, 2, 3, 4, 180}, hold{2, 3, 4, 5, 180})
	for _, want := range []struct{ a, b, c, energy float64 }{
		{180, 175, 71, 1.162}, {175, 71, 175, 1.197}, {69, 170, 69, 2.213}, {173, 63, 62, 2.425},
		{73, 180, -73, 2.479}, {61, 58, 61, 3.525}, {179, -102, 67, 3.934}, {105, -66, -66, 5.166},
	} {
		e, x := l.near(hold{0, 1, 2, 3, want.a}, hold{1, 2, 3, 4, want.b}, hold{2, 3, 4, 5, want.c})
		near(t, "energy", e-lowest, want.energy, 1e-3)
		near(t, "first dihedral", geom.Dihedral(x, 0, 1, 2, 3)/degree, want.a, 1.5)
		near(t, "second dihedral", geom.Dihedral(x, 1, 2, 3, 4)/degree, want.b, 1.5)
		near(t, "third dihedral", geom.Dihedral(x, 2, 3, 4, 5)/degree, want.c, 1.5)
	}
}

// TestModelMethylcyclohexane: the axial chair above the equatorial one.
func TestModelMethylcyclohexane(t *testing.T) {
	l := newLab(t, "CC1CCCCC1", Reference(), 6)
	near(t, "axial - equatorial", axial(0, 1, 2, 3, 4, 5, 6)(l), 1.8707, 2e-3)
}

func TestModelBarriers(t *testing.T) {
	l := newLab(t, "O=CC", Reference(), 6)
	near(t, "acetaldehyde eclipsed - staggered", between(hold{0, 1, 2, 4, 60}, hold{0, 1, 2, 4, 0})(l), 0.17, 5e-3)
	l = newLab(t, "c1ccccc1-c1ccccc1", Reference(), 6)
	twist := math.Abs(geom.Dihedral(l.x, 4, 5, 6, 7) / degree)
	near(t, "biphenyl twist", math.Min(twist, 180-twist), 40.3, 0.1)
}

func TestModelSulfonamide(t *testing.T) {
	l := newLab(t, "CS(=O)(=O)N", Reference(), 6)
	near(t, "S=O", geom.Distance(l.x, 1, 2)/ang, 1.5025, 2e-4)
	near(t, "S-N", geom.Distance(l.x, 1, 4)/ang, 1.7287, 2e-4)
	near(t, "S-C", geom.Distance(l.x, 0, 1)/ang, 1.7792, 2e-4)
}

// TestCorrections checks the fitted corrections against what they were fitted
// to; values in kcal/mol. known is experiment, model what the fit reached in an
// independent program without charges.
func TestCorrections(t *testing.T) {
	o := Reference()
	o.Corrections = true
	for _, c := range []struct {
		name, smiles string
		from, to     hold
		model, known float64
	}{
		{"methyl formate E - Z", "O=COC", hold{0, 1, 2, 3, 0}, hold{0, 1, 2, 3, 180}, 4.71, 4.75},
		{"methyl acetate E - Z", "CC(=O)OC", hold{2, 1, 3, 4, 0}, hold{2, 1, 3, 4, 180}, 8.47, 8.25},
		{"acetic acid E - Z", "CC(=O)O", hold{2, 1, 3, 7, 0}, hold{2, 1, 3, 7, 180}, 5.49, 5.2},
		{"methyl vinyl ether s-trans - s-cis", "C=COC", hold{0, 1, 2, 3, 0}, hold{0, 1, 2, 3, 180}, 1.74, 1.7},
		{"N-methylformamide E - Z", "O=CNC", hold{0, 1, 2, 3, 0}, hold{0, 1, 2, 3, 180}, 1.07, 1.4},
		{"N-methylacetamide E - Z", "CC(=O)NC", hold{2, 1, 3, 4, 0}, hold{2, 1, 3, 4, 180}, 2.63, 2.5},
		{"propene staggered - eclipsed", "C=CC", hold{0, 1, 2, 6, 0}, hold{0, 1, 2, 6, 60}, 1.99, 2.0},
		{"acetaldehyde staggered - eclipsed", "O=CC", hold{0, 1, 2, 4, 0}, hold{0, 1, 2, 4, 60}, 0.88, 1.17},
		{"butadiene at 80, top of a 20 degree scan", "C=CC=C", hold{0, 1, 2, 3, 180}, hold{0, 1, 2, 3, 80}, 5.97, 6.3},
	} {
		l := newLab(t, c.smiles, o, 6)
		got := l.above(c.to) - l.above(c.from)
		near(t, c.name+" (fit)", got, c.model, 0.1)
		near(t, c.name+" (experiment)", got, c.known, 0.5)
	}
}
