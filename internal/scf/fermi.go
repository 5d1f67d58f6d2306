package scf

import "math"

// Occupy fills f with the Fermi occupations, 0 to 1, of the levels eps
// (hartree, ascending) by n electrons of one spin at the temperature kT
// (hartree; 0 fills from below), and returns the Fermi level. The occupations
// sum to n to rounding.
//
// Panics if n is not between 0 and len(eps), or f is of another length: a
// caller's mistake.
func Occupy(f, eps []float64, n, kT float64) (level float64) {
	switch {
	case len(f) != len(eps):
		panic("scf: occupations and levels differ in number")
	case !(n >= 0 && n <= float64(len(eps))):
		panic("scf: more electrons than places, or fewer than none")
	case len(eps) == 0:
		return 0
	}
	full := int(math.Floor(n))
	switch part := n - float64(full); {
	case full == 0 && part == 0:
		return fillFrom(f, 0, 0, eps[0])
	case full == len(eps):
		return fillFrom(f, full, 0, eps[full-1])
	case kT == 0 && part > 0:
		return fillFrom(f, full, part, eps[full])
	case kT == 0:
		return fillFrom(f, full, 0, (eps[full-1]+eps[full])/2)
	}
	return fermi(f, eps, n, kT)
}

// fillFrom puts full whole electrons and part of one into the lowest places.
func fillFrom(f []float64, full int, part, level float64) float64 {
	clear(f)
	for i := range full {
		f[i] = 1
	}
	if part > 0 {
		f[full] = part
	}
	return level
}

// fermi finds the level by bisection: the sum of occupations rises with it.
func fermi(f, eps []float64, n, kT float64) float64 {
	below, above := eps[0]-60*kT, eps[len(eps)-1]+60*kT
	for range 200 {
		level := below + (above-below)/2
		if level <= below || level >= above {
			break
		}
		if total := occupations(f, eps, level, kT); total < n {
			below = level
		} else if total > n {
			above = level
		} else {
			return level
		}
	}
	total := occupations(f, eps, below, kT)
	share(f, n-total)
	return below
}

// share deals out what rounding of the level has left over, by how willing
// each place is: f(1-f).
func share(f []float64, rest float64) {
	var sum float64
	for _, v := range f {
		sum += v * (1 - v)
	}
	if sum < 1e-8 {
		return
	}
	for i, v := range f {
		f[i] += rest * v * (1 - v) / sum
	}
}

func occupations(f, eps []float64, level, kT float64) float64 {
	var sum float64
	for i, e := range eps {
		f[i] = occupation((e - level) / kT)
		sum += f[i]
	}
	return sum
}

// occupation is 1/(1+exp(x)) without overflow.
func occupation(x float64) float64 {
	switch {
	case x > 100:
		return 0
	case x < -100:
		return 1
	}
	return 1 / (1 + math.Exp(x))
}

// Entropy returns -T S of one spin's occupations in hartree: kT times the sum
// of f ln f + (1-f) ln(1-f).
func Entropy(f []float64, kT float64) float64 {
	var sum float64
	for _, v := range f {
		if v > 0 && v < 1 {
			sum += v*math.Log(v) + (1-v)*math.Log(1-v)
		}
	}
	return kT * sum
}
