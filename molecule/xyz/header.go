package xyz

import (
	"fmt"
	"math"
	"strconv"

	"torsieve/internal/textline"
)

// header takes what the comment's keys state.
func (f *Frame) header() (columns, error) {
	var err error
	if f.Charge, err = f.number("charge"); err != nil {
		return columns{}, err
	}
	if f.Multiplicity, err = f.number("multiplicity"); err != nil {
		return columns{}, err
	}
	if m := f.Multiplicity; m != nil && *m < 1 {
		return columns{}, fmt.Errorf("multiplicity %d: want 1 or more", *m)
	}
	if _, ok := f.Keys["Lattice"]; ok {
		f.Warnings = append(f.Warnings, "a periodic cell is stated and ignored")
	}
	return parseProperties(f.Keys["Properties"])
}

// number returns the whole number that a key states, nil without the key.
func (f *Frame) number(key string) (*int, error) {
	text, ok := f.Keys[key]
	if !ok {
		return nil, nil
	}
	v, err := strconv.ParseFloat(text, 64)
	if err != nil || v != math.Trunc(v) || math.Abs(v) > 1e6 {
		return nil, fmt.Errorf("%s=%s is no whole number", key, textline.Quote(text))
	}
	n := int(v)
	return &n, nil
}

// ID is the frame's name: the key id, else a comment without keys, else "".
func (f *Frame) ID() string {
	if id, ok := f.Keys["id"]; ok {
		return textline.Clean(id)
	}
	if len(f.Keys) > 0 {
		return ""
	}
	return f.Comment
}
