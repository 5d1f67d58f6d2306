package bondorder

import (
	"math"
	"slices"

	"torsieve/internal/element"
)

// candidates are all pairs near enough for a bond.
func candidates(numbers []int, x []float64) ([]Bond, error) {
	var near []Bond
	for i := range numbers {
		for j := i + 1; j < len(numbers); j++ {
			reach := element.CovalentRadius(numbers[i]) + element.CovalentRadius(numbers[j])
			d := distance(x, i, j)
			switch {
			case d < shortest*reach || d == 0:
				return nil, &TooClose{A: i, B: j, Distance: d, numbers: [2]int{numbers[i], numbers[j]}}
			case d < longest*reach:
				near = append(near, Bond{A: i, B: j, Order: 1, ratio: d / reach})
			}
		}
	}
	return near, nil
}

func distance(x []float64, i, j int) float64 {
	dx, dy, dz := x[3*i]-x[3*j], x[3*i+1]-x[3*j+1], x[3*i+2]-x[3*j+2]
	return math.Sqrt(dx*dx + dy*dy + dz*dz)
}

func share(a, b []int) bool {
	for _, i := range a {
		if slices.Contains(b, i) {
			return true
		}
	}
	return false
}

// maxDegree is the largest number of neighbours of an element.
func maxDegree(z int) int {
	switch {
	case z == 1 || z == 9:
		return 1
	case z == 2 || z == 10 || z == 18:
		return 0
	case z == 8:
		return 3
	case z <= 10:
		return 4
	case element.IsMetal(z):
		return 12
	}
	return 6
}

// stepsBack returns over how many other bonds one end of a bond is reached from
// the other, or 0 if it takes more than five.
func stepsBack(b Bond, neighbours [][]int) int {
	seen := map[int]bool{b.A: true}
	front := []int{b.A}
	for steps := 1; steps <= 5; steps++ {
		var next []int
		for _, i := range front {
			for _, j := range neighbours[i] {
				if seen[j] || i == b.A && j == b.B {
					continue
				}
				if j == b.B {
					return steps
				}
				seen[j] = true
				next = append(next, j)
			}
		}
		front = next
	}
	return 0
}
