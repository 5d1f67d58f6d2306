package basis

import "fmt"

// fitting lists the auxiliary sets.
var fitting = map[string]func() (*Set, error){
	"def2-universal-JKFIT": once("def2-universal-jkfit"),
	"def2-SVP-RIFIT":       once("def2-svp-rifit"),
	"def2-TZVP-RIFIT":      once("def2-tzvp-rifit"),
}

// FieldFitting returns the set that fits Coulomb and exchange matrices in any
// orbital basis: def2-universal-JKFIT.
//
// Source: F. Weigend, J. Comput. Chem. 2008, 29, 167, doi:10.1002/jcc.20702.
func FieldFitting() (*Set, error) { return fitting["def2-universal-JKFIT"]() }

// CorrelationFitting returns the set made for MP2 in the orbital basis of that
// published name. An error says that there is none.
//
// Source: F. Weigend, M. Haser, H. Patzelt, R. Ahlrichs, Chem. Phys. Lett. 1998,
// 294, 143, doi:10.1016/S0009-2614(98)00862-8.
func CorrelationFitting(orbital string) (*Set, error) {
	if load, ok := fitting[orbital+"-RIFIT"]; ok {
		return load()
	}
	return nil, fmt.Errorf("MP2 has no fitting set for the basis %s; it has for def2-SVP and def2-TZVP", orbital)
}
