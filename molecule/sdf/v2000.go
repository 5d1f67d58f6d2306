package sdf

import (
	"strconv"
	"strings"

	"torsieve/internal/textline"
)

// counts are what the counts line of a record promises.
type counts struct {
	atoms, bonds int
	v3000        bool
}

// parseCounts reads the fourth line of a record: aaabbb... in three columns
// each, and the version at its end.
func parseCounts(line string) (counts, bool) {
	if strings.HasSuffix(strings.TrimRight(line, " "), "V3000") {
		return counts{v3000: true}, true
	}
	var c counts
	var err1, err2 error
	c.atoms, err1 = strconv.Atoi(column(line, 0, 3))
	c.bonds, err2 = strconv.Atoi(column(line, 3, 6))
	if err1 != nil || err2 != nil || c.atoms < 0 || c.bonds < 0 {
		return counts{}, false
	}
	// The version stands in columns 34 to 39. Where it is missing (old files)
	// the line must at least go on in the format's own columns.
	if rest := strings.TrimSpace(line[min(6, len(line)):]); rest != "" && !strings.HasSuffix(rest, "V2000") {
		for _, r := range rest {
			if (r < '0' || r > '9') && r != ' ' {
				return counts{}, false
			}
		}
	} else if column(line, 33, 39) != "V2000" && rest != "" {
		return counts{}, false // four-digit numbers have run together
	}
	return c, true
}

// column cuts line[from:to] out of a line that may be shorter, without blanks.
func column(line string, from, to int) string {
	return strings.TrimSpace(line[min(from, len(line)):min(to, len(line))])
}

// readV2000 reads atom and bond lines and the properties.
func (r *Reader) readV2000(t *table, c counts) error {
	massDifference := make([]int, c.atoms)
	for i := range c.atoms {
		line, err := r.tableLine("atoms", c.atoms, i)
		if err != nil {
			return err
		}
		t.atoms = append(t.atoms, tableAtom{valence: -1})
		if massDifference[i], err = t.parseAtom(i, r.lines.Number(), line); err != nil {
			return err
		}
	}
	for k := range c.bonds {
		line, err := r.tableLine("bonds", c.bonds, k)
		if err != nil {
			return err
		}
		if err := t.parseBond(k, r.lines.Number(), line); err != nil {
			return err
		}
	}
	return r.readProperties(t, massDifference)
}

// tableLine returns the next line of a block, or a fault if the record ends.
func (r *Reader) tableLine(what string, promised, have int) (string, error) {
	line, ok := r.lines.Next()
	if !ok {
		return "", faultf(r.lines.Number(), "cut off: %d %s promised, %d lines found before the end of the file", promised, what, have)
	}
	if isDelimiter(line) || strings.HasPrefix(line, "M  END") {
		r.lines.Back()
		return "", faultf(r.lines.Number(), "%d %s promised, %d lines found before the end of the record", promised, what, have)
	}
	return line, nil
}

// parseAtom reads xxxxx.xxxxyyyyy.yyyyzzzzz.zzzz aaaddcccssshhhbbbvvv...mmm.
func (t *table) parseAtom(i, number int, line string) (massDifference int, err error) {
	var x [3]float64
	for k := range x {
		text := column(line, 10*k, 10*k+10)
		if x[k], err = strconv.ParseFloat(text, 64); err != nil {
			return 0, faultf(number, "atom %d: %s is no coordinate; three columns of ten are wanted", i+1, textline.Quote(text))
		}
	}
	if err := t.setPosition(i, number, x); err != nil {
		return 0, err
	}
	if err := t.setSymbol(i, number, column(line, 31, 34)); err != nil {
		return 0, err
	}
	var fields [4]int
	for k, at := range [4][2]int{{34, 36}, {36, 39}, {48, 51}, {60, 63}} {
		text := column(line, at[0], at[1])
		if text == "" {
			continue
		}
		if fields[k], err = strconv.Atoi(text); err != nil {
			return 0, faultf(number, "atom %d: %s in columns %d to %d is no number", i+1, textline.Quote(text), at[0]+1, at[1])
		}
	}
	a := &t.atoms[i]
	switch code := fields[1]; code {
	case 0:
	case 4:
		a.radical = 1
	case 1, 2, 3, 5, 6, 7:
		if err := t.setCharge(i, number, 4-code); err != nil {
			return 0, err
		}
	default:
		return 0, faultf(number, "atom %d: charge code %d, want 0 to 7", i+1, code)
	}
	switch v := fields[2]; {
	case v == 15:
		a.valence = 0
	case v > 0:
		a.valence = v
	}
	a.class = max(0, fields[3])
	return fields[0], nil
}

// parseBond reads 111222tttsss.
func (t *table) parseBond(k, number int, line string) error {
	var fields [4]int
	for i := range fields {
		text := column(line, 3*i, 3*i+3)
		if text == "" && i == 3 {
			continue
		}
		var err error
		if fields[i], err = strconv.Atoi(text); err != nil {
			return faultf(number, "bond %d: %s is no number; columns of three are wanted", k+1, textline.Quote(text))
		}
	}
	m, ok := map[int]mark{0: plain, 1: wedge, 6: hash, 4: wavy, 3: either}[fields[3]]
	if !ok {
		return faultf(number, "bond %d: stereo code %d, want 0, 1, 3, 4 or 6", k+1, fields[3])
	}
	return t.addBond(k+1, number, fields[0], fields[1], fields[2], m)
}
