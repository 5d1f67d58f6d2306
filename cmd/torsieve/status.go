package main

import (
	"fmt"
	"io"
	"runtime"
	"text/tabwriter"
	"time"

	"torsieve/screen/report"
	"torsieve/screen/store"
)

// statusCommand says how far a run is; it may be under way.
type statusCommand struct {
	storedOptions `embed:""`
	Jobs          int `help:"Units of work at a time that the rest is reckoned with (default: all cores)." placeholder:"N"`
}

// Run prints what is done, failed and left, and how long the rest will take.
func (c *statusCommand) Run(s *session) error {
	if c.Jobs < 0 {
		return nothing(fmt.Errorf("jobs: want at least 1, have %d", c.Jobs), "")
	}
	return c.view(s.ctx, func(v *store.View, run store.Run) error {
		ligands, err := storedLigands(v, run)
		if err != nil {
			return err
		}
		levels, err := v.Progress()
		if err != nil {
			return nothing(err, "")
		}
		counts, waiting := countsOf(ligands)
		if _, err := fmt.Fprintf(s.stdout, "begun %s by torsieve %s\n%s\n", run.Begun, run.Version, ended(counts, waiting)); err != nil {
			return err
		}
		if err := writeLevels(s.stdout, levels); err != nil {
			return err
		}
		_, err = fmt.Fprintln(s.stdout, rest(ligands, levels, waiting, c.jobs(), time.Now()))
		return err
	})
}

// ended says how many ligands ended, by how.
func ended(c report.Counts, waiting int) string {
	text := fmt.Sprintf("%s: %d done", count(c.Ligands+waiting, "ligand"), c.Done)
	for _, part := range []struct {
		n    int
		what string
	}{{c.Partial, "partial"}, {c.Refused, "refused"}, {c.Failed, "failed"}, {c.Unreadable, "unreadable"}} {
		if part.n > 0 {
			text += fmt.Sprintf(", %d %s", part.n, part.what)
		}
	}
	return text + fmt.Sprintf(", %d waiting", waiting)
}

func (c *statusCommand) jobs() int {
	if c.Jobs == 0 {
		return runtime.GOMAXPROCS(0)
	}
	return c.Jobs
}

func writeLevels(w io.Writer, levels []store.Progress) error {
	t := tabwriter.NewWriter(w, 0, 0, 2, ' ', tabwriter.AlignRight)
	fmt.Fprintln(t, "level\tdone\tfailed\tCPU seconds\t")
	for _, l := range levels {
		fmt.Fprintf(t, "%s\t%d\t%d\t%.1f\t\n", l.Tier, l.Done, l.Failed, l.Seconds)
	}
	return t.Flush()
}

// rest says when the ligands that wait will be done, if each takes what those
// that ended took in the mean.
func rest(ligands []storedLigand, levels []store.Progress, waiting, jobs int, now time.Time) string {
	structures := map[int64]bool{}
	for i := range ligands {
		if ligands[i].ended {
			structures[ligands[i].Structure] = true
		}
	}
	switch {
	case waiting == 0:
		return "nothing is left to do"
	case len(structures) == 0:
		return fmt.Sprintf("%s left; the end cannot be told before the first has ended", count(waiting, "ligand"))
	}
	var seconds float64
	for _, l := range levels {
		seconds += l.Seconds
	}
	left := time.Duration(seconds / float64(len(structures)) * float64(waiting) / float64(jobs) * float64(time.Second))
	return fmt.Sprintf("%s left: about %s with %s, until %s at the earliest, if each takes what the others took in the mean",
		count(waiting, "ligand"), left.Round(time.Second), count(jobs, "job"), now.Add(left).Format("2006-01-02 15:04"))
}
