package generate

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"
)

func onALine(at ...float64) [][]float64 {
	d := make([][]float64, len(at))
	for i, a := range at {
		for _, b := range at {
			d[i] = append(d[i], math.Abs(a-b))
		}
	}
	return d
}

// Points on a line, the greedy choice worked out by hand.
func TestCover(t *testing.T) {
	for _, c := range []struct {
		name     string
		distance [][]float64
		worth    []float64
		limit    int
		want     []int
	}{
		// From 0: the sums of distances saved are 4+5 = 9 for the point at 4
		// (it serves 4 and most of 5), 4+... for 5: 3+5 = 8; then 5 is left.
		{"two clusters", onALine(0, 0.1, 4, 5), []float64{1, 1, 1, 1}, 4, []int{0, 2, 3, 1}},
		{"worth decides", onALine(0, 3, -3), []float64{1, 0.5, 0.9}, 3, []int{0, 2, 1}},
		{"ties go by number", onALine(0, 1, -1), []float64{1, 1, 1}, 3, []int{0, 1, 2}},
		{"limit", onALine(0, 1, 2, 3), []float64{1, 1, 1, 1}, 2, []int{0, 2}},
		{"one point", onALine(0), []float64{1}, 1, []int{0}},
	} {
		if got := cover(c.distance, c.worth, c.limit); !slices.Equal(got, c.want) {
			t.Errorf("%s: %v, want %v", c.name, got, c.want)
		}
	}
}

// The way with bounds picks what looking at every point each time picks.
func TestCoverIsGreedy(t *testing.T) {
	r := rand.New(rand.NewPCG(5, 5))
	const n = 80
	at := make([]float64, n)
	worth := make([]float64, n)
	for k := range at {
		at[k], worth[k] = float64(r.IntN(60)), float64(1+r.IntN(3)) // whole numbers, for ties
	}
	distance := onALine(at...)
	nearest := slices.Clone(distance[0])
	want := []int{0}
	for len(want) < 30 {
		best, most := -1, -1.0
		for k := range n {
			var gain float64
			for i, d := range distance[k] {
				gain += worth[i] * math.Max(0, nearest[i]-d)
			}
			if gain > most && !slices.Contains(want, k) {
				best, most = k, gain
			}
		}
		want = append(want, best)
		for i, d := range distance[best] {
			nearest[i] = math.Min(nearest[i], d)
		}
	}
	if got := cover(distance, worth, 30); !slices.Equal(got, want) {
		t.Errorf("%v, want %v", got, want)
	}
}

func TestLatin(t *testing.T) {
	const n, dimensions = 40, 5
	points := latin(stream(1, "x", streamGrid, 0), n, dimensions)
	for d := range dimensions {
		var seen [n]bool
		for _, p := range points {
			seen[int(p[d]*n)] = true
		}
		for cell, ok := range seen {
			if !ok {
				t.Errorf("dimension %d: no point in cell %d", d, cell)
			}
		}
	}
}

// The finaliser meets the published output of SplitMix64 (S. Vigna,
// splitmix64.c): first numbers for the seeds 0 and 1234567.
func TestMix(t *testing.T) {
	for seed, want := range map[uint64]uint64{0: 0xe220a8397b1dcdaf, 1234567: 6457827717110365317} {
		if got := mix(seed); got != want {
			t.Errorf("mix(%d) = %d, want %d", seed, got, want)
		}
	}
}

func TestStreamsAreApart(t *testing.T) {
	first := map[uint64]bool{}
	for _, id := range []string{"a", "b"} {
		for purpose := range 3 {
			for index := range 3 {
				v := stream(7, id, purpose, index).Uint64()
				if first[v] {
					t.Errorf("stream %s %d %d begins like another", id, purpose, index)
				}
				first[v] = true
				if again := stream(7, id, purpose, index).Uint64(); again != v {
					t.Errorf("stream %s %d %d does not repeat itself", id, purpose, index)
				}
			}
		}
	}
}

// The lottery draws in proportion: of two leaves the one with three times the
// weight comes first about three times as often.
func TestLottery(t *testing.T) {
	s := &search{o: Defaults()}
	leaves := []leaf{{cost: -math.Log(3)}, {cost: 0}}
	wins := 0
	const rounds = 4000
	for k := range uint64(rounds) {
		s.o.Seed = k
		if s.lottery(leaves, 1)[0].cost < 0 {
			wins++
		}
	}
	// 3/4 of 4000, five standard deviations (27) either way.
	if math.Abs(float64(wins)-3000) > 140 {
		t.Errorf("the heavier leaf was drawn %d times of %d, want about 3000", wins, rounds)
	}
}
