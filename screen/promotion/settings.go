package promotion

import (
	"errors"
	"fmt"
	"math/rand/v2"

	"torsieve/internal/units"
)

// Settings are the rules of a plan. Start from Defaults.
type Settings struct {
	Temperatures []float64 // kelvin; the rule holds at each; 298.15
	Tolerance    float64   // missed weight, its 95th percentile, at which to stop; 0.02
	Budget       int       // evaluations at most; 0: as many as there are candidates
	Seed         [2]uint64 // the run's seed and the ligand's
}

// Defaults are the settings of a run that asks for nothing special.
func Defaults() Settings {
	return Settings{Temperatures: []float64{298.15}, Tolerance: 0.02}
}

// Check reports everything that is wrong with s.
func (s Settings) Check() error {
	var errs []error
	if len(s.Temperatures) == 0 {
		errs = append(errs, errors.New("temperatures: want at least one"))
	}
	for _, t := range s.Temperatures {
		if !(t > 0) || !finite(t) {
			errs = append(errs, fmt.Errorf("temperature: want more than 0 K, have %g", t))
		}
	}
	if !(s.Tolerance > 0 && s.Tolerance < 1) {
		errs = append(errs, fmt.Errorf("missed weight: want a share between 0 and 1 (0.02 is 2 %%), have %g", s.Tolerance))
	}
	if s.Budget < 0 {
		errs = append(errs, fmt.Errorf("budget: want 0 (no limit) or a number of evaluations, have %d", s.Budget))
	}
	return errors.Join(errs...)
}

// A Prior is what other ligands teach about a pair of tiers: the residual of
// the higher tier's energies about b times the lower tier's is normal within a
// ligand; its variance differs between ligands as Freedom Scale^2 / chi^2(Freedom).
// The constant between the tiers is free.
type Prior struct {
	Scale   float64 // hartree, greater than 0
	Freedom float64 // observations that the prior is worth, greater than 0; about 1
	Slope   float64 // expected b
	SlopeSD float64 // its standard deviation where the residual has the size Scale; 0: b is known
	Ridge   float64 // that of a standardised descriptor's coefficient, in units of the residual; 0.3 if 0
}

// Check reports everything that is wrong with p.
func (p Prior) Check() error {
	var errs []error
	if !(p.Scale > 0) || !finite(p.Scale) {
		errs = append(errs, fmt.Errorf("prior: residual of %g hartree, want more than 0", p.Scale))
	}
	if !(p.Freedom > 0) || !finite(p.Freedom) {
		errs = append(errs, fmt.Errorf("prior: worth %g observations, want more than 0", p.Freedom))
	}
	if !finite(p.Slope) || !(p.SlopeSD >= 0) || !finite(p.SlopeSD) {
		errs = append(errs, fmt.Errorf("prior: slope %g with deviation %g, want finite numbers", p.Slope, p.SlopeSD))
	}
	if !(p.Ridge >= 0) || !finite(p.Ridge) {
		errs = append(errs, fmt.Errorf("prior: ridge %g, want 0 or more", p.Ridge))
	}
	return errors.Join(errs...)
}

// smallestResidual is where the residual ends that five equal differences would
// make zero.
const smallestResidual = 0.05 * units.KcalPerMol

// What a stream of random numbers is for: each has its own, so that one does
// not shift another.
const (
	streamAudit = iota + 1
	streamPick
	streamDraws
)

// random returns the numbers for one purpose at the plan's present stage.
func (p *Plan) random(purpose uint64) *rand.Rand {
	return rand.New(rand.NewPCG(p.settings.Seed[0]^purpose<<56, p.settings.Seed[1]+uint64(p.handed)*0x9e3779b97f4a7c15))
}
