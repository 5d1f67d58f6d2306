package report

import (
	"encoding/json"
	"fmt"
	"io"
	"maps"
	"slices"
	"strings"
	"time"

	"torsieve/screen"
	"torsieve/screen/report/page"
)

// A Run is run.json: enough to repeat the run, and the times that it took. Times
// stand nowhere else among the outputs but in the log and on the page.
type Run struct {
	Program  string            `json:"program"`
	Version  string            `json:"version"`
	Go       string            `json:"go"`
	Command  []string          `json:"command"`
	Settings map[string]any    `json:"settings"` // every option, as the run used it
	Methods  map[string]string `json:"methods"`  // by tier
	Inputs   []Input           `json:"inputs"`
	Machine  Machine           `json:"machine"`
	Begun    string            `json:"begun"` // RFC 3339
	Ended    string            `json:"ended"`
	Seconds  float64           `json:"seconds"`
	Counts   Counts            `json:"counts"`

	// SecondsByTier sums the units of work over all cores.
	SecondsByTier map[string]float64 `json:"seconds_by_tier"`
	Ligands       []LigandTime       `json:"ligands"`
}

// An Input is a file that was read.
type Input struct {
	File    string `json:"file"`
	Records int    `json:"records"`
	SHA256  string `json:"sha256,omitempty"` // empty for a stream
}

// A Machine is where the run took place.
type Machine struct {
	System    string `json:"system"`
	Processor string `json:"processor"`
	Kernel    string `json:"kernel"` // of the matrix routines
	Cores     int    `json:"cores"`
	Jobs      int    `json:"jobs"`
	Memory    int64  `json:"memory_bytes"` // the limit that the run was given
}

// Counts says how the ligands ended.
type Counts struct {
	Ligands    int `json:"ligands"`
	Done       int `json:"done"`
	Partial    int `json:"partial"`
	Refused    int `json:"refused"`
	Failed     int `json:"failed"`
	Unreadable int `json:"unreadable"`
	Stopped    int `json:"stopped"`
}

// Add counts a ligand.
func (c *Counts) Add(s screen.Status) {
	c.Ligands++
	switch s {
	case screen.Done:
		c.Done++
	case screen.Partial:
		c.Partial++
	case screen.Refused:
		c.Refused++
	case screen.Failed:
		c.Failed++
	case screen.Unreadable:
		c.Unreadable++
	case screen.Stopped:
		c.Stopped++
	}
}

// A LigandTime is what one ligand took, by tier, in seconds of units of work.
type LigandTime struct {
	Ligand  string             `json:"ligand"`
	Status  screen.Status      `json:"status"`
	Seconds map[string]float64 `json:"seconds,omitempty"`
	order   int
}

func timesOf(r *screen.Result) LigandTime {
	t := LigandTime{Ligand: r.Ligand.ID, Status: r.Status, order: r.Ligand.Order}
	for i, took := range r.Took {
		if took > 0 {
			if t.Seconds == nil {
				t.Seconds = map[string]float64{}
			}
			t.Seconds[r.Tiers[i]] = took.Seconds()
		}
	}
	return t
}

// write writes the run as indented JSON; maps come out with sorted keys.
func (r *Run) write(w io.Writer) error {
	r.SecondsByTier = map[string]float64{}
	for _, l := range r.Ligands {
		for tier, s := range l.Seconds {
			r.SecondsByTier[tier] += s
		}
	}
	enc := json.NewEncoder(w)
	enc.SetEscapeHTML(false)
	enc.SetIndent("", "  ")
	return enc.Encode(r)
}

// End writes down when the run ended and how long it took.
func (r *Run) End(now time.Time) {
	r.Ended = now.Format(time.RFC3339)
	if begun, err := time.Parse(time.RFC3339, r.Begun); err == nil {
		r.Seconds = now.Sub(begun).Seconds()
	}
}

// forPage is what the page says of the run. Call it after write, which sums up
// the times.
func (r *Run) forPage() page.Run {
	p := page.Run{
		Version: r.Version, Command: r.Command, Begun: r.Begun, Seconds: r.Seconds,
		Solvent: fmt.Sprint(r.Settings["solvent"]),
		Machine: fmt.Sprintf("%s, %s, %d cores, %d used", r.Machine.System, r.Machine.Processor, r.Machine.Cores, r.Machine.Jobs),
	}
	for _, name := range []string{"forcefield", "semiempirical", "hf"} {
		if method, ran := r.Methods[name]; ran {
			p.Tiers = append(p.Tiers, page.Tier{Name: name, Method: method, Seconds: r.SecondsByTier[name]})
		}
	}
	if len(p.Tiers) < 2 {
		p.Solvent = "none" // the force field knows no solvent
	}
	for _, in := range r.Inputs {
		p.Inputs = append(p.Inputs, page.Input{File: in.File, SHA256: in.SHA256, Records: in.Records})
	}
	for _, name := range slices.Sorted(maps.Keys(r.Settings)) {
		p.Settings = append(p.Settings, page.Setting{Name: name, Value: settingText(r.Settings[name])})
	}
	return p
}

// settingText writes a setting as run.json does; what was not set is "not set".
func settingText(v any) string {
	text, err := json.Marshal(v)
	if err != nil || string(text) == "null" || string(text) == `""` {
		return "not set"
	}
	return strings.Trim(string(text), `"`)
}
