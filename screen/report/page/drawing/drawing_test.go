package drawing

import (
	"bufio"
	"bytes"
	"encoding/xml"
	"errors"
	"fmt"
	"io"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"torsieve/internal/element"
	"torsieve/molecule"
	"torsieve/molecule/load"
	"torsieve/molecule/smiles"
)

// lines are the demo ligands and molecules with every kind of stereo and ring.
func lines(t *testing.T) []string {
	t.Helper()
	f, err := os.Open(filepath.Join("..", "..", "..", "..", "testdata", "demo", "quillwort.smi"))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	list := []string{
		"C[C@H](N)C(=O)O", "C[C@@H](N)C(=O)O", "F[C@](Cl)(Br)I", "C/C=C/C", "C/C=C\\C", "F/C(Cl)=C(Br)/I",
		"C1CC[C@H]2CCCC[C@@H]2C1", "C1CC[C@@H]2CCCC[C@@H]2C1", "OC[C@H]1O[C@@H](O)[C@H](O)[C@@H](O)[C@@H]1O",
		"C[S@](=O)c1ccccc1", "C1CC2CCC1CC2", "C1CC2CC1CC2", "C1C2CC3CC1CC(C2)C3", "c1cc2ccc3cccc4ccc(c1)c2c34",
		"C1CCC2(CC1)OCCO2", "CC(C)(C)c1ccccc1", "[O-][N+](=O)c1ccccc1", "N#Cc1ccccc1", "C=C=C", "O", "C", "[NH4+]", "[2H]OC",
		"CCCCCCCCCC", "C[C@H](O)[C@@H](C)O", "O=S(=O)(NC)c1ccccc1", "C1CCCCCCCCCCC1", "CC#CC",
		"C[C@]12CC[C@H]3[C@@H](CCc4cc(O)ccc34)[C@@H]1CC[C@@H]2O",
	}
	in := bufio.NewScanner(f)
	for in.Scan() {
		list = append(list, strings.Fields(in.Text())[0])
	}
	return list
}

func parse(t *testing.T, text string) *molecule.Molecule {
	t.Helper()
	m, _, err := smiles.Parse(text)
	if err != nil {
		t.Fatalf("%s: %v", text, err)
	}
	return m
}

// A drawing that is written down as a molfile of the plane reads back as the
// same molecule: wedges and double bonds say what the graph says.
func TestDrawingReadsBack(t *testing.T) {
	for _, text := range lines(t) {
		m := parse(t, text)
		d := Of(m)
		back := read(t, text, molfile(m, d))
		if back.SMILES() != m.SMILES() {
			t.Errorf("%s is drawn as %s", m.SMILES(), back.SMILES())
		}
	}
}

// molfile writes a drawing as V2000 by the columns of the published CTfile
// formats, hydrogens that are not drawn left to the reader.
func molfile(m *molecule.Molecule, d Drawing) string {
	var b strings.Builder
	fmt.Fprintf(&b, "drawing\n  test              2D\n\n%3d%3d  0  0  1  0  0  0  0  0999 V2000\n", len(d.Atoms), len(d.Bonds))
	for _, a := range d.Atoms {
		fmt.Fprintf(&b, "%10.4f%10.4f%10.4f %-3s 0  0  0  0  0  0  0  0  0  0  0  0\n", a.X, a.Y, 0.0, element.Symbol(m.Atom(a.Of).Number))
	}
	for _, bond := range d.Bonds {
		fmt.Fprintf(&b, "%3d%3d%3d%3d\n", bond.A+1, bond.B+1, bond.Order, map[Mark]int{Plain: 0, Wedge: 1, Hash: 6}[bond.Mark])
	}
	for n, a := range d.Atoms {
		if q := m.Atom(a.Of).Charge; q != 0 {
			fmt.Fprintf(&b, "M  CHG  1%4d%4d\n", n+1, q)
		}
		if iso := m.Atom(a.Of).Isotope; iso != 0 {
			fmt.Fprintf(&b, "M  ISO  1%4d%4d\n", n+1, iso)
		}
	}
	return b.String() + "M  END\n"
}

func read(t *testing.T, name, text string) *molecule.Molecule {
	t.Helper()
	path := filepath.Join(t.TempDir(), "drawing.mol")
	if err := os.WriteFile(path, []byte(text), 0o644); err != nil {
		t.Fatal(err)
	}
	r, err := load.Open(path, load.Options{})
	if err != nil {
		t.Fatal(err)
	}
	defer r.Close()
	rec, err := r.Next()
	if err != nil || rec.Err != nil {
		t.Fatalf("%s: %v\n%s", name, errors.Join(err, rec.Err), text)
	}
	return rec.Mol
}

// Small rings are regular, bonds have one length, nothing lies on top of
// anything else. Cages are drawn across and left out.
func TestShapesOnPaper(t *testing.T) {
	cages := map[string]bool{"C1CC2CCC1CC2": true, "C1CC2CC1CC2": true, "C1C2CC3CC1CC(C2)C3": true}
	for _, text := range lines(t) {
		d := Of(parse(t, text))
		if cages[text] {
			continue
		}
		for _, b := range d.Bonds {
			if r := distance(d.Atoms[b.A], d.Atoms[b.B]); math.Abs(r-1) > 0.2 {
				t.Errorf("%s: bond %d-%d is %.2f long", text, b.A+1, b.B+1, r)
			}
		}
		for i := range d.Atoms {
			for j := range i {
				if r := distance(d.Atoms[i], d.Atoms[j]); r < 0.45 {
					t.Errorf("%s: atoms %d and %d are %.2f apart", text, i+1, j+1, r)
				}
			}
		}
	}
	benzene := Of(parse(t, "c1ccccc1"))
	for i := range 3 {
		if r := distance(benzene.Atoms[i], benzene.Atoms[i+3]); math.Abs(r-2) > 1e-9 {
			t.Errorf("the diagonal of a regular hexagon is 2 sides, not %g", r)
		}
	}
}

func distance(a, b Atom) float64 { return math.Hypot(a.X-b.X, a.Y-b.Y) }

func TestSVGIsXMLAndTheSameEachTime(t *testing.T) {
	for _, text := range lines(t) {
		svg := Of(parse(t, text)).SVG(`<script>"&'`)
		if again := Of(parse(t, text)).SVG(`<script>"&'`); again != svg {
			t.Errorf("%s is drawn differently the second time", text)
		}
		if strings.Contains(svg, "<script") || strings.Contains(svg, "NaN") {
			t.Errorf("%s: %s", text, svg)
		}
		dec := xml.NewDecoder(bytes.NewReader([]byte(svg)))
		for {
			if _, err := dec.Token(); errors.Is(err, io.EOF) {
				break
			} else if err != nil {
				t.Fatalf("%s: %v", text, err)
			}
		}
	}
}
