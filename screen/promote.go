package screen

import (
	"cmp"
	"fmt"
	"slices"

	"torsieve/internal/units"
	"torsieve/molecule"
)

// promote returns the conformers, by index, that go up to a tier, in the order
// of their numbers, and tells the others why they stay. The second tier (index
// 1) takes the first ones of the generator's order, whose energies are a poor
// guide; a higher one takes a window above the lowest.
func (r *ligandRun) promote(tier int) []int {
	alive := r.alive(tier - 1)
	if tier == 1 {
		return r.capped(alive)
	}
	return r.window(alive, tier-1)
}

// alive lists the conformers that have an energy of the tier and nothing
// against them.
func (r *ligandRun) alive(tier int) []int {
	var alive []int
	for i := range r.conformers {
		if c := &r.conformers[i]; c.Last == tier && c.Why == "" {
			alive = append(alive, i)
		}
	}
	return alive
}

func (r *ligandRun) capped(alive []int) []int {
	limit := r.options.MaxConformers
	if len(alive) <= limit {
		return alive
	}
	for _, i := range alive[limit:] {
		r.conformers[i].Why = fmt.Sprintf("beyond the cap of %d conformers", limit)
	}
	r.warnf("%d shapes were found, the cap let %d go on: raise max-conformers for more", len(alive), limit)
	return alive[:limit]
}

func (r *ligandRun) window(alive []int, tier int) []int {
	window := r.options.Window
	if window == 0 {
		window = WindowFor(Flexibility(r.ligand.Mol))
	}
	lowest := slices.MinFunc(alive, func(a, b int) int {
		return cmp.Compare(r.conformers[a].Energies[tier], r.conformers[b].Energies[tier])
	})
	var up []int
	for _, i := range alive {
		c := &r.conformers[i]
		above := c.Energies[tier] - r.conformers[lowest].Energies[tier]
		if above <= window {
			up = append(up, i)
			continue
		}
		c.Why = fmt.Sprintf("%.2f kcal/mol above the lowest at this tier, the window is %.1f",
			above/units.KcalPerMol, window/units.KcalPerMol)
	}
	return up
}

// Flexibility counts the bonds that a molecule can turn about: the rotatable
// ones, and of each ring of eight and more atoms the single bonds but for the
// three that its closure costs.
func Flexibility(m *molecule.Molecule) int {
	n := m.RotatableBonds()
	for _, ring := range m.Rings() {
		if len(ring) < 8 {
			continue
		}
		free := -3
		for i, a := range ring {
			k, _ := m.BondBetween(a, ring[(i+1)%len(ring)])
			if b := m.Bond(k); b.Order == 1 && !b.Aromatic && m.SmallestRing(k) >= 8 {
				free++
			}
		}
		n += max(0, free)
	}
	return n
}
