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
