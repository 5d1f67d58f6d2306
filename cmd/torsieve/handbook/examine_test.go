package handbook

import (
	"errors"
	"testing"
)

// examine asks all questions about a specimen at all tiers. What fails otherwise
// than by the tier's having no such minimum fails the test.
func examine(t *testing.T, s specimen, all []fact, levels ...level) []row {
	t.Helper()
	from, err := searchFor(t.Context(), s.smiles)
	if err != nil {
		t.Fatal(err)
	}
	rows := make([]row, len(s.questions))
	for n, q := range s.questions {
		unknown := answer{value: none, hf: none}
		rows[n] = row{fact: factNamed(t, all, q.fact), class: q.class, uff: unknown, field: unknown, quantum: unknown}
	}
	for _, l := range levels {
		sub, err := subjectAt(t.Context(), from, l, s.hydrogens(from.m.Numbers()))
		if err != nil {
			t.Fatal(err)
		}
		for n, q := range s.questions {
			a, err := q.ask(t.Context(), sub)
			if err != nil {
				a = answer{value: none, hf: none}
			}
			if err != nil && !errors.Is(err, errNoMinimum) {
				t.Errorf("%s: %s: %v", q.fact, l.name, err)
			}
			rows[n].record(l, a, err)
		}
	}
	return rows
}

func (r *row) record(l level, a answer, err error) {
	switch l.name {
	case uff.name:
		r.uff = a
	case field.name:
		r.field, r.fieldErr = a, err
	case gfn2.name:
		r.quantum, r.quantumErr = a, err
	}
}
