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
