package page

import (
	"math"
	"strconv"

	"torsieve/internal/units"
	"torsieve/screen"
)

// figures is the data that the page draws a ligand from, as JSON. Energies are
// kcal/mol, angles degrees, lengths angstrom.
type figures struct {
	Elements     []int    `json:"elements"`
	Bonds        []int    `json:"bonds"` // atom, atom, order; atoms from 0
	Step         float64  `json:"step"`  // unit of the coordinates
	Coordinates  string   `json:"coordinates"`
	Temperatures []number `json:"temperatures"`
	Conformers   []drawn  `json:"conformers"` // by rank
	Others       []other  `json:"others"`     // left behind, by number
	OthersLeft   int      `json:"others_left_out"`
	Turns        []turn   `json:"turns"`
	Rings        []pucker `json:"rings"`
	FiguresLeft  int      `json:"figures_left_out"`

	shapes [][]int16 // by rank; what Coordinates is made of
}

// drawn is a kept conformer.
type drawn struct {
	Number      int      `json:"number"`
	Family      int      `json:"family"`
	Energies    []number `json:"energies"` // above the lowest of each tier
	Final       number   `json:"final"`
	Populations []number `json:"populations"` // by temperature
	Low         []number `json:"low,omitempty"`
	High        []number `json:"high,omitempty"`
}

// other is a conformer that was left behind.
type other struct {
	Number   int      `json:"number"`
	Energies []number `json:"energies"`
}

// mostOthers is how many of those left behind a page draws.
const mostOthers = 40

// A number is written with as many digits as a figure shows; null for NaN.
type number float64

// MarshalJSON writes four decimals at most.
func (n number) MarshalJSON() ([]byte, error) {
	v := math.Round(float64(n)*1e4) / 1e4
	if math.IsNaN(v) || math.IsInf(v, 0) {
		return []byte("null"), nil
	}
	if v == 0 {
		return []byte("0"), nil // not -0
	}
	return strconv.AppendFloat(nil, v, 'f', -1, 64), nil
}

// figuresOf takes down the first n kept conformers.
func figuresOf(r *screen.Result, zero []float64, n int) *figures {
	f := &figures{
		Elements: r.Mol.Numbers(), Step: stepFor(r, n),
		Bonds: []int{}, Others: []other{}, Turns: []turn{}, Rings: []pucker{}, // a script counts them
	}
	for _, b := range r.Mol.Bonds() {
		f.Bonds = append(f.Bonds, b.A, b.B, b.Order)
	}
	for _, w := range r.Ensembles {
		f.Temperatures = append(f.Temperatures, number(w.Temperature))
	}
	kept := r.Kept[:n]
	for k, i := range kept {
		f.Conformers = append(f.Conformers, drawnOf(r, i, k, zero))
	}
	for i := range r.Conformers {
		c := &r.Conformers[i]
		if c.Rank > 0 {
			continue
		}
		if len(f.Others) == mostOthers {
			f.OthersLeft++
			continue
		}
		f.Others = append(f.Others, other{c.Number, numbers(relative(c, zero))})
	}
	f.shapes = f.pack(r, kept)
	f.turns(r, kept)
	f.rings(r, kept)
	return f
}

func drawnOf(r *screen.Result, i, k int, zero []float64) drawn {
	c := &r.Conformers[i]
	d := drawn{
		Number: c.Number, Family: c.Family, Energies: numbers(relative(c, zero)),
		Final: number((c.Final() - r.Conformers[r.Kept[0]].Final()) / units.KcalPerMol),
	}
	for _, w := range r.Ensembles {
		d.Populations = append(d.Populations, number(w.Populations[k]))
		if w.Bars != nil {
			d.Low, d.High = append(d.Low, number(w.Bars[k].Low)), append(d.High, number(w.Bars[k].High))
		}
	}
	return d
}

func numbers(values []float64) []number {
	out := make([]number, len(values))
	for i, v := range values {
		out[i] = number(v)
	}
	return out
}

func (f *figures) cut(n int) {
	f.shapes = f.shapes[:min(n, len(f.shapes))]
	if n >= len(f.Conformers) {
		return
	}
	f.Conformers = f.Conformers[:n:n]
	for i := range f.Turns {
		f.Turns[i].Angles = f.Turns[i].Angles[:n:n]
	}
	for i := range f.Rings {
		p := &f.Rings[i]
		p.Amplitude, p.Phase = p.Amplitude[:n:n], p.Phase[:n:n]
		if p.Theta != nil {
			p.Theta = p.Theta[:n:n]
		}
	}
	if m := 2 * n; len(f.Others) > m {
		f.OthersLeft += len(f.Others) - m
		f.Others = f.Others[:m:m]
	}
}

// bytes is an upper estimate of the JSON.
func (f *figures) bytes() int {
	tiers := 0
	if len(f.Conformers) > 0 {
		tiers = len(f.Conformers[0].Energies)
	}
	perConformer := 100 + 10*tiers + 24*len(f.Temperatures) + 6*len(f.Turns) + 24*len(f.Rings) + 8*len(f.Elements)
	names := 0
	for _, t := range f.Turns {
		names += 80 + len(t.Name)
	}
	for _, p := range f.Rings {
		names += 100 + len(p.Name)
	}
	return 300 + 4*len(f.Elements) + 5*len(f.Bonds) + names + len(f.Conformers)*perConformer + len(f.Others)*(30+10*tiers)
}
