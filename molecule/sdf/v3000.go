package sdf

import (
	"strconv"
	"strings"

	"torsieve/internal/textline"
)

const v30 = "M  V30 "

// A v3000Reader reads the blocks of one V3000 connection table.
type v3000Reader struct {
	r            *Reader
	t            *table
	index        map[int]int // atom number of the file -> index
	atoms, bonds int         // as promised; -1 before the COUNTS line
}

// readV3000 reads everything up to M  END.
func (r *Reader) readV3000(t *table, maxAtoms int) error {
	v := &v3000Reader{r: r, t: t, index: make(map[int]int), atoms: -1}
	for {
		words, number, err := v.next()
		if err != nil {
			return err
		}
		switch {
		case words == nil:
			return v.end(number)
		case words[0] == "COUNTS":
			if err := v.counts(words, number, maxAtoms); err != nil {
				return err
			}
		case words[0] == "BEGIN" && len(words) > 1:
			if err := v.block(words[1], number); err != nil {
				return err
			}
		}
	}
}

// next returns the words of the next V30 line with its continuations, and nil
// at M  END or where the record stops without it.
func (v *v3000Reader) next() (words []string, number int, err error) {
	text := ""
	for {
		line, ok := v.r.lines.Next()
		number = v.r.lines.Number()
		switch {
		case !ok && v.atoms < 0, !ok && len(v.t.atoms) < v.atoms:
			return nil, number, faultf(number, "cut off: the file ends in the connection table, %d of %d atoms read", len(v.t.atoms), max(0, v.atoms))
		case !ok && len(v.t.bonds) < v.bonds:
			return nil, number, faultf(number, "cut off: %d bonds promised, %d lines found before the end of the file", v.bonds, len(v.t.bonds))
		case !ok || isDelimiter(line) || strings.HasPrefix(line, ">"):
			if ok {
				v.r.lines.Back()
			}
			v.t.warnf("the line \"M  END\" is missing")
			return nil, number, nil
		case strings.HasPrefix(line, "M  END"):
			return nil, number, nil
		case !strings.HasPrefix(line, v30):
			if strings.TrimSpace(line) == "" || strings.TrimRight(line, " ") == strings.TrimRight(v30, " ") {
				continue
			}
			return nil, number, faultf(number, "%s begins no line of a V3000 table; \"M  V30\" is wanted", textline.Quote(line[:min(10, len(line))]))
		}
		text += strings.TrimRight(line[len(v30):], " ")
		if cut, more := strings.CutSuffix(text, "-"); more {
			if text = cut; len(text) > textline.MaxLength {
				return nil, number, faultf(number, "a line is continued without end")
			}
			continue
		}
		if words = splitWords(text); len(words) > 0 {
			return words, number, nil
		}
		text = ""
	}
}

func (v *v3000Reader) counts(words []string, number, maxAtoms int) error {
	if len(words) < 3 {
		return faultf(number, "the COUNTS line needs the numbers of atoms and bonds")
	}
	var err1, err2 error
	v.atoms, err1 = strconv.Atoi(words[1])
	v.bonds, err2 = strconv.Atoi(words[2])
	if err1 != nil || err2 != nil || v.atoms < 0 || v.bonds < 0 {
		return faultf(number, "the COUNTS line needs the numbers of atoms and bonds")
	}
	return checkSize(number, v.atoms, v.bonds, maxAtoms)
}

// block reads one BEGIN ... END; those that say nothing about the molecule are
// passed over.
func (v *v3000Reader) block(name string, number int) error {
	if v.atoms < 0 && name != "CTAB" {
		return faultf(number, "a block of the V3000 table stands before its COUNTS line")
	}
	read := func([]string, int) error { return nil }
	switch name {
	case "CTAB":
		return nil
	case "ATOM":
		read = v.atom
	case "BOND":
		read = v.bond
	case "COLLECTION":
		read = v.collection
	case "TEMPLATE":
		return faultf(number, "template atoms of a V3000 table cannot be used")
	}
	for {
		words, number, err := v.next()
		if err != nil {
			return err
		}
		if words == nil {
			return faultf(number, "block %s has no END", textline.Quote(name))
		}
		if words[0] == "END" {
			return nil
		}
		if err := read(words, number); err != nil {
			return err
		}
	}
}

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

// end checks that all that was promised has come.
func (v *v3000Reader) end(number int) error {
	if v.atoms < 0 {
		return faultf(number, "the V3000 table has no COUNTS line")
	}
	if n := len(v.t.atoms); n < v.atoms {
		return faultf(number, "%d atoms promised, %d lines found before the end of the record", v.atoms, n)
	}
	if n := len(v.t.bonds); n < v.bonds {
		return faultf(number, "%d bonds promised, %d lines found before the end of the record", v.bonds, n)
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
