package thermo

import (
	"errors"
	"slices"
	"strings"
	"testing"
)

func modesAt(nu ...float64) Modes {
	var m Modes
	for _, v := range nu {
		m.Quanta = append(m.Quanta, v*wavenumber)
	}
	return m
}

// Small imaginary modes count as real ones of the same size, and are counted;
// what is less than noise counts as 1 cm^-1.
func TestSmallImaginaryModes(t *testing.T) {
	m := modesAt(-49, -8, 0, 0.2, 30, 1000)
	quanta, turned, err := m.Real()
	if err != nil || turned != 2 {
		t.Fatalf("%d turned, error %v", turned, err)
	}
	if want := modesAt(49, 8, 1, 1, 30, 1000); !slices.Equal(quanta, want.Quanta) {
		t.Errorf("quanta %v, want %v", quanta, want.Quanta)
	}
	if m.Quanta[0] > 0 {
		t.Error("the modes were changed")
	}
}

// A large one makes the structure a saddle, and the message says what to do.
func TestSaddle(t *testing.T) {
	m := modesAt(-312.4, -90, -10, 500)
	quanta, _, err := m.Real()
	var saddle *SaddleError
	if !errors.As(err, &saddle) || quanta != nil {
		t.Fatalf("error %v", err)
	}
	if !slices.Equal(saddle.Modes, []int{0, 1}) || !slices.Equal(saddle.Quanta, m.Quanta[:2]) {
		t.Errorf("modes %v of quanta %v", saddle.Modes, saddle.Quanta)
	}
	for _, want := range []string{"2 imaginary vibrations", "312i, 90i cm^-1", "relax again"} {
		if !strings.Contains(err.Error(), want) {
			t.Errorf("message %q lacks %q", err, want)
		}
	}
}
