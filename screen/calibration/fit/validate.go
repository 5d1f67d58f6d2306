package main

import (
	"cmp"
	"math"
	"slices"

	"torsieve/screen/calibration"
)

// folds is in how many parts the molecules are dealt out: each is scored by a
// fit to the other nine.
const folds = 10

// validate scores the combination on molecules that the fit has not seen, and
// each tier alone on the same ones.
func (f final) validate(folder string, sets [][]molecule, whole combined) ([]calibration.Score, error) {
	seen := make([][]scored, len(sets))
	for fold := range folds {
		fitted, err := fitCombination(without(sets, fold), f.alone)
		if err != nil {
			return nil, err
		}
		for k, set := range sets {
			for i, m := range set {
				if i%folds == fold {
					seen[k] = append(seen[k], score(m, fitted.coefficients))
				}
			}
		}
	}
	var out []calibration.Score
	for k, set := range sets {
		out = append(out, f.scores(f.sets[k].set, set, seen[k])...)
	}
	others, err := f.read(folder, f.scored)
	if err != nil {
		return nil, err
	}
	for k, set := range others {
		var s []scored
		for _, m := range set {
			s = append(s, score(m, whole.coefficients))
		}
		out = append(out, f.scores(f.scored[k].set, set, s)...)
	}
	return out, nil
}

// without returns the sets without the molecules of a fold.
func without(sets [][]molecule, fold int) [][]molecule {
	out := make([][]molecule, len(sets))
	for k, set := range sets {
		for i, m := range set {
			if i%folds != fold {
				out[k] = append(out[k], m)
			}
		}
	}
	return out
}

func (f final) scores(set string, molecules []molecule, combination []scored) []calibration.Score {
	out := []calibration.Score{summary(set, "combination", combination)}
	for k, tier := range f.tiers {
		alone := make([]float64, len(f.tiers))
		alone[k] = 1
		var s []scored
		for _, m := range molecules {
			s = append(s, score(m, alone))
		}
		out = append(out, summary(set, tier, s))
	}
	return out
}

// scored is one molecule's mean absolute deviation and Spearman correlation.
type scored struct{ mad, rho float64 }

func score(m molecule, coefficients []float64) scored {
	var s scored
	energy := make([]float64, len(m.reference))
	for i, r := range minus(m, coefficients) {
		s.mad += math.Abs(r) / float64(len(m.reference))
		energy[i] = m.reference[i] - r
	}
	s.rho = spearman(energy, m.reference)
	return s
}

func summary(set, of string, s []scored) calibration.Score {
	var mad float64
	rhos := make([]float64, len(s))
	for i, v := range s {
		mad += v.mad / float64(len(s))
		rhos[i] = v.rho
	}
	slices.Sort(rhos)
	middle := len(rhos) / 2
	rho := rhos[middle]
	if len(rhos)%2 == 0 {
		rho = (rho + rhos[middle-1]) / 2
	}
	return calibration.Score{Set: set, Molecules: len(s), Of: of, MAD: round(mad), Rho: round(rho)}
}

func spearman(a, b []float64) float64 {
	a, b = ranks(a), ranks(b)
	length := math.Sqrt(inner(a, a) * inner(b, b))
	if length == 0 {
		return 0
	}
	return inner(a, b) / length
}

// ranks are relative to their mean; those of equal values are their mean rank.
func ranks(x []float64) []float64 {
	order := make([]int, len(x))
	for i := range order {
		order[i] = i
	}
	slices.SortStableFunc(order, func(a, b int) int { return cmp.Compare(x[a], x[b]) })
	out := make([]float64, len(x))
	for from := 0; from < len(order); {
		to := from
		for to < len(order) && x[order[to]]-x[order[from]] < 1e-9 {
			to++
		}
		for _, i := range order[from:to] {
			out[i] = float64(from+to-1)/2 - float64(len(x)-1)/2
		}
		from = to
	}
	return out
}
