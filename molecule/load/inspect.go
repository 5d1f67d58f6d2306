package load

import (
	"bytes"
	"encoding/json"
	"errors"
	"fmt"
	"strings"

	"torsieve/internal/element"
	"torsieve/molecule"
)

// An Inspection is what was understood of one record, for a line of JSON.
type Inspection struct {
	ID     string
	Record int

	// What a molecule has.
	Formula           string
	Charge            int
	Atoms             int
	HeavyAtoms        int
	Bonds             int // those to hydrogen included
	Rings             int
	AromaticAtoms     int
	StereoCentres     []InspectedCentre // those with a stated configuration
	StereoBonds       []InspectedBond   // likewise
	UnspecifiedStereo int
	RotatableBonds    int
	SMILES            string
	Warnings          []string

	// Or why there is none.
	Line  int
	Error string
}

// An InspectedCentre is a tetrahedral centre; atoms count from 1, neighbour 0
// is the lone pair. Seen from the first neighbour, the others run anticlockwise
// (@) or clockwise (@@).
type InspectedCentre struct {
	Atom       int    `json:"atom"`
	Neighbours [4]int `json:"neighbours"`
	Parity     string `json:"parity"`
}

// An InspectedBond is a double bond: atoms from 1, and whether the two
// substituents are on one side.
type InspectedBond struct {
	Atoms        [2]int `json:"atoms"`
	Substituents [2]int `json:"substituents"`
	Cis          bool   `json:"cis"`
}

// Inspect says what was understood of a record.
func Inspect(r Record) Inspection {
	v := Inspection{ID: r.ID, Record: r.Record, Line: r.Line}
	if r.Err != nil {
		var p *molecule.ParseError
		if errors.As(r.Err, &p) && p.Line > 0 {
			v.Line = p.Line
		}
		v.Error = r.Err.Error()
		return v
	}
	m := r.Mol
	v.Formula, v.Charge = m.Formula(), m.Charge()
	v.Atoms, v.HeavyAtoms, v.Bonds = m.NumAtoms(), m.HeavyAtoms(), len(m.Bonds())
	v.Rings, v.RotatableBonds = m.RingCount(), m.RotatableBonds()
	for _, a := range m.Atoms() {
		if a.Aromatic {
			v.AromaticAtoms++
		}
	}
	for _, c := range m.Centres() {
		if c.Parity != 0 {
			v.StereoCentres = append(v.StereoCentres, inspectCentre(c))
		}
	}
	for _, s := range m.StereoBonds() {
		if s.Known {
			v.StereoBonds = append(v.StereoBonds, InspectedBond{[2]int{s.J + 1, s.K + 1}, [2]int{s.A + 1, s.B + 1}, s.Cis})
		}
	}
	v.UnspecifiedStereo = m.UnspecifiedStereo()
	v.SMILES = m.SMILES()
	v.Warnings = append(append([]string{}, r.Warnings...), doubts(m)...)
	return v
}

func inspectCentre(c molecule.Centre) InspectedCentre {
	out := InspectedCentre{Atom: c.Atom + 1, Parity: "@"}
	if c.Parity < 0 {
		out.Parity = "@@"
	}
	for n, j := range c.Neighbours {
		out.Neighbours[n] = j + 1 // the lone pair, -1, becomes 0
	}
	return out
}

// doubts are facts of a molecule that a chemist wants to be told.
func doubts(m *molecule.Molecule) (texts []string) {
	if names := unspecified(m); len(names) > 0 {
		texts = append(texts, "the configuration is not stated at "+strings.Join(names, ", "))
	}
	if n := len(m.Fragments()); n > 1 {
		texts = append(texts, fmt.Sprintf("there are %d fragments that no bond joins", n))
	}
	if m.Electrons() == 0 {
		texts = append(texts, "there are no electrons")
	} else if mult := m.Multiplicity(); mult > 1 {
		texts = append(texts, fmt.Sprintf("open shell: %d electrons, multiplicity %d", m.Electrons(), mult))
	}
	var seen []string
	for _, a := range m.Atoms() {
		if s := element.Symbol(a.Number); element.IsMetal(a.Number) && !strings.Contains(" "+strings.Join(seen, " ")+" ", " "+s+" ") {
			seen = append(seen, s)
		}
	}
	if len(seen) > 0 {
		texts = append(texts, "it contains metal: "+strings.Join(seen, ", "))
	}
	return texts
}

// unspecified names the stereo elements without a configuration.
func unspecified(m *molecule.Molecule) (names []string) {
	symbol := func(i int) string { return element.Symbol(m.Atom(i).Number) }
	for _, c := range m.Centres() {
		if c.Parity == 0 {
			names = append(names, fmt.Sprintf("atom %d (%s)", c.Atom+1, symbol(c.Atom)))
		}
	}
	for _, s := range m.StereoBonds() {
		if !s.Known {
			names = append(names, fmt.Sprintf("the double bond %d=%d (%s=%s)", s.J+1, s.K+1, symbol(s.J), symbol(s.K)))
		}
	}
	return names
}

// MarshalJSON writes the fields of the one case or of the other.
func (v Inspection) MarshalJSON() ([]byte, error) {
	if v.Error != "" {
		return compact(struct {
			ID     string `json:"id"`
			Record int    `json:"record"`
			Line   int    `json:"line"`
			Error  string `json:"error"`
		}{v.ID, v.Record, v.Line, v.Error})
	}
	return compact(struct {
		ID                string            `json:"id"`
		Record            int               `json:"record"`
		Formula           string            `json:"formula"`
		Charge            int               `json:"charge"`
		Atoms             int               `json:"natoms"`
		HeavyAtoms        int               `json:"heavy_atoms"`
		Bonds             int               `json:"bonds"`
		Rings             int               `json:"rings"`
		AromaticAtoms     int               `json:"aromatic_atoms"`
		StereoCentres     []InspectedCentre `json:"stereo_centres"`
		StereoBonds       []InspectedBond   `json:"stereo_bonds"`
		UnspecifiedStereo int               `json:"unspecified_stereo"`
		RotatableBonds    int               `json:"rotatable_bonds"`
		SMILES            string            `json:"smiles"`
		Warnings          []string          `json:"warnings"`
	}{
		v.ID, v.Record, v.Formula, v.Charge, v.Atoms, v.HeavyAtoms, v.Bonds, v.Rings, v.AromaticAtoms,
		append([]InspectedCentre{}, v.StereoCentres...), append([]InspectedBond{}, v.StereoBonds...),
		v.UnspecifiedStereo, v.RotatableBonds, v.SMILES, append([]string{}, v.Warnings...),
	})
}

// compact is json.Marshal that leaves <, > and & as they are.
func compact(v any) ([]byte, error) {
	var b bytes.Buffer
	enc := json.NewEncoder(&b)
	enc.SetEscapeHTML(false)
	if err := enc.Encode(v); err != nil {
		return nil, err
	}
	return bytes.TrimRight(b.Bytes(), "\n"), nil
}
