package page

import (
	"fmt"
	"html/template"
	"strings"

	"torsieve/screen"
)

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
