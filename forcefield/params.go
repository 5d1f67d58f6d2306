package forcefield

import (
	"bytes"
	_ "embed"
	"encoding/json"
	"fmt"
	"math"
	"sync"

	"torsieve/internal/units"
)

//go:embed data/types.json
var typesJSON []byte

// A class is an atom type's part in torsions.
type class string

const (
	classNone class = "none" // terminal types and metals
	classSP   class = "sp"
	classSP2  class = "sp2"
	classSP3  class = "sp3"
)

// An atomType is one row of the force field's table, in atomic units.
type atomType struct {
	Name          string
	Number        int // atomic number
	Class         class
	MainGroup     bool
	Radius        float64 // bohr, of a single bond
	Angle         float64 // rad, natural angle at such an atom; see radians
	X             float64 // bohr, distance of the van der Waals minimum
	D             float64 // hartree, depth of its well
	Z             float64 // effective charge, e
	V, U          float64 // hartree, torsion constants of sp3 and sp2 atoms
	Chi           float64 // electronegativity; only ratios count
	group16, sp23 bool
}

// A table finds types by name and by element, in the order of the file.
type table struct {
	byName    map[string]*atomType
	byElement [128][]*atomType
}

// typeTable decodes the embedded table once. The file is part of the program:
// a fault in it is a fault of the build, so it panics.
var typeTable = sync.OnceValue(func() *table {
	var file struct {
		Title, Source string
		Units         map[string]string
		Types         []struct {
			Type, Class           string
			Number                int
			MainGroup             bool `json:"main_group"`
			R, Theta0, X, D, Z, V float64
			U, Chi                float64
		}
	}
	decode("types.json", typesJSON, &file)
	t := &table{byName: map[string]*atomType{}}
	for _, f := range file.Types {
		a := &atomType{
			Name: f.Type, Number: f.Number, Class: class(f.Class), MainGroup: f.MainGroup,
			Radius: f.R * units.Angstrom, Angle: radians(f.Theta0),
			X: f.X * units.Angstrom, D: f.D * units.KcalPerMol, Z: f.Z,
			V: f.V * units.KcalPerMol, U: f.U * units.KcalPerMol, Chi: f.Chi,
		}
		switch f.Number {
		case 8, 16, 34, 52, 84:
			a.group16 = true
		}
		a.sp23 = a.MainGroup && (a.Class == classSP2 || a.Class == classSP3)
		t.byName[a.Name] = a
		t.byElement[a.Number] = append(t.byElement[a.Number], a)
	}
	return t
})

// radians converts degrees so that 90, 120 and 180, which choose the form of a
// bend, come out as the constants that they are compared with.
func radians(degrees float64) float64 {
	switch degrees {
	case 90:
		return math.Pi / 2
	case 120:
		return trigonalAngle
	case 180:
		return math.Pi
	}
	return degrees * math.Pi / 180
}

func decode(name string, data []byte, into any) {
	d := json.NewDecoder(bytes.NewReader(data))
	d.DisallowUnknownFields()
	if err := d.Decode(into); err != nil {
		panic(fmt.Sprintf("forcefield: embedded %s: %v", name, err))
	}
}

// digit returns the type's geometry: '1' linear, '2' or 'R' trigonal, '3'
// tetrahedral, '4' square, '5' and '6' of five and six neighbours; 0 where the
// name has none.
func (a *atomType) digit() byte {
	if len(a.Name) < 3 {
		return 0
	}
	return a.Name[2]
}
