package page

import (
	"crypto/sha256"
	"embed"
	"encoding/base64"
	"fmt"
	"html/template"
	"io"
	"math"
	"strings"

	"torsieve/screen"
)

//go:embed web assets
var files embed.FS

// programParts are the scripts of the page, in the order in which they run.
var programParts = []string{"svg", "save", "flat", "scene", "levels", "populations", "dials", "conformers", "overview", "start"}

const libraryVersion = "2.5.5"

// A sheet is all that the template prints.
type sheet struct {
	Policy, Reduced  string
	Style            template.CSS
	Library, Program template.JS
	LibraryVersion   string
	LibraryLicence   string
	Run              Run
	RunData          runData
	Counts           counts
	Temperature      string
	Ligands          []entry
}

// runData is what the scripts know of the run.
type runData struct {
	Tiers []string `json:"tiers"` // as a reader calls them
}

// An entry is a ligand with its place on the page.
type entry struct {
	*ligand
	N int
}

// Picture is the structure; we wrote it, and it holds no text but ours, escaped.
func (e entry) Picture() template.HTML { return template.HTML(e.Structure) }

// Detailed says whether the ligand has a part of its own.
func (e entry) Detailed() bool { return e.Structure != "" || len(e.Advice) > 0 }

// FormulaParts is the formula with its numbers set low.
func (e entry) FormulaParts() template.HTML {
	var b strings.Builder
	for _, c := range e.Formula {
		if c >= '0' && c <= '9' {
			b.WriteString("<sub>" + string(c) + "</sub>")
		} else if c < 0x80 && c != '<' && c != '&' {
			b.WriteRune(c)
		}
	}
	return template.HTML(b.String())
}

// Bar draws the population of the first conformer and its bar.
func (e entry) Bar() template.HTML {
	const width = 120.0
	p := e.Population
	svg := fmt.Sprintf(`<svg class="bar" viewBox="0 0 %g 16" width="%g" height="16" aria-hidden="true"><path class="track" d="M0 8h%g"/><path class="fill" d="M0 8h%.1f"/>`,
		width, width, width, width*p.Value)
	if p.Known {
		svg += fmt.Sprintf(`<path class="error" d="M%.1f 3v10M%.1f 3v10M%.1f 8H%.1f"/>`, width*p.Low, width*p.High, width*p.Low, width*p.High)
	}
	return template.HTML(svg + "</svg>")
}

// counts says how the records ended.
type counts struct {
	All, Done int
	Rest      []word
	Words     []screen.Status
}

type word struct {
	N    int
	Word screen.Status
}

func countOf(ligands []*ligand) counts {
	c := counts{All: len(ligands)}
	for _, s := range []screen.Status{screen.Done, screen.Partial, screen.Refused, screen.Failed, screen.Unreadable, screen.Stopped} {
		n := 0
		for _, l := range ligands {
			if l.Status == s {
				n++
			}
		}
		switch {
		case n > 0 && s == screen.Done:
			c.Done = n
			c.Words = append(c.Words, s)
		case n > 0:
			c.Rest = append(c.Rest, word{n, s})
			c.Words = append(c.Words, s)
		}
	}
	return c
}

func write(w io.Writer, run Run, ligands []*ligand, shown int) error {
	s := sheet{
		Style: template.CSS(text("web/page.css")), LibraryVersion: libraryVersion,
		Library: template.JS(text("assets/3dmol/3Dmol-min.js")), Program: template.JS(program()),
		LibraryLicence: licences(),
		Run:            run, Counts: countOf(ligands), Reduced: reduced(shown),
	}
	s.Policy = policy(string(s.Library), string(s.Program))
	for _, t := range run.Tiers {
		s.RunData.Tiers = append(s.RunData.Tiers, tierName(t.Name))
	}
	for n, l := range ligands {
		if l.Data != nil {
			l.Data.fill()
		}
		if s.Temperature == "" && l.Kept > 0 {
			s.Temperature = fmt.Sprintf("%g", l.Temperature)
		}
		s.Ligands = append(s.Ligands, entry{l, n + 1})
	}
	return sheets.ExecuteTemplate(w, "page", s)
}

// licences are those of the library and of what was built into it.
func licences() string {
	all := text("assets/3dmol/LICENSE")
	for _, part := range []string{"pako", "netcdfjs", "iobuffer", "upng-js"} {
		all += "\n" + part + ", built into 3Dmol.js\n\n" + text("assets/3dmol/LICENSE-"+part)
	}
	return all
}

// reduced says what a page of many ligands leaves out.
func reduced(shown int) string {
	switch shown {
	case allowances[0]:
		return ""
	case 0:
		return "There are too many ligands for one page: this one is a list. Everything else stands in conformers.csv and the folder ensembles."
	}
	return fmt.Sprintf("There are many ligands: to keep this page small it shows at most %d conformers of each. All of them stand in conformers.csv and the folder ensembles.", shown)
}

// policy forbids the browser everything but the two scripts of the page, by
// their hashes: no request can leave it, and no text of a file can run.
func policy(scripts ...string) string {
	allowed := ""
	for _, s := range scripts {
		sum := sha256.Sum256([]byte(s))
		allowed += " 'sha256-" + base64.StdEncoding.EncodeToString(sum[:]) + "'"
	}
	return "default-src 'none'; script-src" + allowed + "; style-src 'unsafe-inline'; img-src data: blob:; base-uri 'none'; form-action 'none'"
}

// program joins the parts of the script; none sees more of another than it
// hands over through page.
func program() string {
	var b strings.Builder
	b.WriteString("\"use strict\";\nconst page = {};\n")
	for _, part := range programParts {
		b.WriteString("{\n" + text("web/"+part+".js") + "}\n")
	}
	return b.String()
}

// text returns an embedded file.
func text(name string) string {
	data, err := files.ReadFile(name)
	if err != nil {
		panic(err) // a constant of this package
	}
	return string(data)
}

var sheets = template.Must(template.New("").Funcs(template.FuncMap{
	"percent": percent, "energy": energyText, "duration": duration, "tier": tierName,
	"join": func(parts []string) string { return strings.Join(parts, "; ") },
}).ParseFS(files, "web/*.html"))

func energyText(kcal float64) string {
	if math.IsNaN(kcal) {
		return "–"
	}
	return strings.Replace(fmt.Sprintf("%.2f", kcal), "-", "−", 1)
}

// tierName is how a reader calls a tier.
func tierName(name string) string {
	switch name {
	case "forcefield":
		return "force field"
	case "semiempirical":
		return "semi-empirical"
	case "hf":
		return "Hartree-Fock"
	}
	return name
}

func duration(seconds float64) string {
	switch {
	case seconds < 9.95:
		return fmt.Sprintf("%.1f s", seconds)
	case seconds < 99.5:
		return fmt.Sprintf("%.0f s", seconds)
	case seconds < 5400:
		return fmt.Sprintf("%.0f min", seconds/60)
	}
	return fmt.Sprintf("%.1f h", seconds/3600)
}
