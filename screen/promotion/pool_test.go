package promotion

import (
	"math"
	"testing"

	"torsieve/internal/units"
)

// Horvitz and Thompson's estimate is without bias: one audit in four candidates
// with shares 0.1, 0.2, 0.3 and 0.4, each drawn once, averages to their sum.
func TestPoolIsUnbiased(t *testing.T) {
	var p Pool
	for _, found := range []float64{0.1, 0.2, 0.3, 0.4} {
		p.Add("a", []Audit{{Inclusion: 0.25, Found: found, Expected: 0.25}})
	}
	if found, expected := p.Shares(); math.Abs(found-1) > 1e-12 || math.Abs(expected-1) > 1e-12 {
		t.Errorf("found %g, expected %g, want 1 and 1", found, expected)
	}
}

func TestPoolOfNothing(t *testing.T) {
	var p Pool
	p.Add("a", nil)
	p.Add("b", []Audit{{Failed: true, Inclusion: 0.1, Score: 99}})
	found, expected := p.Shares()
	all, failed := p.Audits()
	if found != 0 || expected != 0 || all != 1 || failed != 1 || p.Inflation() != 1 || len(p.Disagree()) != 0 {
		t.Errorf("shares %g, %g, audits %d, %d, inflation %g, disagree %v", found, expected, all, failed, p.Inflation(), p.Disagree())
	}
}

// A prior that thinks residuals ten times smaller than they are is found out.
func TestAuditsFindAWrongPrior(t *testing.T) {
	wrong := quantum
	wrong.Scale, wrong.Freedom = quantum.Scale/10, 50
	m := maker{prior: Prior{Scale: quantum.Scale, Freedom: 50, Slope: 1, SlopeSD: 0.05}, least: 40, most: 60, span: 6}
	bad := calibrate(t, m, wrong, Defaults(), 60)
	good := calibrate(t, m, m.prior, Defaults(), 60)
	bad.log(t)
	good.log(t)
	if bad.pool.Inflation() < 2 || good.pool.Inflation() > 1.3 {
		t.Errorf("inflation %.2f with the wrong prior, %.2f with the right one", bad.pool.Inflation(), good.pool.Inflation())
	}
	if len(bad.pool.Disagree()) == 0 || len(good.pool.Disagree()) > 1 {
		t.Errorf("%d ligands disagree with the wrong prior, %d with the right one", len(bad.pool.Disagree()), len(good.pool.Disagree()))
	}
}

// A single audit far off flags its ligand.
func TestDisagreement(t *testing.T) {
	energies := rising(60, 0.2)
	flagged := 0
	for seed := range uint64(20) {
		s := Defaults()
		s.Seed[1] = seed
		p := start(t, s, energies...)
		finish(t, p, func(i int) error {
			y := energies[i]
			if p.entries[i].why == asAudit {
				y += 15
			}
			return p.Computed(i, y*units.KcalPerMol)
		})
		for _, a := range p.Audits() {
			if a.Disagrees() {
				flagged++
				break
			}
		}
	}
	if flagged < 15 {
		t.Errorf("%d of 20 ligands with audits 15 kcal/mol off are flagged", flagged)
	}
}
