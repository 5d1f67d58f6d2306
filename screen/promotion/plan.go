// Package promotion decides which conformers go up from one tier to the next,
// and says how much Boltzmann weight may lie in those that stay.
//
// A Plan belongs to one ligand and one pair of tiers. It is fed with the lower
// tier's energies, hands out batches of candidates for the higher tier (Next),
// takes what came of them (Computed, Merged, Failed), and ends when the weight
// that the rest may hold is under the tolerance. Between the two tiers stands a
// linear regression within the ligand (regression.go); the missed weight is a
// sum over draws from its posterior (missed.go).
//
// Energies are hartree, temperatures kelvin. Nothing here reads a clock, a file
// or a tier: the same calls give the same answers.
package promotion

import (
	"errors"
	"fmt"
	"math"
	"slices"
)

// A Candidate is a conformer as the lower tier left it.
type Candidate struct {
	Energy      float64   // hartree, of the lower tier
	Copies      float64   // statistical weight, greater than 0
	Descriptors []float64 // what the lower tier may get wrong; of one length for all, or none
}

// A state is how far a candidate has come.
type state int

const (
	waiting state = iota
	asked         // handed out, no answer yet
	computed
	merged
	failed
)

// A reason is why a candidate was handed out.
type reason int

const (
	notAsked  reason = iota
	asAll            // there are too few to choose from
	asSpread         // to learn how the tiers differ
	asLowest         // wanted anyway
	asWeighty        // most of the expected missed weight
	asAudit          // drawn at random, to check the model
)

// entry is what the plan knows of one candidate.
type entry struct {
	state  state
	why    reason
	upper  float64 // hartree, of the higher tier, if computed or merged
	into   int     // of a merged one: the candidate whose minimum it found
	failed string  // of a failed one: what happened
	share  float64 // of the missed weight that was expected of it when it was handed out
}

// A Plan is the promotion of one ligand's candidates. It serves one goroutine.
type Plan struct {
	settings   Settings
	prior      Prior
	candidates []Candidate
	model      *design
	entries    []entry
	handed     int // candidates handed out so far
	open       int // of those, without an answer
	due        float64
	audits     []Audit
	pending    []prediction // of audits that are being computed
	fresh      *outlook     // what is known now; nil: to be worked out
}

// New starts a plan. An error says what is wrong with the candidates, the prior
// or the settings.
func New(candidates []Candidate, prior Prior, s Settings) (*Plan, error) {
	if err := errors.Join(checkCandidates(candidates), prior.Check(), s.Check()); err != nil {
		return nil, err
	}
	p := &Plan{
		settings:   s,
		prior:      prior,
		candidates: slices.Clone(candidates),
		model:      newDesign(candidates),
		entries:    make([]entry, len(candidates)),
	}
	// Where in the count of ten the first audit falls is the ligand's own luck:
	// else no ligand that needs few evaluations would ever be audited.
	p.due = p.random(streamAudit).Float64()
	return p, nil
}

func checkCandidates(candidates []Candidate) error {
	if len(candidates) == 0 {
		return errors.New("no conformers to promote: the tier below brought none back")
	}
	for i, c := range candidates {
		switch {
		case !finite(c.Energy):
			return fmt.Errorf("conformer %d: energy %g at the lower tier, want a finite number", i+1, c.Energy)
		case !(c.Copies > 0) || !finite(c.Copies):
			return fmt.Errorf("conformer %d: statistical weight %g, want more than 0", i+1, c.Copies)
		case len(c.Descriptors) != len(candidates[0].Descriptors):
			return fmt.Errorf("conformer %d: %d descriptors, the first has %d", i+1, len(c.Descriptors), len(candidates[0].Descriptors))
		}
		for _, d := range c.Descriptors {
			if !finite(d) {
				return fmt.Errorf("conformer %d: descriptor %g, want a finite number", i+1, d)
			}
		}
	}
	return nil
}

func finite(x float64) bool { return !math.IsNaN(x) && !math.IsInf(x, 0) }

// Computed takes a candidate's energy at the higher tier, in hartree.
func (p *Plan) Computed(i int, energy float64) error {
	if err := p.answered(i, energy); err != nil {
		return err
	}
	p.entries[i].state, p.entries[i].upper = computed, energy
	p.settle(i)
	return nil
}

// Merged takes a candidate that relaxed into the minimum of another one: it
// adds no weight, but its energy tells how the tiers differ.
func (p *Plan) Merged(i, into int, energy float64) error {
	if into < 0 || into >= len(p.entries) || into == i {
		return fmt.Errorf("conformer %d: merged into conformer %d, want another one of %d", i+1, into+1, len(p.entries))
	}
	if err := p.answered(i, energy); err != nil {
		return err
	}
	p.entries[i].state, p.entries[i].upper, p.entries[i].into = merged, energy, into
	p.settle(i)
	return nil
}

// Failed takes a candidate that the higher tier could not compute. What it was
// expected to weigh stays in the missed weight.
func (p *Plan) Failed(i int, why string) error {
	if err := p.answered(i, 0); err != nil {
		return err
	}
	p.entries[i].state, p.entries[i].failed = failed, why
	p.settle(i)
	return nil
}

// answered refuses answers that were not asked for and numbers that are none.
func (p *Plan) answered(i int, energy float64) error {
	if i < 0 || i >= len(p.entries) {
		return fmt.Errorf("conformer %d: there are %d", i+1, len(p.entries))
	}
	if p.entries[i].state != asked {
		return fmt.Errorf("conformer %d: it is not being computed", i+1)
	}
	if !finite(energy) {
		return fmt.Errorf("conformer %d: energy %g at the higher tier, want a finite number", i+1, energy)
	}
	return nil
}

func (p *Plan) settle(i int) {
	p.open--
	p.fresh = nil
	if p.entries[i].why == asAudit {
		p.audit(i)
	}
}

// list returns the candidates in a state, in their order.
func (p *Plan) list(s state) []int {
	var out []int
	for i := range p.entries {
		if p.entries[i].state == s {
			out = append(out, i)
		}
	}
	return out
}
