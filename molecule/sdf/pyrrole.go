package sdf

import (
	"fmt"
	"math/bits"
	"strings"

	"torsieve/molecule"
)

// mostPyrroles bounds the aromatic nitrogens that are tried.
const mostPyrroles = 10

// buildWithPyrroles tries again where aromatic bonds (type 4) have no Kekule
// form: a table without hydrogens cannot show which nitrogens of its aromatic
// rings hold one. The fewest that help are taken if there is one such molecule
// only; first is the error to be returned if not.
func (t *table) buildWithPyrroles(form shape, first error) (*molecule.Molecule, []string, error) {
	places := t.pyrrolePlaces()
	if len(places) == 0 || len(places) > mostPyrroles {
		return nil, nil, first
	}
	var found []*molecule.Molecule
	var warnings []string
	for count := 1; count <= len(places) && len(found) == 0; count++ {
		for set := range uint(1) << len(places) {
			if bits.OnesCount(set) != count {
				continue
			}
			m, w, err := t.buildWith(chosen(places, set), form)
			if err != nil || len(found) > 0 && m.SMILES() == found[0].SMILES() {
				continue
			}
			found = append(found, m)
			w = append(w, fmt.Sprintf("aromatic nitrogen without a drawn hydrogen: one is added at atom %s", numbers(chosen(places, set))))
			warnings = w
		}
	}
	switch len(found) {
	case 0:
		return nil, nil, first
	case 1:
		return found[0], warnings, nil
	}
	return nil, nil, faultf(0, "the aromatic rings leave open which of the nitrogens %s holds a hydrogen: %d tautomers fit", numbers(places), len(found))
}

// pyrrolePlaces are nitrogens with two aromatic bonds and no others.
func (t *table) pyrrolePlaces() (places []int) {
	aromatic, others := make([]int, len(t.atoms)), make([]int, len(t.atoms))
	for _, b := range t.bonds {
		count := others
		if b.kind == 4 {
			count = aromatic
		}
		count[b.a]++
		count[b.b]++
	}
	for i, a := range t.atoms {
		if a.number == 7 && a.charge == 0 && a.valence < 0 && aromatic[i] == 2 && others[i] == 0 {
			places = append(places, i)
		}
	}
	return places
}

func (t *table) buildWith(pyrroles []int, form shape) (*molecule.Molecule, []string, error) {
	b, err := t.builder(pyrroles)
	if err != nil {
		return nil, nil, err
	}
	t.setStereo(b, form)
	return b.Build()
}

func chosen(places []int, set uint) (list []int) {
	for n, i := range places {
		if set>>n&1 == 1 {
			list = append(list, i)
		}
	}
	return list
}

func numbers(atoms []int) string {
	var list []string
	for _, i := range atoms {
		list = append(list, fmt.Sprint(i+1))
	}
	return strings.Join(list, ", ")
}
