package handbook

import (
	"fmt"
	"math"
	"strings"
)

const legend = `Energies in kcal/mol, angles in degrees; a value is the shape named first above the other. Shapes come from the search and are relaxed in the
force field or by GFN2-xTB; HF-3c is a single point at the geometry of GFN2-xTB. m: the handbook value is from memory, not looked up. †: the
search led to no such shape, so it was started there. Many facts are measured enthalpies or free energies, A values and anomeric effects those
of solutions; the tiers give electronic energies in the gas (A values: with the rotamers' populations at 298 K).
within: the value misses the fact by the fact's uncertainty and the tier's known error, or less; beyond: by up to twice the known error; outside: by
more; absent: the tier has no such minimum; -: no value, or no known error.
`

// markdown is the table of all rows, with what is known of the tiers' errors.
func markdown(rows []row) string {
	var b strings.Builder
	fmt.Fprint(&b, legend, "\n")
	fmt.Fprintln(&b, "| molecule | quantity | handbook | UFF as published | force field | GFN2-xTB | HF-3c | class | verdict: force field, GFN2-xTB, HF-3c |")
	fmt.Fprintln(&b, "|---|---|---:|---:|---:|---:|---:|---|---|")
	for _, r := range rows {
		f, g, h := r.verdicts()
		fmt.Fprintf(&b, "| %s | %s | %s | %s | %s | %s%s | %s | %s | %s, %s, %s |\n",
			r.fact.Molecule, r.fact.Quantity, r.handbook(), r.show(r.uff.value), r.show(r.field.value),
			r.show(r.quantum.value), map[bool]string{true: "†"}[r.quantum.led], r.show(r.quantum.hf), r.class.name, f, g, h)
	}
	fmt.Fprintln(&b, "\nKnown errors (mean absolute deviation from high-level values, kcal/mol; degrees for angles):")
	fmt.Fprintln(&b, "\n| class | force field | GFN2-xTB | HF-3c | from |")
	fmt.Fprintln(&b, "|---|---:|---:|---:|---|")
	for _, c := range classes {
		fmt.Fprintf(&b, "| %s | %s | %s | %s | %s |\n", c.name, number(c.field, 2), number(c.gfn2, 2), number(c.hf, 2), c.from)
	}
	fmt.Fprintf(&b, "\nForce field: %s.\n", fieldSource)
	return b.String()
}

// handbook is the fact's value; an m marks one from memory.
func (r row) handbook() string {
	s := r.show(r.fact.Value)
	if r.fact.Uncertainty > 0 {
		s += " ± " + r.show(r.fact.Uncertainty)
	}
	if strings.HasPrefix(r.fact.Check, "from memory") {
		s += " m"
	}
	return s
}

// show writes energies with two digits, angles with one, counts with none.
func (r row) show(v float64) string {
	return number(v, map[string]int{"kcal/mol": 2, "deg": 1}[r.fact.Unit])
}

func number(v float64, digits int) string {
	if math.IsNaN(v) {
		return "-"
	}
	if v == 0 || math.Abs(v) < 0.5*math.Pow10(-digits) {
		v = 0 // not -0
	}
	return fmt.Sprintf("%.*f", digits, v)
}

// tally counts the verdicts of each tier.
func tally(rows []row) string {
	counts := map[string]map[verdict]int{field.name: {}, gfn2.name: {}, "HF-3c": {}}
	for _, r := range rows {
		f, g, h := r.verdicts()
		counts[field.name][f]++
		counts[gfn2.name][g]++
		counts["HF-3c"][h]++
	}
	var b strings.Builder
	fmt.Fprintln(&b, "| tier | within | beyond | outside | absent | not judged |")
	fmt.Fprintln(&b, "|---|---:|---:|---:|---:|---:|")
	for _, tier := range []string{field.name, gfn2.name, "HF-3c"} {
		c := counts[tier]
		fmt.Fprintf(&b, "| %s | %d | %d | %d | %d | %d |\n", tier, c[within], c[beyond], c[outside], c[absent], c[silent])
	}
	return b.String()
}
