package sdf

import (
	"strconv"
	"strings"

	"torsieve/internal/textline"
)

// readProperties reads up to M  END. Any M  CHG or M  RAD line voids all charge
// codes of the atom block, M  ISO all mass differences.
func (r *Reader) readProperties(t *table, massDifference []int) error {
	var chargesVoid, massesVoid bool
	for {
		line, ok := r.lines.Next()
		if !ok || isDelimiter(line) || strings.HasPrefix(line, ">") {
			if ok {
				r.lines.Back()
			}
			t.warnf("the line \"M  END\" is missing")
			break
		}
		if strings.HasPrefix(line, "M  END") {
			break
		}
		switch key := line[:min(6, len(line))]; key {
		case "M  CHG", "M  RAD":
			if !chargesVoid {
				chargesVoid = true
				for i := range t.atoms {
					t.atoms[i].charge, t.atoms[i].radical = 0, 0
				}
			}
			set := t.setCharge
			if key == "M  RAD" {
				set = t.setRadical
			}
			if err := t.parsePairs(r.lines.Number(), line, set); err != nil {
				return err
			}
		case "M  ISO":
			massesVoid = true
			if err := t.parsePairs(r.lines.Number(), line, t.setIsotope); err != nil {
				return err
			}
		default:
			if strings.HasPrefix(line, "A  ") || strings.HasPrefix(line, "G  ") {
				r.lines.Next() // the text of an alias or abbreviation
			}
		}
	}
	if massesVoid {
		return nil
	}
	return t.applyDifferences(massDifference)
}

// parsePairs reads "M  XXXnn8 aaa vvv ..." and sets each pair.
func (t *table) parsePairs(number int, line string, set func(atom, line, value int) error) error {
	words := strings.Fields(line[min(6, len(line)):])
	values := make([]int, len(words))
	for i, w := range words {
		v, err := strconv.Atoi(w)
		if err != nil {
			return faultf(number, "%s is no number in a %s line", textline.Quote(w), line[:6])
		}
		values[i] = v
	}
	if len(values) == 0 || len(values) != 1+2*values[0] {
		return faultf(number, "the %s line does not hold the number of pairs that it states", line[:6])
	}
	for i := 1; i < len(values); i += 2 {
		atom := values[i]
		if atom < 1 || atom > len(t.atoms) {
			return faultf(number, "%s names atom %d, there are %d", line[:6], atom, len(t.atoms))
		}
		if err := set(atom-1, number, values[i+1]); err != nil {
			return err
		}
	}
	return nil
}
