package generate

import (
	"math"
	"slices"
	"strings"
	"testing"
)

// form names an unbranched alkane's shape by the dihedrals of its carbons: t
// from 140 degrees, x from 80, g below; with signs. Of the four names that the
// direction of counting and the mirror image give it is the first.
func form(c Conformer, carbons int) string {
	const letters = "gxt"
	var bonds []float64
	for k := range carbons - 3 {
		bonds = append(bonds, dihedrals(c, [4]int{k, k + 1, k + 2, k + 3})[0])
	}
	name := func(sign float64) string {
		var b strings.Builder
		for _, d := range bonds {
			kind := 0
			if a := math.Abs(d); a >= 140 {
				kind = 2
			} else if a >= 80 {
				kind = 1
			}
			b.WriteByte(letters[kind])
			if kind < 2 {
				b.WriteByte("-+"[int(1+math.Copysign(1, sign*d))/2])
			}
		}
		return b.String()
	}
	names := []string{name(1), name(-1)}
	slices.Reverse(bonds)
	names = append(names, name(1), name(-1))
	return slices.Min(names)
}

// Every shape of the ACONF set (D. Gruzman, A. Karton, J. M. L. Martin, J. Phys.
// Chem. A 2009, 113, 11974: 2 of butane, 4 of pentane, 12 of hexane, optimised
// with second-order perturbation theory) is found, and no other.
func TestAlkaneForms(t *testing.T) {
	for _, c := range []struct {
		smiles  string
		carbons int
		want    []string
	}{
		{"CCCC", 4, []string{"g+", "t"}},
		{"CCCCC", 5, []string{"g+g+", "g+t", "g+x-", "tt"}},
		{"CCCCCC", 6, []string{
			"g+g+g+", "g+g+t", "g+g+x-", "g+tg+", "g+tg-", "g+tt", "g+x+g-", "g+x-t", "tg+t", "tg+x-", "ttt", "x+g-x+",
		}},
	} {
		_, res := conformers(t, c.smiles)
		var got []string
		for _, x := range res.Conformers {
			got = append(got, form(x, c.carbons))
		}
		slices.Sort(got)
		if !slices.Equal(got, c.want) {
			t.Errorf("%s: %v, want %v", c.smiles, got, c.want)
		}
	}
}
