package main

import (
	"bytes"
	"flag"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

var update = flag.Bool("update", false, "write the golden files anew")

// Golden files hold what the program prints, whole, for inputs that show its
// manners.
func TestGolden(t *testing.T) {
	for _, tc := range []struct {
		name  string
		code  int
		stdin string
		args  []string
	}{
		{"unknown-command", exitNothing, "", []string{"frobnicate"}},
		{"unknown-option", exitNothing, "", []string{"screen", "--outt", "run", "a.smi"}},
		{"inspect", exitDone, "CCO ethanol\nC[C@H](N)C(=O)O alanine\nC/C=C/C butene\n", []string{"inspect", "-", "--format", "smi"}},
		{"inspect-bad", exitPartly, "CCO ethanol\nC1CC broken\n\x1b[31mC red\n", []string{"inspect", "-", "--format", "smi"}},
		{"inspect-quiet", exitDone, "CC(N)O unstated\n", []string{"inspect", "-", "--format", "smi", "--quiet"}},
		{"help-relax", exitDone, "", []string{"relax", "--help"}},
	} {
		t.Run(tc.name, func(t *testing.T) {
			var stdout, stderr bytes.Buffer
			if code := run(t.Context(), tc.args, strings.NewReader(tc.stdin), &stdout, &stderr); code != tc.code {
				t.Errorf("exit status %d, want %d", code, tc.code)
			}
			compare(t, filepath.Join("testdata", tc.name+".stdout"), stdout.Bytes())
			compare(t, filepath.Join("testdata", tc.name+".stderr"), stderr.Bytes())
		})
	}
}

func compare(t *testing.T, path string, got []byte) {
	t.Helper()
	if *update {
		if err := os.WriteFile(path, got, 0o644); err != nil {
			t.Fatal(err)
		}
	}
	want, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	if !bytes.Equal(got, want) {
		t.Errorf("%s: got\n%s\nwant\n%s", path, got, want)
	}
}

// Every built-in published value is met by this build.
func TestVerify(t *testing.T) {
	var stdout, stderr bytes.Buffer
	if code := run(t.Context(), []string{"verify"}, strings.NewReader(""), &stdout, &stderr); code != exitDone {
		t.Errorf("exit status %d", code)
	}
	for _, line := range strings.Split(stdout.String(), "\n") {
		if strings.HasPrefix(line, "FAILED") {
			t.Error(line)
		}
	}
	for _, tier := range tierNames {
		if n := strings.Count(stdout.String(), "ok     "+tier); n < 10 {
			t.Errorf("%d values of the tier %s were met, want at least 10", n, tier)
		}
	}
}

// A value that is off is told, and the exit status says so.
func TestVerifyNotices(t *testing.T) {
	checks, err := loadChecks()
	if err != nil {
		t.Fatal(err)
	}
	c := checks[0]
	c.Value++
	got, err := c.compute(t.Context())
	if err != nil {
		t.Fatal(err)
	}
	var out bytes.Buffer
	var tl tally
	if err := c.print(&out, got, nil, &tl); err != nil {
		t.Fatal(err)
	}
	if !strings.HasPrefix(out.String(), "FAILED") || tl.failed != 1 || tl.status() == nil {
		t.Errorf("%s, %+v", out.String(), tl)
	}
}

func TestSizes(t *testing.T) {
	for text, want := range map[string]size{
		"1": 1, "512MB": 512e6, "4GB": 4e9, "4GiB": 4 << 30, "1.5gb": 1.5e9, "2 K": 2000, "0": 0,
	} {
		var s size
		if err := s.UnmarshalText([]byte(text)); err != nil || s != want {
			t.Errorf("%q: %d, %v, want %d", text, s, err, want)
		}
	}
	for _, text := range []string{"", "GB", "-1", "NaN", "1e300", "4 parsecs"} {
		var s size
		if err := s.UnmarshalText([]byte(text)); err == nil {
			t.Errorf("%q is read as %d", text, s)
		}
	}
}

func TestNearest(t *testing.T) {
	words := []string{"temperature", "through", "seed", "salts"}
	for name, want := range map[string]string{"temprature": "temperature", "sed": "seed", "salt": "salts", "basis": "", "x": ""} {
		if got := nearest(name, words); got != want {
			t.Errorf("%q: %q, want %q", name, got, want)
		}
	}
}

// A message from a hostile file cannot steer the terminal.
func TestPrintable(t *testing.T) {
	if got := printable("a\x1b[2Jb\rc\nd\u0085e"); got != "a?[2Jb?c; d?e" {
		t.Errorf("have %q", got)
	}
}
