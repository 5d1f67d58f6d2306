package molecule

// maxDistanceAtoms is the size up to which all topological distances are kept.
const maxDistanceAtoms = 2000

// TopologicalDistance returns the number of bonds on the shortest path between
// atoms i and j, or -1 where there is none.
func (m *Molecule) TopologicalDistance(i, j int) int {
	if len(m.atoms) <= maxDistanceAtoms {
		return int(m.shared.distances()[i][j])
	}
	row := make([]int32, len(m.atoms))
	m.distancesFrom(i, row)
	return int(row[j])
}

func (g *graph) allDistances() [][]int32 {
	n := len(g.atoms)
	rows := make([][]int32, n)
	flat := make([]int32, n*n)
	for i := range rows {
		rows[i] = flat[i*n : (i+1)*n]
		g.distancesFrom(i, rows[i])
	}
	return rows
}

// distancesFrom fills row with the distances from atom i, -1 for other
// fragments.
func (g *graph) distancesFrom(i int, row []int32) {
	for j := range row {
		row[j] = -1
	}
	row[i] = 0
	queue := []int{i}
	for at := 0; at < len(queue); at++ {
		a := queue[at]
		for _, j := range g.neighbours[a] {
			if row[j] < 0 {
				row[j] = row[a] + 1
				queue = append(queue, j)
			}
		}
	}
}

// Classes returns the symmetry class of each atom as dense ranks from 0. Atoms
// that a symmetry of the graph exchanges have the same class; delocalised
// groups (carboxylate, nitro, sulfonate, phosphate, amidinium) count as alike,
// stereo elements are left out.
func (m *Molecule) Classes() []int { return m.shared.classes() }
