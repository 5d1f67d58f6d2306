package gauss

import (
	"encoding/json"
	"math"
	"os"
	"testing"
)

// Values: testdata/reference/hf/boys.json (series in 60-digit arithmetic).
func TestBoys(t *testing.T) {
	text, err := os.ReadFile("../../testdata/reference/hf/boys.json")
	if err != nil {
		t.Fatal(err)
	}
	var file struct{ Values [][3]float64 }
	if err := json.Unmarshal(text, &file); err != nil {
		t.Fatal(err)
	}
	if len(file.Values) < 200 {
		t.Fatalf("only %d values", len(file.Values))
	}
	for _, v := range file.Values {
		n, x, want := int(v[0]), v[1], v[2]
		for top := n; top <= min(n+3, boysMaxN); top++ { // by Taylor series, and from above
			f := make([]float64, top+1)
			Boys(f, x)
			if math.Abs(f[n]-want) > 2e-15 {
				t.Errorf("F_%d(%g) = %.17g, want %.17g (top %d)", n, x, f[n], want, top)
			}
		}
	}
}

// Between the points of the file the fast way meets the series.
func TestBoysMatchesSeries(t *testing.T) {
	for x := 0.0; x < boysEnd+2; x += 0.0137 {
		var got, want [boysMaxN + 1]float64
		Boys(got[:], x)
		boysSeries(want[:], x)
		for n := range got {
			if math.Abs(got[n]-want[n]) > 3e-15 {
				t.Fatalf("F_%d(%g) = %.17g, series %.17g", n, x, got[n], want[n])
			}
		}
	}
}
