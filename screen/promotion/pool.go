package promotion

import "math"

// A Pool gathers the audits of a run. One or two a ligand tell little; all
// together they say whether the missed weights can be believed. Add ligands in
// one order, theirs in the input, for sums that are the same bytes every time.
type Pool struct {
	ligands, audits, failed int
	found, expected         float64
	squares                 float64 // of the scores
	disagree                []string
}

// Add takes a ligand's audits.
func (p *Pool) Add(ligand string, audits []Audit) {
	var answers, found, expected float64
	far := false
	for _, a := range audits {
		p.audits++
		if a.Failed {
			p.failed++
			continue
		}
		answers++
		found += a.Found / a.Inclusion
		expected += a.Expected / a.Inclusion
		p.squares += a.Score * a.Score
		far = far || a.Disagrees()
	}
	if answers > 0 {
		p.ligands++
		p.found += found / answers
		p.expected += expected / answers
	}
	if far {
		p.disagree = append(p.disagree, ligand)
	}
}

// Audits returns how many audits there were, and how many of them the higher
// tier could not compute.
func (p *Pool) Audits() (all, failed int) { return p.audits, p.failed }

// Shares returns the weight that the candidates left behind hold beside the
// computed ones, summed over them and averaged over the audited ligands: what
// the audits found, and what the model had expected of the same candidates.
//
// Source: the estimate of Horvitz and Thompson, J. Am. Stat. Assoc. 1952, 47,
// 663: each audit counts as many times as its inclusion probability is small.
func (p *Pool) Shares() (found, expected float64) {
	if p.ligands == 0 {
		return 0, 0
	}
	return p.found / float64(p.ligands), p.expected / float64(p.ligands)
}

// beforeAudits is how many audits the belief is worth that the model is right.
const beforeAudits = 20

// Inflation returns the factor by which residuals of this pair of tiers should
// be taken larger: the scores' root mean square, which is 1 where the model
// holds, drawn towards 1 while there are few audits. It is never under 1.
func (p *Pool) Inflation() float64 {
	n := float64(p.audits - p.failed)
	return math.Max(1, math.Sqrt((beforeAudits+p.squares)/(beforeAudits+n)))
}

// Disagree returns the ligands with an audit far outside its prediction.
func (p *Pool) Disagree() []string { return append([]string(nil), p.disagree...) }
