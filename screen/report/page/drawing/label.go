package drawing

import (
	"fmt"

	"torsieve/internal/element"
)

// A Label is what stands at an atom; empty for a plain carbon.
type Label struct {
	Symbol    string
	Number    int    // atomic number, for the colour
	Isotope   int    // 0: not stated
	Hydrogens int    // written after the symbol
	Charge    string // "+", "−", "2+"; "•" for an unpaired electron
	Reversed  bool   // the hydrogens stand on the left: the bonds are on the right
}

// Empty says whether the atom is a mere corner.
func (l Label) Empty() bool { return l.Symbol == "" }

// label writes an atom out unless it is a carbon that its bonds tell of.
func (s *sketch) label(i int) Label {
	a := s.m.Atom(i)
	corner := a.Number == 6 && a.Charge == 0 && a.Isotope == 0 && a.Radical == 0
	if corner && len(s.next[i]) > 0 {
		return Label{}
	}
	l := Label{Symbol: element.Symbol(a.Number), Number: a.Number, Isotope: a.Isotope, Charge: chargeText(a.Charge)}
	for range a.Radical {
		l.Charge += "•"
	}
	var toward float64
	for _, j := range s.m.Neighbours(i) {
		if !s.placed[j] {
			l.Hydrogens++
			continue
		}
		toward += real(unit(s.at[j] - s.at[i]))
	}
	l.Reversed = l.Hydrogens > 0 && toward > 0.1
	return l
}

func chargeText(q int) string {
	switch {
	case q == 0:
		return ""
	case q == 1:
		return "+"
	case q == -1:
		return "−"
	case q > 0:
		return fmt.Sprintf("%d+", q)
	}
	return fmt.Sprintf("%d−", -q)
}
