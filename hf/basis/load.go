package basis

import (
	"bytes"
	"compress/gzip"
	"embed"
	"encoding/json"
	"fmt"
	"io"
	"maps"
	"slices"
	"strconv"
	"strings"
	"sync"
)

//go:embed data/*.json data/*.json.gz
var files embed.FS

// known lists every set: its published name and its decoder, which runs once.
var known = []struct {
	name string
	load func() (*Set, error)
}{
	{"STO-3G", once("sto-3g")},
	{"MINIS", once("minis")},
	{"MINIX", once("minix")},
	{"6-31G", once("6-31g")},
	{"6-31G*", once("6-31gs")},
	{"6-31G**", once("6-31gss")},
	{"def2-SV(P)", once("def2-sv-p")},
	{"def2-SVP", once("def2-svp")},
	{"def2-TZVP", once("def2-tzvp")},
	{"def2-TZVPP", once("def2-tzvpp")},
}

// Names returns the published names of all sets, smallest first.
func Names() []string {
	var out []string
	for _, k := range known {
		out = append(out, k.name)
	}
	return out
}

// Load returns the set of that name. Case and hyphens do not matter, and the
// polarisation marks may be written out: 6-31G(d) and 6-31gs are 6-31G*,
// 6-31G(d,p) and 6-31gss are 6-31G**, def2-SV-P is def2-SV(P).
func Load(name string) (*Set, error) {
	for _, k := range known {
		if plain(k.name) == plain(name) {
			return k.load()
		}
	}
	return nil, fmt.Errorf("no basis set %q; there are %s", name, strings.Join(Names(), ", "))
}

// plain brings the spellings of one name together.
func plain(name string) string {
	s := strings.ToLower(strings.TrimSpace(name))
	s = strings.ReplaceAll(s, "def2-sv-p", "def2-sv(p)")
	s = strings.ReplaceAll(s, "(d,p)", "**")
	s = strings.ReplaceAll(s, "(d)", "*")
	s = strings.NewReplacer("-", "", "_", "", " ", "").Replace(s)
	switch s {
	case "631gs":
		return "631g*"
	case "631gss":
		return "631g**"
	}
	return s
}

func once(file string) func() (*Set, error) {
	return sync.OnceValues(func() (*Set, error) {
		text, err := read(file)
		if err == nil {
			var s *Set
			if s, err = decode(text); err == nil {
				return s, nil
			}
		}
		return nil, fmt.Errorf("basis: %s: %w", file, err)
	})
}

// read returns the text of a data file, which may be packed.
func read(file string) ([]byte, error) {
	text, err := files.ReadFile("data/" + file + ".json")
	if err == nil {
		return text, nil
	}
	packed, err := files.Open("data/" + file + ".json.gz")
	if err != nil {
		return nil, err
	}
	defer packed.Close()
	z, err := gzip.NewReader(packed)
	if err != nil {
		return nil, err
	}
	return io.ReadAll(z)
}

// fileSet is a data file as it stands.
type fileSet struct {
	Schema, Name, Role, Description, Revision, Source string

	References map[string]string
	Elements   map[string]fileElement
}

type fileElement struct {
	Symbol        string
	ReferenceKeys []string `json:"reference_keys"`
	Composition   string
	Shells        []fileShell     `json:"electron_shells"`
	ECPElectrons  int             `json:"ecp_electrons"`
	ECPPotentials json.RawMessage `json:"ecp_potentials"`
}

type fileShell struct {
	Harmonic     string `json:"harmonic_type"`
	L            []int  `json:"angular_momentum"`
	Exponents    []float64
	Coefficients [][]float64
}

// decode reads one file. A field that the code does not know is an error, and
// so are a set without its source and a shell that is not one contraction.
func decode(text []byte) (*Set, error) {
	var f fileSet
	dec := json.NewDecoder(bytes.NewReader(text))
	dec.DisallowUnknownFields()
	if err := dec.Decode(&f); err != nil {
		return nil, err
	}
	if f.Source == "" || f.Name == "" || f.Schema != "torsieve-basis/1" {
		return nil, fmt.Errorf("no name, no source or not schema torsieve-basis/1")
	}
	s := &Set{Name: f.Name, elements: map[int][]shell{}, ecp: map[int]int{}}
	for _, key := range slices.Sorted(maps.Keys(f.Elements)) {
		z, err := strconv.Atoi(key)
		if err != nil {
			return nil, fmt.Errorf("element %q: %w", key, err)
		}
		e := f.Elements[key]
		if e.ECPElectrons > 0 {
			s.ecp[z] = e.ECPElectrons
		}
		for _, sh := range e.Shells {
			one, err := sh.check()
			if err != nil {
				return nil, fmt.Errorf("element %s: %w", e.Symbol, err)
			}
			s.elements[z] = append(s.elements[z], one)
		}
	}
	return s, nil
}

func (f fileShell) check() (shell, error) {
	if len(f.L) != 1 || len(f.Coefficients) != 1 || len(f.Coefficients[0]) != len(f.Exponents) || len(f.Exponents) == 0 {
		return shell{}, fmt.Errorf("want one angular momentum and one contraction a shell")
	}
	for _, a := range f.Exponents {
		if !(a > 0) {
			return shell{}, fmt.Errorf("exponent %g is not positive", a)
		}
	}
	cartesian := f.Harmonic == "cartesian" && f.L[0] >= 2
	return shell{l: f.L[0], exps: f.Exponents, coefs: f.Coefficients[0], cartesian: cartesian}, nil
}
