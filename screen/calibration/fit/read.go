package main

import (
	"compress/gzip"
	"encoding/csv"
	"fmt"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"strings"

	"torsieve/internal/units"
)

// A molecule has the energies of its conformers in kcal/mol, relative to their
// mean: those of the reference, and one column for each method asked for.
type molecule struct {
	id            string
	heavy, rotors int
	reference     []float64
	methods       [][]float64
}

// leastConformers that a molecule must have to be counted.
const leastConformers = 4

// read returns the molecules of a set, in the file's order. A conformer that
// lacks one of the columns is left out, and so is then a molecule that has too
// few. A column in hartree comes out in kcal/mol, as its name says.
func read(folder, set, reference string, methods ...string) ([]molecule, error) {
	records, err := readAll(filepath.Join(folder, set+".csv.gz"))
	if err != nil {
		return nil, err
	}
	columns := append([]string{reference}, methods...)
	where := make([]int, len(columns))
	for k, name := range columns {
		if where[k] = slices.Index(records[0], name); where[k] < 0 {
			return nil, fmt.Errorf("%s has no column %s", set, name)
		}
	}
	var out []molecule
	for _, r := range records[1:] {
		m, err := newMolecule(r, len(methods))
		if err != nil {
			return nil, fmt.Errorf("%s: %w", set, err)
		}
		if len(out) == 0 || out[len(out)-1].id != m.id {
			out = append(out, m)
		}
		if err := out[len(out)-1].add(r, columns, where); err != nil {
			return nil, fmt.Errorf("%s: %s: %w", set, m.id, err)
		}
	}
	out = slices.DeleteFunc(out, func(m molecule) bool { return len(m.reference) < leastConformers })
	for i := range out {
		centre(out[i].reference)
		for _, column := range out[i].methods {
			centre(column)
		}
	}
	return out, nil
}

func readAll(path string) (records [][]string, err error) {
	f, err := os.Open(path)
	if err != nil {
		return nil, err
	}
	defer f.Close()
	z, err := gzip.NewReader(f)
	if err != nil {
		return nil, fmt.Errorf("%s: %w", path, err)
	}
	if records, err = csv.NewReader(z).ReadAll(); err != nil {
		return nil, fmt.Errorf("%s: %w", path, err)
	}
	if len(records) < 2 {
		return nil, fmt.Errorf("%s: no records", path)
	}
	return records, nil
}

// newMolecule reads the columns id, conformer, nheavy, nrotatable, with which
// every file begins. Rotors that are not known count as none.
func newMolecule(r []string, methods int) (m molecule, err error) {
	m = molecule{id: r[0], methods: make([][]float64, methods)}
	if m.heavy, err = strconv.Atoi(r[2]); err != nil {
		return m, err
	}
	if r[3] != "" {
		m.rotors, err = strconv.Atoi(r[3])
	}
	return m, err
}

func (m *molecule) add(r, columns []string, where []int) error {
	values := make([]float64, len(columns))
	for k, c := range where {
		if r[c] == "" {
			return nil
		}
		v, err := strconv.ParseFloat(r[c], 64)
		if err != nil {
			return err
		}
		if strings.HasSuffix(columns[k], "_hartree") {
			v /= units.KcalPerMol
		}
		values[k] = v
	}
	m.reference = append(m.reference, values[0])
	for k := range m.methods {
		m.methods[k] = append(m.methods[k], values[k+1])
	}
	return nil
}

func centre(x []float64) {
	first, mean := x[0], 0.0
	for _, v := range x {
		mean += (v - first) / float64(len(x))
	}
	for i := range x {
		x[i] = x[i] - first - mean
	}
}

func conformers(set []molecule) int {
	n := 0
	for _, m := range set {
		n += len(m.reference)
	}
	return n
}
