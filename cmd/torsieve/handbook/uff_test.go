package handbook

import (
	"encoding/json"
	"math"
	"os"
	"slices"
	"testing"
)

// ownValues are what UFF itself says about facts of the handbook, from an
// independent program: the entry of testdata/reference/uff/conformers.json, its
// place there where the value is a list, and the sign of the question here.
// Acetic acid is left out: the value there has a methyl group on its barrier.
var ownValues = []struct {
	fact, entry, field string
	place              int
	sign               float64
}{
	{"butane gauche", "butane gauche - anti", "uff", 0, 1},
	{"butane gauche angle", "butane gauche - anti", "gauche_dihedral", 0, 1},
	{"pentane tg", "pentane tg, gg, g+g- above tt", "uff", 0, 1},
	{"pentane gg", "pentane tg, gg, g+g- above tt", "uff", 1, 1},
	{"pentane gx", "pentane tg, gg, g+g- above tt", "uff", 2, 1},
	{"cyclohexane twist-boat", "cyclohexane twist-boat - chair", "uff", 0, 1},
	{"cyclohexane boat", "cyclohexane boat (C2v saddle) - chair", "uff", 0, 1},
	{"cyclohexane angle", "cyclohexane chair C-C, C-C-C, C-C-C-C", "uff", 2, 1},
	{"cyclohexane-CH3", "methylcyclohexane axial - equatorial", "uff", 0, 1},
	{"methyl vinyl ether", "methyl vinyl ether s-trans - s-cis (COCC 180 minus 0)", "uff", 0, 1},
	{"methyl formate", "methyl formate E - Z", "uff", 0, 1},
	{"N-methylformamide", "N-methylformamide E - Z (Z: O=C-N-CH3 = 0)", "uff", 0, 1},
	{"N-methylacetamide", "N-methylacetamide E - Z", "uff", 0, 1},
	{"biphenyl twist", "biphenyl twist; energy at 0; at 90", "uff", 0, 1},
	{"difluoroethane", "1,2-difluoroethane gauche - anti", "uff", 0, -1},
}

// checkUFF compares the column of published UFF with UFF's own values, for those
// of the rows that have one.
func checkUFF(t *testing.T, rows []row) {
	t.Helper()
	data, err := os.ReadFile(reference("uff/conformers.json"))
	if err != nil {
		t.Fatal(err)
	}
	var file struct{ Values []map[string]any }
	if err := json.Unmarshal(data, &file); err != nil {
		t.Fatal(err)
	}
	for _, o := range ownValues {
		n := slices.IndexFunc(rows, func(r row) bool { return r.fact.ID == o.fact })
		k := slices.IndexFunc(file.Values, func(v map[string]any) bool { return v["name"] == o.entry })
		if k < 0 {
			t.Fatalf("no entry %q", o.entry)
		}
		if n < 0 {
			continue
		}
		value := file.Values[k][o.field]
		if list, ok := value.([]any); ok {
			value = list[o.place]
		}
		want := o.sign * value.(float64)
		tolerance := map[string]float64{"kcal/mol": 0.02, "deg": 0.1}[rows[n].fact.Unit]
		if got := rows[n].uff.value; !(math.Abs(got-want) <= tolerance) {
			t.Errorf("%s: UFF gives %.3f, its own value is %.3f", o.fact, got, want)
		}
	}
}
