package ensemble

import (
	"fmt"
	"math"
	"slices"
)

// A Family is a group of similar states, by index, in the states' order. The
// first is the one that it is named after.
type Family []int

// FamiliesByLabel groups states whose labels are equal, such as the wells that
// their torsions lie in. Families stand in the order of their first states.
// Panics if the labels differ in length.
func FamiliesByLabel(labels [][]int) []Family {
	return group(len(labels), func(leader, i int) bool {
		if len(labels[leader]) != len(labels[i]) {
			panic("ensemble: labels of different length")
		}
		return slices.Equal(labels[leader], labels[i])
	})
}

// FamiliesByDistance groups states around leaders: each state joins the first
// family whose leader is within the threshold, in the distances' unit, or leads
// one of its own. Given in the order of their energies, every family is led by
// its lowest state. Panics if the distances are not square.
func FamiliesByDistance(distances [][]float64, threshold float64) []Family {
	checkDistances(distances, len(distances))
	return group(len(distances), func(leader, i int) bool { return distances[leader][i] <= threshold })
}

func group(n int, joins func(leader, i int) bool) []Family {
	var families []Family
	for i := range n {
		k := slices.IndexFunc(families, func(f Family) bool { return joins(f[0], i) })
		if k < 0 {
			families = append(families, Family{i})
			continue
		}
		families[k] = append(families[k], i)
	}
	return families
}

// wellGap is the empty stretch of a circle, in radians, that parts two wells of
// a torsion: relaxed shapes of one well lie within some 20 degrees of each
// other, wells are 60 degrees and more apart.
const wellGap = 35 * math.Pi / 180

// Wells labels each state by the wells of its torsions: torsions holds one row
// of angles in radians per state. Of each torsion, the angles of all states are
// laid on the circle and parted where a gap is wide; wells count from 0 with the
// angle, beginning at 0 radians and counting the well about it once.
//
// Panics if the rows differ in length or an angle is not finite.
func Wells(torsions [][]float64) [][]int {
	labels := make([][]int, len(torsions))
	for i, row := range torsions {
		if len(row) != len(torsions[0]) {
			panic(fmt.Sprintf("ensemble: %d torsions in one state, %d in the first", len(row), len(torsions[0])))
		}
		labels[i] = make([]int, len(row))
	}
	if len(torsions) == 0 {
		return labels
	}
	column := make([]float64, len(torsions))
	for k := range torsions[0] {
		for i, row := range torsions {
			column[i] = circle(row[k])
		}
		for i, well := range wells(column) {
			labels[i][k] = well
		}
	}
	return labels
}

// circle brings an angle to 0 to 2 pi.
func circle(angle float64) float64 {
	if math.IsNaN(angle) || math.IsInf(angle, 0) {
		panic(fmt.Sprintf("ensemble: torsion %g", angle))
	}
	a := math.Mod(angle, 2*math.Pi)
	if a < 0 {
		a += 2 * math.Pi
	}
	return a
}

func wells(angles []float64) []int {
	order := make([]int, len(angles))
	for i := range order {
		order[i] = i
	}
	slices.SortStableFunc(order, func(a, b int) int {
		switch {
		case angles[a] < angles[b]:
			return -1
		case angles[a] > angles[b]:
			return 1
		}
		return 0
	})
	out := make([]int, len(angles))
	well := 0
	for k, i := range order {
		if k > 0 && angles[i]-angles[order[k-1]] > wellGap {
			well++
		}
		out[i] = well
	}
	// The last well and the first are one if no gap lies between them.
	first, last := order[0], order[len(order)-1]
	if well > 0 && angles[first]+2*math.Pi-angles[last] <= wellGap {
		for i := range out {
			if out[i] == well {
				out[i] = 0
			}
		}
	}
	return out
}
