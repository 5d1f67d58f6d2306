package forcefield

import (
	_ "embed"
	"sync"

	"torsieve/internal/units"
)

//go:embed data/corrections.json
var correctionsJSON []byte

// A series is V1, V2, V3 of a torsion V1/2 (1 - cos phi) + ..., hartree.
type series [3]float64

// correctionTable holds the constants by the names that the rules below use.
type correctionTable struct {
	torsions map[string]series
	scales   map[string]float64
	lengths  map[string]float64 // bohr
}

var correctionsOf = sync.OnceValue(func() *correctionTable {
	var file struct {
		Title, Source, Units, Form string
		Torsions                   map[string]struct {
			V1, V2, V3 float64
			Path, Met  string
		}
		Scales map[string]struct {
			Factor    float64
			Bond, Met string
		}
		Lengths map[string]float64
	}
	decode("corrections.json", correctionsJSON, &file)
	t := &correctionTable{torsions: map[string]series{}, scales: map[string]float64{}, lengths: map[string]float64{}}
	for name, v := range file.Torsions {
		t.torsions[name] = series{v.V1 * units.KcalPerMol, v.V2 * units.KcalPerMol, v.V3 * units.KcalPerMol}
	}
	for name, v := range file.Scales {
		t.scales[name] = v.Factor
	}
	for name, v := range file.Lengths {
		t.lengths[name] = v * units.Angstrom
	}
	return t
})

// corrections are the added torsions: entries of the torsion's form under a
// name of their own.
type corrections torsions

func (corrections) name() string { return "correction" }

func (cs corrections) addTo(grad, x []float64) float64 { return torsions(cs).addTo(grad, x) }

// corrections finds every path that a correction is for.
func (t *typing) corrections(s *skeleton) corrections {
	var out corrections
	for k, b := range t.m.Bonds() {
		if b.Order != 1 || b.Aromatic {
			continue
		}
		for _, ends := range [2][2]int{{b.A, b.B}, {b.B, b.A}} {
			j, l := ends[0], ends[1]
			s.paths(j, l, func(i, end int) {
				if name := t.correctionOf(i, j, l, end, k); name != "" {
					out = append(out, correctionsOf().torsions[name].entries(i, j, l, end)...)
				}
			})
		}
	}
	return out
}

func (v series) entries(i, j, k, l int) []torsion {
	var out []torsion
	for n, barrier := range v {
		if barrier != 0 {
			out = append(out, torsion{int32(i), int32(j), int32(k), int32(l), int32(n + 1), barrier / 2, 1})
		}
	}
	return out
}

// correctionOf names the correction of the path i-j-k-l about the single bond
// number bond, read in the direction from the double bond i=j outward; "" where
// there is none.
func (t *typing) correctionOf(i, j, k, l, bond int) string {
	if t.m.Atom(j).Number != 6 || t.m.Atom(j).Aromatic {
		return ""
	}
	carbonyl := t.terminalOxygen(i) && t.doubleBond(i, j) && t.names[i] == "O_2"
	alkene := t.m.Atom(i).Number == 6 && t.doubleBond(i, j)
	end := t.m.Atom(l).Number
	switch {
	case carbonyl && t.names[k] == "O_R" && end == 6:
		return "ester"
	case carbonyl && t.names[k] == "O_R" && end == 1 && t.hydrogens(j) == 1:
		return "formic acid"
	case carbonyl && t.names[k] == "O_R" && end == 1:
		return "acid"
	case alkene && t.names[k] == "O_R" && end == 6:
		return "vinyl ether"
	case carbonyl && end == 6 && t.secondaryAmide(k) && !t.m.BondInRing(bond):
		return "secondary amide"
	case alkene && end == 1 && t.names[k] == "C_3":
		return "alkene alkyl"
	case carbonyl && end == 1 && t.names[k] == "C_3":
		return "carbonyl alkyl"
	}
	return ""
}

func (t *typing) doubleBond(i, j int) bool {
	k, ok := t.m.BondBetween(i, j)
	b := t.m.Bond(k)
	return ok && b.Order == 2 && !b.Aromatic
}

func (t *typing) hydrogens(i int) int {
	count := 0
	for _, j := range t.m.Neighbours(i) {
		if t.m.Atom(j).Number == 1 {
			count++
		}
	}
	return count
}

// secondaryAmide reports a resonant nitrogen with one hydrogen and two carbons.
func (t *typing) secondaryAmide(n int) bool {
	if t.names[n] != "N_R" || len(t.m.Neighbours(n)) != 3 || t.hydrogens(n) != 1 {
		return false
	}
	carbons := 0
	for _, j := range t.m.Neighbours(n) {
		if t.m.Atom(j).Number == 6 {
			carbons++
		}
	}
	return carbons == 2
}

// scale is the factor on the published torsion barrier of bond k.
func (t *typing) scale(k int) float64 {
	b := t.m.Bond(k)
	if b.Aromatic || t.orders[k] != 1 {
		return 1
	}
	x, y := t.m.Atom(b.A), t.m.Atom(b.B)
	flat := func(i int) bool { return t.names[i] == "C_2" || t.names[i] == "C_R" }
	aniline := func(c, n int) bool {
		return t.m.Atom(c).Aromatic && t.names[c] == "C_R" && t.names[n] == "N_R" && !t.m.Atom(n).Aromatic && !t.nitro(n)
	}
	switch {
	case flat(b.A) && flat(b.B) && !(x.Aromatic && y.Aromatic) && !t.m.BondInRing(k):
		return correctionsOf().scales["conjugated"]
	case aniline(b.A, b.B) || aniline(b.B, b.A):
		return correctionsOf().scales["aniline"]
	}
	return 1
}

// length is the natural length that replaces the published one of bond k, bohr,
// or 0.
func (t *typing) length(k int) float64 {
	b := t.m.Bond(k)
	for _, ends := range [2][2]int{{b.A, b.B}, {b.B, b.A}} {
		if name := t.lengthName(ends[0], ends[1]); name != "" {
			return correctionsOf().lengths[name]
		}
	}
	return 0
}

// lengthName names the entry for a bond from centre to other.
func (t *typing) lengthName(centre, other int) string {
	z, oxide := t.m.Atom(other).Number, t.terminalOxygen(other)
	switch t.names[centre] {
	case "S_3+6":
		switch {
		case !t.sulfonyl(centre):
			return ""
		case oxide:
			return "sulfone S=O"
		case z == 7:
			return "sulfonyl S-N"
		case z == 8:
			return "sulfonyl S-O"
		case z == 6 && t.m.Atom(other).Aromatic:
			return "sulfonyl S-C aromatic"
		case t.names[other] == "C_3":
			return "sulfonyl S-C"
		}
	case "S_3+4":
		if oxide {
			return "sulfoxide S=O"
		}
	case "P_3+5":
		switch {
		case oxide:
			return "phosphoryl P=O"
		case z == 8:
			return "phosphoryl P-O"
		}
	case "N_R":
		if oxide && t.nitro(centre) {
			return "nitro N-O"
		}
	case "C_2":
		if oxide && t.carboxylate(centre) {
			return "carboxylate C-O"
		}
	}
	return ""
}
