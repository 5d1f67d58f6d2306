package smiles

import (
	"encoding/csv"
	"os"
	"strconv"
	"testing"
	"time"
)

func TestScratch(t *testing.T) {
	f, _ := os.Open("/tmp/index.csv")
	rows, _ := csv.NewReader(f).ReadAll()
	for _, r := range rows[1:] {
		start := time.Now()
		m, w, err := Parse(r[2])
		if err != nil {
			t.Errorf("%s %v", r[0], err)
			continue
		}
		text := m.SMILES()
		if len(w) > 0 {
			t.Log(r[0], r[2], w)
		}
		n, _ := strconv.Atoi(r[7])
		if m.RotatableBonds() != n {
			t.Errorf("%s %s rotatable %d want %d", r[0], r[2], m.RotatableBonds(), n)
		}
		if m.Formula() != r[3] {
			t.Errorf("%s formula %s want %s", r[0], m.Formula(), r[3])
		}
		rings, _ := strconv.Atoi(r[8])
		if m.RingCount() != rings {
			t.Errorf("rings")
		}
		st, _ := strconv.Atoi(r[11])
		ez, _ := strconv.Atoi(r[12])
		s, e := 0, 0
		for _, c := range m.Centres() {
			if c.Parity != 0 {
				s++
			}
		}
		for _, c := range m.StereoBonds() {
			if c.Known {
				e++
			}
		}
		if s != st || e != ez || m.UnspecifiedStereo() > 0 {
			t.Errorf("%s %s stereo %d want %d, ez %d want %d, unspecified %d", r[0], r[2], s, st, e, ez, m.UnspecifiedStereo())
		}
		m2, _, err := Parse(text)
		if err != nil || m2.SMILES() != text {
			t.Errorf("%s %s -> %s -> %v %v", r[0], r[2], text, m2.SMILES(), err)
		}
		if d := time.Since(start); d > 5*time.Millisecond {
			t.Log(r[0], d)
		}
	}
}
