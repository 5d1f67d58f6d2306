package bondorder

import "slices"

// openBridges drops what two bonds per pair cannot show of boranes: boron pairs
// with hydrogen between them, and of the hydrogen's two bonds the one to the
// boron that has the more hydrogens already. Diborane becomes two BH3.
func openBridges(numbers []int, near []Bond) []Bond {
	boron := make(map[int][]int) // of a hydrogen
	hydrogens := make(map[int]int)
	for _, b := range near {
		switch h, other := b.A, b.B; {
		case numbers[h] == 5 && numbers[other] == 1:
			boron[other] = append(boron[other], h)
		case numbers[h] == 1 && numbers[other] == 5:
			boron[h] = append(boron[h], other)
		}
	}
	for h := range numbers { // in order, not as the map has it
		if len(boron[h]) == 1 {
			hydrogens[boron[h][0]]++
		}
	}
	dropped := make(map[[2]int]bool)
	for h := range numbers {
		if len(boron[h]) != 2 {
			continue
		}
		i, j := boron[h][0], boron[h][1]
		dropped[[2]int{min(i, j), max(i, j)}] = true
		if hydrogens[i] > hydrogens[j] {
			i, j = j, i
		}
		hydrogens[i]++
		dropped[[2]int{min(h, j), max(h, j)}] = true
	}
	return slices.DeleteFunc(near, func(b Bond) bool { return dropped[[2]int{b.A, b.B}] })
}
