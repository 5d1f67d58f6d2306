package dispersion

import (
	_ "embed"
	"errors"
	"fmt"
	"math"
	"slices"
	"sync"

	"gonum.org/v1/gonum/blas"
	lapack "gonum.org/v1/gonum/lapack/gonum"
)

//go:embed data/eeq.json
var eeqJSON []byte

// eeqParams are the EEQ parameters by element; index 0 is unused.
type eeqParams struct {
	chi, kcn, eta [MaxZ + 1]float64 // hartree
	rad           [MaxZ + 1]float64 // bohr
	cnMax         float64           // where the coordination number levels off
	regulariser   float64
}

var eeqTable = sync.OnceValue(func() *eeqParams {
	var file struct {
		About, Units, Source string
		Constants            struct {
			Steepness   float64 `json:"cn_steepness"`
			Max         float64 `json:"cn_max"`
			Cutoff      float64 `json:"cn_cutoff_bohr"`
			Regulariser float64
		}
		Chi, Kcn, Eta, Rad []float64
	}
	decodeTable("eeq.json", eeqJSON, &file)
	t := &eeqParams{cnMax: file.Constants.Max, regulariser: file.Constants.Regulariser}
	perElement("chi", &t.chi, file.Chi)
	perElement("kcn", &t.kcn, file.Kcn)
	perElement("eta", &t.eta, file.Eta)
	perElement("rad", &t.rad, file.Rad)
	return t
})

// ErrCoincident comes where two atoms have the same place or a coordinate is
// not finite.
var ErrCoincident = errors.New("dispersion: two atoms at the same place, or a coordinate that is not finite")

// EEQ computes atomic charges by equilibration of electronegativities, from
// the geometry and the total charge alone.
//
// Source: E. Caldeweyher et al., J. Chem. Phys. 2019, 150, 154122.
type EEQ struct {
	numbers []int
	n       int
	pairs   pairs
	cn      *coordination
	count   []float64 // coordination numbers, levelled off
	dcount  []float64 // their derivative with respect to the plain ones
	gamma   []float64 // 1/sqrt(aA^2+aB^2), one a pair
	lu      []float64 // (n+1)^2, the factorised matrix
	pivot   []int
	rhs     []float64 // n+1
	charges []float64 // of the last call
	slope   []float64 // one a pair
	dEdCN   []float64
}

// NewEEQ prepares for a molecule. Panics for Z outside 1..MaxZ.
func NewEEQ(numbers []int) *EEQ {
	checkNumbers(numbers)
	n := len(numbers)
	e := &EEQ{
		numbers: slices.Clone(numbers),
		n:       n,
		pairs:   newPairs(n),
		cn:      newEEQCoordination(numbers),
		count:   make([]float64, n),
		dcount:  make([]float64, n),
		lu:      make([]float64, (n+1)*(n+1)),
		pivot:   make([]int, n+1),
		rhs:     make([]float64, n+1),
		charges: make([]float64, n),
		slope:   make([]float64, n*(n-1)/2),
		dEdCN:   make([]float64, n),
	}
	rad := &eeqTable().rad
	for a, za := range numbers {
		for _, zb := range numbers[:a] {
			e.gamma = append(e.gamma, 1/math.Hypot(rad[za], rad[zb]))
		}
	}
	return e
}

// Charges writes the charges at x (3N, bohr) into q (N, elementary charges);
// they sum to total. The error is ErrCoincident, or says that the equations
// have no solution.
func (e *EEQ) Charges(x []float64, total float64, q []float64) error {
	if len(q) != e.n {
		panic("dispersion: charges of the wrong length")
	}
	e.pairs.update(x)
	for _, r := range e.pairs.r {
		if !(r > 0) || math.IsInf(r, 1) {
			return ErrCoincident
		}
	}
	e.updateCount()
	e.fillMatrix()
	e.fillRight(total)
	m := e.n + 1
	var impl lapack.Implementation
	if !impl.Dgetrf(m, m, e.lu, m, e.pivot) {
		return fmt.Errorf("dispersion: charge equations of %d atoms are singular", e.n)
	}
	impl.Dgetrs(blas.NoTrans, m, 1, e.lu, m, e.pivot, e.rhs, 1)
	copy(q, e.rhs)
	copy(e.charges, e.rhs)
	return nil
}

// updateCount computes the coordination numbers, bounded by a soft maximum.
func (e *EEQ) updateCount() {
	e.cn.update(&e.pairs, e.count)
	top := math.Exp(eeqTable().cnMax)
	for a, cn := range e.count {
		e.count[a] = math.Log1p(top) - math.Log1p(top*math.Exp(-cn))
		e.dcount[a] = top / (top + math.Exp(cn))
	}
}

// fillMatrix writes the matrix of the equations, bordered by the condition on
// the total charge.
func (e *EEQ) fillMatrix() {
	t, m := eeqTable(), e.n+1
	k := 0
	for a, z := range e.numbers {
		for b := range a {
			r := e.pairs.r[k]
			v := math.Erf(e.gamma[k]*r) / r
			e.lu[a*m+b], e.lu[b*m+a] = v, v
			k++
		}
		e.lu[a*m+a] = t.eta[z] + math.Sqrt(2/math.Pi)/t.rad[z]
		e.lu[a*m+e.n], e.lu[e.n*m+a] = 1, 1
	}
	e.lu[m*m-1] = 0
}

func (e *EEQ) fillRight(total float64) {
	t := eeqTable()
	for a, z := range e.numbers {
		e.rhs[a] = -t.chi[z] + t.kcn[z]*e.count[a]/math.Sqrt(e.count[a]+t.regulariser)
	}
	e.rhs[e.n] = total
}

// AddGradient adds to grad the part of an energy's gradient that comes through
// the charges, at the place of the last call of Charges, which must have
// succeeded; dEdq holds the energy's derivatives with respect to them.
//
// The equations are solved once more for Lagrange multipliers instead of for
// the derivative of each charge.
func (e *EEQ) AddGradient(dEdq, grad []float64) {
	if len(dEdq) != e.n {
		panic("dispersion: derivatives of the wrong length")
	}
	t, m := eeqTable(), e.n+1
	copy(e.rhs, dEdq)
	e.rhs[e.n] = 0
	lapack.Implementation{}.Dgetrs(blas.NoTrans, m, 1, e.lu, m, e.pivot, e.rhs, 1)
	lambda := e.rhs
	k := 0
	for a, z := range e.numbers {
		for b := range a {
			r, g := e.pairs.r[k], e.gamma[k]
			dM := 2*g*math.Exp(-g*g*r*r)/(math.SqrtPi*r) - math.Erf(g*r)/(r*r)
			e.slope[k] = -(lambda[a]*e.charges[b] + lambda[b]*e.charges[a]) * dM
			k++
		}
		e.dEdCN[a] = lambda[a] * dRight(t.kcn[z], e.count[a], t.regulariser) * e.dcount[a]
	}
	e.cn.addSlopes(e.dEdCN, e.slope)
	e.pairs.addGradient(e.slope, grad)
}

// dRight is the derivative of kcn cn / sqrt(cn + regulariser).
func dRight(kcn, cn, regulariser float64) float64 {
	return kcn / math.Sqrt(cn+regulariser) * (1 - 0.5*cn/(cn+regulariser))
}
