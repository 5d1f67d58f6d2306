package dispersion

import (
	"encoding/json"
	"os"
	"path/filepath"
	"testing"

	"torsieve/internal/element"
)

// intermediates is testdata/reference/dispersion/intermediates.json: what a
// separate implementation had on its way to the check values.
type intermediates struct {
	Molecules []struct {
		Name       string
		D3Weights  [][]float64 `json:"d3_weights"`
		D3C6       [][]float64 `json:"d3_c6"`
		EEQBefore  []float64   `json:"eeq_cn_before_cut"`
		EEQAfter   []float64   `json:"eeq_cn_after_cut"`
		V          [][]float64 `json:"d4_scaled_weights_V"`
		DVdCN      [][]float64 `json:"d4_dV_dcn"`
		DVdQ       [][]float64 `json:"d4_dV_dq"`
		C6         [][]float64 `json:"d4_c6"`
		DC6dCN     [][]float64 `json:"d4_dc6_dcn"`
		DC6dQ      [][]float64 `json:"d4_dc6_dq"`
		C6AtZero   [][]float64 `json:"d4_c6_q0_for_atm"`
		GFN2V      [][]float64 `json:"d4_gfn2_scaled_weights_V"`
		GFN2C6     [][]float64 `json:"d4_gfn2_c6"`
		EEQCharges []float64   `json:"eeq_charges"`
	}
	Polarizabilities map[string]struct{ EEQ, GFN2 polarizability } `json:"reference_polarizabilities"`
	C6               map[string]struct{ EEQ, GFN2 [][]float64 }    `json:"reference_c6"`
}

type polarizability struct {
	First []float64 `json:"alpha_first_frequency"`
	AtOne []float64 `json:"alpha_at_frequency_1.0"`
}

func readIntermediates(t *testing.T) *intermediates {
	t.Helper()
	data, err := os.ReadFile(filepath.Join(referenceFolder, "intermediates.json"))
	if err != nil {
		t.Fatal(err)
	}
	in := new(intermediates)
	if err := json.Unmarshal(data, in); err != nil {
		t.Fatal(err)
	}
	if len(in.Molecules) != 4 || len(in.Polarizabilities) != 10 || len(in.C6) != 4 {
		t.Fatal("intermediates.json is not complete")
	}
	return in
}

// nearMatrix compares row by row; values have twelve or thirteen digits, so the
// tolerance is relative to the largest of a row.
func nearMatrix(t *testing.T, what string, got func(row int) []float64, want [][]float64) {
	t.Helper()
	if len(want) == 0 {
		t.Errorf("%s: no check values", what)
	}
	for i, row := range want {
		largest := 1e-3
		for _, v := range row {
			largest = max(largest, v, -v)
		}
		near(t, what, got(i), row, 3e-12*largest)
	}
}

func TestIntermediatesD3(t *testing.T) {
	for _, want := range readIntermediates(t).Molecules {
		m := find(t, want.Name)
		d := NewD3(m.numbers(), HF)
		d.Energy(m.coordinates(), nil)
		nearMatrix(t, want.Name+" D3 weights", func(a int) []float64 { return d.w[d.in.offset[a]:d.in.offset[a+1]] }, want.D3Weights)
		nearMatrix(t, want.Name+" D3 C6", func(a int) []float64 { return row(d.in, a, d.w) }, want.D3C6)
	}
}

// row returns the C6 of atom a with every atom.
func row(in *interpolation, a int, v []float64) []float64 {
	out := make([]float64, len(in.kind))
	for b := range out {
		out[b], _, _ = in.coefficient(a, b, v, v)
	}
	return out
}

// slopeRow returns d C6(a, b) / d (number of atom a), for every b.
func slopeRow(in *interpolation, a int, v, dv []float64) []float64 {
	out := make([]float64, len(in.kind))
	for b := range out {
		_, out[b], _ = in.coefficient(a, b, v, dv)
	}
	return out
}

func TestIntermediatesD4(t *testing.T) {
	for _, want := range readIntermediates(t).Molecules {
		m := find(t, want.Name)
		s := NewD4EEQ(m.numbers())
		if _, err := s.Energy(m.coordinates(), m.Charge, nil); err != nil {
			t.Fatal(err)
		}
		near(t, want.Name+" charges", s.q, want.EEQCharges, 1e-12)
		near(t, want.Name+" EEQ coordination", s.eeq.count, want.EEQAfter, 1e-11)
		before := make([]float64, len(m.Symbols))
		s.eeq.cn.update(&s.eeq.pairs, before)
		near(t, want.Name+" EEQ coordination before the bound", before, want.EEQBefore, 1e-11)

		d := s.d4
		part := func(v []float64) func(int) []float64 {
			return func(a int) []float64 { return v[d.in.offset[a]:d.in.offset[a+1]] }
		}
		nearMatrix(t, want.Name+" V", part(d.v), want.V)
		nearMatrix(t, want.Name+" dV/dCN", part(d.dvdcn), want.DVdCN)
		nearMatrix(t, want.Name+" dV/dq", part(d.dvdq), want.DVdQ)
		nearMatrix(t, want.Name+" C6", func(a int) []float64 { return row(d.in, a, d.v) }, want.C6)
		nearMatrix(t, want.Name+" C6 at charge 0", func(a int) []float64 { return row(d.in, a, d.v0) }, want.C6AtZero)
		nearMatrix(t, want.Name+" dC6/dCN", func(a int) []float64 { return slopeRow(d.in, a, d.v, d.dvdcn) }, want.DC6dCN)
		nearMatrix(t, want.Name+" dC6/dq", func(a int) []float64 { return slopeRow(d.in, a, d.v, d.dvdq) }, want.DC6dQ)
	}
}

func TestIntermediatesGFN2(t *testing.T) {
	for _, want := range readIntermediates(t).Molecules {
		m := find(t, want.Name)
		d := NewD4(m.numbers())
		d.Update(m.coordinates())
		d.scale(m.Mulliken)
		nearMatrix(t, want.Name+" V", func(a int) []float64 { return d.v[d.in.offset[a]:d.in.offset[a+1]] }, want.GFN2V)
		nearMatrix(t, want.Name+" C6", func(a int) []float64 { return row(d.in, a, d.v) }, want.GFN2C6)
	}
}

func TestReferencePolarizabilities(t *testing.T) {
	table := d4Table()
	one := -1
	for k, w := range table.Frequency {
		if w == 1 {
			one = k
		}
	}
	for symbol, want := range readIntermediates(t).Polarizabilities {
		z, _ := element.Number(symbol)
		for _, tc := range []struct {
			model chargeModel
			want  polarizability
		}{{eeqModel, want.EEQ}, {mullikenModel, want.GFN2}} {
			var first, atOne []float64
			for i := range table.Elements[z] {
				alpha := table.polarizability(&table.Elements[z][i], tc.model)
				first, atOne = append(first, alpha[0]), append(atOne, alpha[one])
			}
			near(t, symbol+" static", first, tc.want.First, 1e-10)
			near(t, symbol+" at 1 hartree", atOne, tc.want.AtOne, 1e-10)
		}
	}
}

func TestReferenceCoefficients(t *testing.T) {
	for name, want := range readIntermediates(t).C6 {
		for _, pair := range []struct {
			name   string
			za, zb int
		}{{"H-H", 1, 1}, {"C-H", 6, 1}, {"C-C", 6, 6}, {"O-C", 8, 6}} {
			if pair.name != name {
				continue
			}
			for _, tc := range []struct {
				model chargeModel
				want  [][]float64
			}{{eeqModel, want.EEQ}, {mullikenModel, want.GFN2}} {
				c6 := d4Table().coefficients(pair.za, pair.zb, tc.model)
				columns := len(tc.want[0])
				nearMatrix(t, name, func(i int) []float64 { return c6[i*columns : (i+1)*columns] }, tc.want)
			}
		}
	}
}
