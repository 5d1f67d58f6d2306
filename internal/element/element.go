// Package element is the periodic table: symbols, masses, places in the table
// and radii, by atomic number.
package element

// MaxZ is the highest atomic number that has a symbol.
const MaxZ = 118

// Symbol returns the symbol of the element with atomic number z, in title
// case. Panics outside 1..MaxZ: a caller's mistake.
func Symbol(z int) string {
	check(z)
	return symbols[z]
}

// Number returns the atomic number that belongs to a symbol in title case, and
// whether there is such an element. D and T are no elements here.
func Number(symbol string) (z int, ok bool) {
	z, ok = numbers[symbol]
	return z, ok
}

// Mass returns the standard atomic weight of z in dalton (masses.go).
func Mass(z int) float64 {
	check(z)
	return masses[z]
}

// Period returns the row of the periodic table, 1 to 7.
func Period(z int) int {
	check(z)
	period := 1
	for _, last := range nobleGases[:] {
		if z <= last {
			return period
		}
		period++
	}
	return period
}

// Group returns the column of the periodic table, 1 to 18, and 0 for
// lanthanum to ytterbium and actinium to nobelium, which stand below the table.
func Group(z int) int {
	check(z)
	period := Period(z)
	before, last := 0, nobleGases[period-1]
	if period > 1 {
		before = nobleGases[period-2]
	}
	fromLeft, fromRight := z-before, 18-(last-z)
	switch {
	case z == 2:
		return 18
	case fromLeft <= 2:
		return fromLeft
	case fromRight >= 13 || period >= 4 && fromRight >= 3:
		return fromRight
	}
	return 0
}

// IsMetal says whether z is a metal. Boron, silicon, germanium, arsenic,
// antimony, tellurium and astatine are counted as non-metals, polonium and the
// elements from 113 to 116 as metals.
func IsMetal(z int) bool {
	check(z)
	switch {
	case z >= 104:
		return z < 117
	case z == 1, z == 2:
		return false
	}
	g, p := Group(z), Period(z)
	if g <= 12 { // group 0, the inner transition elements, too
		return true
	}
	// The step from aluminium to polonium: metals left of it.
	return g < 18 && g-13 <= p-3-staircase[p]
}

// staircase corrects the diagonal between metals and non-metals by period:
// group 13 from Al, 14 from Sn, 15 and 16 from Bi and Po.
var staircase = [8]int{4: 1, 5: 1}

// nobleGases end the periods.
var nobleGases = [7]int{2, 10, 18, 36, 54, 86, 118}

func check(z int) {
	if z < 1 || z > MaxZ {
		panic("element: atomic number out of range")
	}
}

var symbols = [MaxZ + 1]string{
	"", "H", "He",
	"Li", "Be", "B", "C", "N", "O", "F", "Ne",
	"Na", "Mg", "Al", "Si", "P", "S", "Cl", "Ar",
	"K", "Ca", "Sc", "Ti", "V", "Cr", "Mn", "Fe", "Co", "Ni", "Cu", "Zn", "Ga", "Ge", "As", "Se", "Br", "Kr",
	"Rb", "Sr", "Y", "Zr", "Nb", "Mo", "Tc", "Ru", "Rh", "Pd", "Ag", "Cd", "In", "Sn", "Sb", "Te", "I", "Xe",
	"Cs", "Ba", "La", "Ce", "Pr", "Nd", "Pm", "Sm", "Eu", "Gd", "Tb", "Dy", "Ho", "Er", "Tm", "Yb",
	"Lu", "Hf", "Ta", "W", "Re", "Os", "Ir", "Pt", "Au", "Hg", "Tl", "Pb", "Bi", "Po", "At", "Rn",
	"Fr", "Ra", "Ac", "Th", "Pa", "U", "Np", "Pu", "Am", "Cm", "Bk", "Cf", "Es", "Fm", "Md", "No",
	"Lr", "Rf", "Db", "Sg", "Bh", "Hs", "Mt", "Ds", "Rg", "Cn", "Nh", "Fl", "Mc", "Lv", "Ts", "Og",
}

var numbers = func() map[string]int {
	m := make(map[string]int, MaxZ)
	for z := 1; z <= MaxZ; z++ {
		m[symbols[z]] = z
	}
	return m
}()
