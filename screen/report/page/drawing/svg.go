package drawing

import (
	"fmt"
	"math"
	"strconv"
	"strings"
)

// Sizes in units of the picture; a bond is scale long.
const (
	scale    = 26.0
	margin   = 25.0
	font     = 13.0
	gap      = 4.2 // between the lines of a double bond
	wide     = 3.6 // half the broad end of a wedge
	subShift = 3.5
)

// SVG returns the drawing as an element of its own. Colours come from the style
// sheet: atoms have the class of their element (e7, e8, ...), all else the colour
// of the text, and spots behind the atoms, which a style sheet hides or shows.
// title is told to readers that do not see.
func (d Drawing) SVG(title string) string {
	var b strings.Builder
	low, high := d.extent()
	w, h := (high[0]-low[0])*scale+2*margin, (high[1]-low[1])*scale+2*margin
	place := func(a Atom) [2]float64 {
		return [2]float64{(a.X-low[0])*scale + margin, (high[1]-a.Y)*scale + margin}
	}
	fmt.Fprintf(&b, `<svg class="structure" role="img" aria-label="%s" viewBox="0 0 %s %s" width="%s" height="%s">`,
		escape(title), num(w), num(h), num(w), num(h))
	b.WriteString(`<g class="spots">`)
	for _, a := range d.Atoms {
		p := place(a)
		fmt.Fprintf(&b, `<circle data-a="%d" cx="%s" cy="%s" r="9"/>`, a.Of, num(p[0]), num(p[1]))
	}
	b.WriteString(`</g>`)
	b.WriteString(`<g class="bonds" fill="none" stroke="currentColor" stroke-width="1.5" stroke-linecap="round">`)
	for _, bond := range d.Bonds {
		d.writeBond(&b, bond, place)
	}
	b.WriteString(`</g>`)
	fmt.Fprintf(&b, `<g class="labels" fill="currentColor" font-family="sans-serif" font-size="%s">`, num(font))
	for _, a := range d.Atoms {
		if !a.Label.Empty() {
			writeLabel(&b, a.Label, place(a))
		}
	}
	b.WriteString(`</g></svg>`)
	return b.String()
}

func (d Drawing) extent() (low, high [2]float64) {
	low, high = [2]float64{math.Inf(1), math.Inf(1)}, [2]float64{math.Inf(-1), math.Inf(-1)}
	for _, a := range d.Atoms {
		for k, v := range [2]float64{a.X, a.Y} {
			low[k], high[k] = math.Min(low[k], v), math.Max(high[k], v)
		}
	}
	if len(d.Atoms) == 0 {
		return [2]float64{}, [2]float64{}
	}
	return low, high
}

// writeBond draws the lines of a bond, kept clear of labels.
func (d Drawing) writeBond(b *strings.Builder, bond Bond, place func(Atom) [2]float64) {
	p, q := place(d.Atoms[bond.A]), place(d.Atoms[bond.B])
	dx, dy := q[0]-p[0], q[1]-p[1]
	r := math.Max(math.Hypot(dx, dy), 1e-6)
	ux, uy := dx/r, dy/r
	p0, q0 := p, q
	p = clearOf(p, ux, uy, d.Atoms[bond.A].Label)
	q = clearOf(q, -ux, -uy, d.Atoms[bond.B].Label)
	nx, ny := uy, -ux // to the left on paper, where y points down
	if bond.Note != "" {
		fmt.Fprintf(b, `<text class="note" stroke="none" fill="currentColor" font-family="sans-serif" font-size="9" text-anchor="middle" x="%s" y="%s">%s</text>`,
			num((p0[0]+q0[0])/2+9*nx), num((p0[1]+q0[1])/2+9*ny+3), bond.Note)
	}
	switch {
	case bond.Mark == Wedge:
		fmt.Fprintf(b, `<path fill="currentColor" stroke-width=".6" stroke-linejoin="round" d="M%s %sL%s %sL%s %sz"/>`,
			num(p[0]), num(p[1]), num(q[0]+wide*nx), num(q[1]+wide*ny), num(q[0]-wide*nx), num(q[1]-wide*ny))
	case bond.Mark == Hash:
		writeHash(b, p, q, nx, ny)
	case bond.Order == 2 && bond.Side == 0:
		line(b, shift(p, nx, ny, gap/2), shift(q, nx, ny, gap/2))
		line(b, shift(p, nx, ny, -gap/2), shift(q, nx, ny, -gap/2))
	case bond.Order == 2:
		line(b, p, q)
		off := gap * bond.Side
		line(b, shift(inner(p, p0, ux, uy), nx, ny, off), shift(inner(q, q0, -ux, -uy), nx, ny, off))
	case bond.Order == 3:
		for _, off := range []float64{-gap * 0.8, 0, gap * 0.8} {
			line(b, shift(p, nx, ny, off), shift(q, nx, ny, off))
		}
	default:
		line(b, p, q)
	}
}

// inner shortens the second line of a double bond unless a label did already.
func inner(p, corner [2]float64, ux, uy float64) [2]float64 {
	if p != corner {
		return p
	}
	return shift(p, ux, uy, gap*0.75)
}

// clearOf moves the end of a bond out of the label at it.
func clearOf(p [2]float64, ux, uy float64, l Label) [2]float64 {
	if l.Empty() {
		return p
	}
	room := 7.5 + 1.5*math.Abs(ux)*float64(len(l.Symbol)-1)*2
	behind := ux > 0.3 && !l.Reversed || ux < -0.3 && l.Reversed
	if behind && (l.Hydrogens > 0 || l.Charge != "") {
		room += 6
	}
	return shift(p, ux, uy, room)
}

func shift(p [2]float64, ux, uy, by float64) [2]float64 {
	return [2]float64{p[0] + ux*by, p[1] + uy*by}
}

func line(b *strings.Builder, p, q [2]float64) {
	fmt.Fprintf(b, `<path d="M%s %sL%s %s"/>`, num(p[0]), num(p[1]), num(q[0]), num(q[1]))
}

// writeHash draws rungs that grow toward the far end.
func writeHash(b *strings.Builder, p, q [2]float64, nx, ny float64) {
	const rungs = 6
	b.WriteString(`<path stroke-width="1.2" d="`)
	for k := 1; k <= rungs; k++ {
		f := float64(k) / rungs
		x, y := p[0]+(q[0]-p[0])*f, p[1]+(q[1]-p[1])*f
		fmt.Fprintf(b, "M%s %sL%s %s", num(x+wide*f*nx), num(y+wide*f*ny), num(x-wide*f*nx), num(y-wide*f*ny))
	}
	b.WriteString(`"/>`)
}

// writeLabel writes the symbol on the atom, and its hydrogens and charge to the
// side where no bonds are.
func writeLabel(b *strings.Builder, l Label, p [2]float64) {
	const half = font * 0.36 // of a capital letter
	y := p[1] + font*0.36
	hydrogens := ""
	if l.Hydrogens > 0 {
		hydrogens = "H"
		if l.Hydrogens > 1 {
			hydrogens += fmt.Sprintf(`<tspan dy="%s" font-size="9">%d</tspan><tspan dy="-%s">&#8203;</tspan>`, num(subShift), l.Hydrogens, num(subShift))
		}
	}
	symbol := l.Symbol
	if l.Isotope > 0 {
		symbol = fmt.Sprintf(`<tspan dy="-4" font-size="9">%d</tspan><tspan dy="4">%s</tspan>`, l.Isotope, symbol)
	}
	charge := ""
	if l.Charge != "" {
		charge = fmt.Sprintf(`<tspan dy="-4" font-size="10">%s</tspan>`, l.Charge)
	}
	anchor, x, text := "start", p[0]-half, symbol+hydrogens+charge
	if len(l.Symbol) > 1 {
		x -= 3
	}
	if l.Reversed {
		anchor, x, text = "end", p[0]+half, charge+`<tspan dy="0">`+hydrogens+"</tspan>"+symbol
		if charge != "" {
			text = charge + `<tspan dy="4">` + hydrogens + "</tspan>" + symbol
		}
	}
	fmt.Fprintf(b, `<text class="e%d" text-anchor="%s" x="%s" y="%s">%s</text>`, l.Number, anchor, num(x), num(y), text)
}

func num(v float64) string { return strconv.FormatFloat(math.Round(v*10)/10, 'f', -1, 64) }

var escaper = strings.NewReplacer("&", "&amp;", "<", "&lt;", ">", "&gt;", `"`, "&#34;", "'", "&#39;")

func escape(text string) string { return escaper.Replace(text) }
