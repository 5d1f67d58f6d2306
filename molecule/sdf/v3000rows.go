package sdf

import (
	"strconv"
	"strings"

	"torsieve/internal/textline"
)

// atom reads: index type x y z aamap [CHG=] [RAD=] [MASS=] [VAL=] ...
func (v *v3000Reader) atom(words []string, number int) error {
	i := len(v.t.atoms)
	if i >= v.atoms {
		return faultf(number, "more atoms than the %d that the COUNTS line promises", v.atoms)
	}
	if len(words) < 5 {
		return faultf(number, "atom %d: number, symbol and three coordinates are wanted", i+1)
	}
	label, err := strconv.Atoi(words[0])
	if err != nil {
		return faultf(number, "%s is no atom number", textline.Quote(words[0]))
	}
	if _, twice := v.index[label]; twice {
		return faultf(number, "atom number %d stands twice in the table", label)
	}
	v.index[label] = i
	v.t.atoms = append(v.t.atoms, tableAtom{valence: -1})
	if err := v.t.setSymbol(i, number, words[1]); err != nil {
		return err
	}
	var x [3]float64
	for k := range x {
		if x[k], err = strconv.ParseFloat(words[2+k], 64); err != nil {
			return faultf(number, "atom %d: %s is no coordinate", i+1, textline.Quote(words[2+k]))
		}
	}
	if err := v.t.setPosition(i, number, x); err != nil {
		return err
	}
	if len(words) > 5 {
		if class, err := strconv.Atoi(words[5]); err == nil {
			v.t.atoms[i].class = max(0, class)
		}
	}
	for _, w := range words[5:] {
		if err := v.atomOption(i, number, w); err != nil {
			return err
		}
	}
	return nil
}

func (v *v3000Reader) atomOption(i, number int, word string) error {
	key, value, found := strings.Cut(word, "=")
	set := map[string]func(atom, line, value int) error{
		"CHG": v.t.setCharge, "RAD": v.t.setRadical, "MASS": v.t.setIsotope, "VAL": v.t.setValence,
	}[strings.ToUpper(key)]
	if !found || set == nil {
		return nil
	}
	n, err := strconv.Atoi(value)
	if err != nil {
		return faultf(number, "atom %d: %s is no number for %s", i+1, textline.Quote(value), key)
	}
	return set(i, number, n)
}

func (t *table) setValence(i, line, value int) error {
	switch {
	case value == -1:
		t.atoms[i].valence = 0
	case value > 0 && value <= maxCharge:
		t.atoms[i].valence = value
	case value != 0:
		return faultf(line, "atom %d: valence %d, want -1 to 15", i+1, value)
	}
	return nil
}

// bond reads: index type atom1 atom2 [CFG=1 up|2 either|3 down] ...
func (v *v3000Reader) bond(words []string, number int) error {
	k := len(v.t.bonds) + 1
	if k > v.bonds {
		return faultf(number, "more bonds than the %d that the COUNTS line promises", v.bonds)
	}
	if len(words) < 4 {
		return faultf(number, "bond %d: number, type and two atoms are wanted", k)
	}
	var fields [3]int
	for i := range fields {
		var err error
		if fields[i], err = strconv.Atoi(words[1+i]); err != nil {
			return faultf(number, "bond %d: %s is no number", k, textline.Quote(words[1+i]))
		}
	}
	var ends [2]int
	for i, label := range fields[1:] {
		at, ok := v.index[label]
		if !ok {
			return faultf(number, "bond %d names atom %d, which is not among the %d atoms", k, label, len(v.t.atoms))
		}
		ends[i] = at + 1
	}
	m := plain
	for _, w := range words[4:] {
		if key, value, _ := strings.Cut(w, "="); strings.EqualFold(key, "CFG") {
			m = map[string]mark{"1": wedge, "2": wavy, "3": hash}[value]
		}
	}
	if m == wavy && fields[0] == 2 {
		m = either
	}
	return v.t.addBond(k, number, ends[0], ends[1], fields[0], m)
}

// collection looks for stereo groups that are not absolute.
func (v *v3000Reader) collection(words []string, _ int) error {
	group := strings.ToUpper(words[0])
	for _, kind := range [2][2]string{{"MDLV30/STERAC", "racemic"}, {"MDLV30/STEREL", "relative"}} {
		if strings.HasPrefix(group, kind[0]) {
			v.t.warnf("a stereo group is marked as %s; the configuration is taken as drawn", kind[1])
		}
	}
	return nil
}

// splitWords cuts at blanks that stand in no parentheses and no quotes.
func splitWords(s string) []string {
	var words []string
	depth, quotes, start := 0, false, -1
	for i := 0; i < len(s); i++ {
		switch c := s[i]; {
		case c == '"':
			quotes = !quotes
		case quotes:
		case c == '(':
			depth++
		case c == ')':
			depth--
		}
		blank := (s[i] == ' ' || s[i] == '\t') && depth <= 0 && !quotes
		switch {
		case blank && start >= 0:
			words, start = append(words, s[start:i]), -1
		case !blank && start < 0:
			start = i
		}
	}
	if start >= 0 {
		words = append(words, s[start:])
	}
	return words
}
