package semiempirical

import "math"

// spins divides the valence electrons into the two spins. The error is an
// *ElectronsError.
func spins(b *basis, charge, multiplicity int) (alpha, beta float64, err error) {
	var sum float64
	for _, s := range b.shells {
		sum += s.Occupation
	}
	n := int(math.Round(sum)) - charge
	refuse := func(msg string) (float64, float64, error) {
		return 0, 0, &ElectronsError{Charge: charge, Multiplicity: multiplicity, Electrons: n, Msg: msg}
	}
	unpaired := multiplicity - 1
	switch {
	case multiplicity < 1:
		return refuse("multiplicity is at least 1")
	case n <= 0:
		return refuse("no electrons are left")
	case (n-unpaired)%2 != 0 && n%2 == 0:
		return refuse("an even number of electrons has an odd multiplicity")
	case (n-unpaired)%2 != 0:
		return refuse("an odd number of electrons has an even multiplicity")
	case unpaired > n:
		return refuse("more unpaired electrons than electrons")
	case (n+unpaired)/2 > b.functions():
		return refuse("more electrons than the valence shells have room for")
	}
	return float64((n + unpaired) / 2), float64((n - unpaired) / 2), nil
}
