package hf

import (
	"fmt"
	"math"
	"strings"

	"torsieve/hf/basis"
)

// Options are the settings of a surface. The zero value is HF-3c.
type Options struct {
	// Method is "hf-3c" (Hartree-Fock in MINIX with dispersion, counterpoise
	// and short-range terms; the default), "hf-d3" (with D3(BJ) dispersion and,
	// where it was published for the basis, the counterpoise correction), "hf",
	// or for closed shells second-order perturbation theory with a frozen core:
	// "mp2", "scs-mp2" (spin components scaled) or "sos-mp2" (opposite spins
	// only, scaled).
	Method string
	// Basis is a name that basis.Load knows. "" is MINIX for hf-3c, which has
	// no other, and def2-SVP else.
	Basis string
	// TwoElectron says how electrons repel one another: "exact" by four-centre
	// integrals, "fitted" by density fitting, which moves totals by up to a
	// millihartree and conformers against each other by hundredths of a kcal/mol.
	// "auto", the default, is exact in MINIX and fitted else.
	TwoElectron string
	// Accuracy scales the convergence limits: 1, the default, ends when the
	// energy changes by less than 1e-7 hartree and the commutator is below
	// 1e-5. Below 1 also smaller integrals count.
	Accuracy float64
	// MemoryBytes bounds what the surface holds; 0 is 2 GiB. Integrals that do
	// not fit are computed anew in each iteration.
	MemoryBytes int64
}

const defaultMemory = 2 << 30

// An Unsupported error says why a tier cannot take a molecule, in words for a
// chemist.
type Unsupported struct {
	Reason string
	Err    error // the cause, or nil; a *basis.Missing where a basis lacks an element
}

func (e *Unsupported) Error() string { return e.Reason }

func (e *Unsupported) Unwrap() error { return e.Err }

// settle fills in defaults and loads the basis.
func (o Options) settle() (Options, *basis.Set, error) {
	o.Method = strings.ToLower(o.Method)
	if o.Method == "" {
		o.Method = "hf-3c"
	}
	switch o.Method {
	case "hf-3c":
		if o.Basis == "" {
			o.Basis = "MINIX"
		}
	case "hf-d3", "hf", "mp2", "scs-mp2", "sos-mp2":
		if o.Basis == "" {
			o.Basis = "def2-SVP"
		}
	default:
		return o, nil, fmt.Errorf("hf: no method %q; there are hf-3c, hf-d3, hf, mp2, scs-mp2 and sos-mp2", o.Method)
	}
	set, err := basis.Load(o.Basis)
	if err != nil {
		return o, nil, fmt.Errorf("hf: %w", err)
	}
	if o.Method == "hf-3c" && set.Name != "MINIX" {
		return o, nil, fmt.Errorf("hf: hf-3c is defined in MINIX only, not in %s", set.Name)
	}
	if o.TwoElectron, err = settleTwoElectron(o.TwoElectron, set.Name); err != nil {
		return o, nil, err
	}
	if o.Accuracy == 0 {
		o.Accuracy = 1
	}
	if !(o.Accuracy > 0) || math.IsInf(o.Accuracy, 0) {
		return o, nil, fmt.Errorf("hf: accuracy: want a number above 0, have %g", o.Accuracy)
	}
	if o.MemoryBytes == 0 {
		o.MemoryBytes = defaultMemory
	}
	return o, set, nil
}

const (
	twoElectronAuto   = "auto"
	twoElectronExact  = "exact"
	twoElectronFitted = "fitted"
)

// settleTwoElectron replaces "auto" by what it stands for in a basis.
func settleTwoElectron(name, basis string) (string, error) {
	switch name {
	case twoElectronExact, twoElectronFitted:
		return name, nil
	case "", twoElectronAuto:
		if basis == "MINIX" {
			return twoElectronExact, nil
		}
		return twoElectronFitted, nil
	}
	return "", fmt.Errorf("hf: no two-electron method %q; there are auto, exact and fitted", name)
}

// occupy deals the electrons out to the spins.
func occupy(numbers []int, charge, multiplicity, functions int) ([]int, error) {
	electrons := -charge
	for _, z := range numbers {
		electrons += z
	}
	refuse := func(format string, args ...any) error {
		return &Unsupported{Reason: fmt.Sprintf(format, args...)}
	}
	unpaired := multiplicity - 1
	switch {
	case electrons < 1:
		return nil, refuse("Hartree-Fock needs electrons; this molecule has none at charge %+d", charge)
	case multiplicity < 1 || unpaired > electrons:
		return nil, refuse("multiplicity %d does not fit %d electrons", multiplicity, electrons)
	case multiplicity == 1 && electrons%2 == 1:
		return nil, refuse("closed-shell Hartree-Fock needs an even number of electrons; this molecule has %d at charge %+d", electrons, charge)
	case (electrons-unpaired)%2 == 1:
		return nil, refuse("multiplicity %d does not fit %d electrons (charge %+d): one of them is even, or both are odd", multiplicity, electrons, charge)
	}
	down := (electrons - unpaired) / 2
	up := electrons - down
	if up > functions {
		return nil, refuse("%d electrons of one spin do not fit the %d functions of the basis", up, functions)
	}
	if unpaired == 0 {
		return []int{up}, nil
	}
	return []int{up, down}, nil
}
