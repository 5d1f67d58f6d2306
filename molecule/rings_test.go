package molecule_test

import (
	"slices"
	"testing"

	"torsieve/molecule"
)

// Independent rings and the sizes of the relevant ones: the definitions of P.
// Vismara, Electron. J. Combin. 1997, 4, R9, applied to textbook ring systems.
func TestRings(t *testing.T) {
	for _, tc := range []struct {
		name, smiles string
		count        int
		sizes        []int
		systems      int
	}{
		{"butane", "CCCC", 0, nil, 0},
		{"benzene", "c1ccccc1", 1, []int{6}, 1},
		{"naphthalene", "c1ccc2ccccc2c1", 2, []int{6, 6}, 1},
		{"anthracene", "c1ccc2cc3ccccc3cc2c1", 3, []int{6, 6, 6}, 1},
		{"decalin", "C1CCC2CCCCC2C1", 2, []int{6, 6}, 1},
		{"norbornane", "C1CC2CCC1C2", 2, []int{5, 5}, 1},
		{"bicyclo[2.2.2]octane", "C1CC2CCC1CC2", 2, []int{6, 6, 6}, 1},
		{"adamantane", "C1C2CC3CC1CC(C2)C3", 3, []int{6, 6, 6, 6}, 1},
		{"cubane", "C12C3C4C1C5C2C3C45", 5, []int{4, 4, 4, 4, 4, 4}, 1},
		{"spiro[5.5]undecane", "C12(CCCCC1)CCCCC2", 2, []int{6, 6}, 1},
		{"biphenyl", "c1ccccc1-c1ccccc1", 2, []int{6, 6}, 2},
		{"cyclododecane", "C1CCCCCCCCCCC1", 1, []int{12}, 1},
		{"two fragments", "C1CC1.C1CCC1", 2, []int{3, 4}, 2},
		{"porphine", "C1=CC2=CC3=CC=C(N3)C=C4C=CC(=N4)C=C5C=CC(=N5)C=C1N2", 5, []int{5, 5, 5, 5, 16}, 1},
	} {
		m := parse(t, tc.smiles)
		var sizes []int
		for _, ring := range m.Rings() {
			sizes = append(sizes, len(ring))
			checkRing(t, m, ring)
		}
		if m.RingCount() != tc.count || !slices.Equal(sizes, tc.sizes) || len(m.RingSystems()) != tc.systems {
			t.Errorf("%s: %d rings, sizes %v, %d systems; want %d, %v, %d",
				tc.name, m.RingCount(), sizes, len(m.RingSystems()), tc.count, tc.sizes, tc.systems)
		}
	}
}

// checkRing holds a ring to what a ring is: neighbours in order, none twice.
func checkRing(t *testing.T, m *molecule.Molecule, ring []int) {
	t.Helper()
	for at, i := range ring {
		k, ok := m.BondBetween(i, ring[(at+1)%len(ring)])
		if !ok || !m.BondInRing(k) || !m.InRing(i) || m.SmallestRing(k) > len(ring) || slices.Contains(ring[:at], i) {
			t.Errorf("%v is no ring at atom %d", ring, i)
		}
	}
}

// C60 has 12 pentagons and 20 hexagons and 32-1 independent rings (Euler).
func TestFullereneRings(t *testing.T) {
	m := parse(t, fullerene)
	var sizes [7]int
	for _, ring := range m.Rings() {
		sizes[len(ring)]++
	}
	if m.RingCount() != 31 || sizes[5] != 12 || sizes[6] != 20 || len(m.Rings()) != 32 {
		t.Errorf("%d rings, relevant by size %v", m.RingCount(), sizes)
	}
}

const fullerene = "c12c3c4c5c1c6c7c8c2c9c1c3c2c3c4c4c%10c5c5c6c6c7c7c%11c8c9c8c9c1c2c1c2c3c4c3c4c%10c5c5c6c6c7c7c%11c8c8c9c1c1c2c3c2c4c5c6c3c7c8c1c23"

// Large inputs are read and written like small ones: a chain, a sheet of
// hexagons, a row of them and a crowd of fragments (BenchmarkBuild has times).
func TestLargeMolecules(t *testing.T) {
	for name, b := range map[string]*molecule.Builder{
		"chain": chain(5000), "sheet": sheet(30, 30), "ladder": sheet(1, 1000), "crowd": crowd(2000),
	} {
		m, _, err := b.Build()
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		if m.SMILES() == "" || m.NumAtoms() < 2000 {
			t.Errorf("%s: %d atoms", name, m.NumAtoms())
		}
	}
}

func carbon() molecule.BuilderAtom {
	return molecule.BuilderAtom{Number: 6, Hydrogens: molecule.FillHydrogens}
}

func chain(n int) *molecule.Builder {
	b := molecule.NewBuilder()
	for i := range n {
		b.AddAtom(carbon())
		if i > 0 {
			b.AddBond(i-1, i, 1)
		}
	}
	return b
}

func crowd(n int) *molecule.Builder {
	b := molecule.NewBuilder()
	for range n {
		b.AddAtom(carbon())
	}
	return b
}

// sheet is a honeycomb of rows by columns hexagons drawn as a brick wall.
func sheet(rows, columns int) *molecule.Builder {
	b := molecule.NewBuilder()
	width := 2*columns + 2
	at := func(r, c int) int { return r*width + c }
	for range (rows + 1) * width {
		b.AddAtom(carbon())
	}
	for r := range rows + 1 {
		for c := range width {
			if c > 0 {
				b.AddBond(at(r, c-1), at(r, c), 1)
			}
			if r > 0 && (r+c)%2 == 1 {
				b.AddBond(at(r-1, c), at(r, c), 1)
			}
		}
	}
	return b
}
