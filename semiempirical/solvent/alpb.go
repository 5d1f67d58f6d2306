// Package solvent is the ALPB implicit solvation model for GFN2-xTB, in 25
// solvents: the reaction field of a continuum on Born radii, hydrogen bonds to
// it, and a surface tension. The first two follow the charges of the atoms and
// take part in the self-consistency.
//
// Source: S. Ehlert, M. Stahn, S. Spicher, S. Grimme, J. Chem. Theory Comput.
// 2021, 17, 4250, doi:10.1021/acs.jctc.1c00471. Solvation free energies are from
// 1 mol/l in the gas to 1 mol/l in solution.
//
// Units are bohr, hartree and the elementary charge; coordinates are flat.
//
// The surface is summed over 230 directions that are fixed in space, as the
// parameters want it. So turning a molecule changes what is computed. Of 14
// ligands of 16 to 85 atoms in water, in 30 random orientations each (the full
// test of package semiempirical): the energy has an rms deviation of 2e-5 hartree
// (0.013 kcal/mol), and two orientations differ by up to 1.2e-4 hartree (0.08
// kcal/mol; 2e-4 is the limit of the test); a component of the gradient has an rms
// deviation of 2e-5 and a largest of 4e-4 hartree/bohr (limit 1e-3). Energies
// that differ by less say nothing about which of two shapes is lower, unless the
// molecules lie alike in space.
//
// The gradient is that of the energy as it is computed. Where a point of the
// surface comes into a sphere's soft border, the second derivative jumps; where
// 1e-6 of a point is left, it is dropped, and the energy jumps by up to 1e-9
// hartree, the gradient by up to 3e-6 hartree/bohr: the noise floor of a
// relaxation and of second derivatives from differences.
package solvent

// A Model is the solvation of one molecule. Call Update for each geometry, then
// ReactionField and HydrogenBonds as often as the charges change. It owns its
// scratch memory and serves one goroutine at a time.
type Model struct {
	pairs    *pairs
	born     *born
	shape    *shape
	reaction *reaction
	area     *area
	bonding  bonding
	tension  []float64 // of each atom, hartree/bohr^2
	shift    float64   // hartree

	slope   []float64 // by pair: derivative of an energy by the distance
	unused  []float64 // a potential nobody asked for
	perArea []float64 // derivative of an energy by each atom's area
}

// Parts are the contributions to a solvation energy, in hartree.
type Parts struct {
	Polar         float64 // of the reaction field; follows the charges
	HydrogenBonds float64 // follows the charges
	Surface       float64
	Shift         float64 // the solvent's constant
}

// Sum is the whole energy.
func (p Parts) Sum() float64 { return p.Polar + p.HydrogenBonds + p.Surface + p.Shift }

// New prepares for a molecule with the atomic numbers given, in a solvent by
// any name that Find knows.
//
// Errors: *UnknownError for the name, *Unsupported for an element without
// parameters.
func New(numbers []int, name string) (*Model, error) {
	name, err := Find(name)
	if err != nil {
		return nil, err
	}
	t := alpb()
	if err := t.check(numbers); err != nil {
		return nil, err
	}
	n, f := len(numbers), t.fitOf(name)
	m := &Model{
		pairs: newPairs(n), born: newBorn(numbers, t, f), reaction: newReaction(n, t, f), area: newArea(numbers, t, f),
		tension: column(numbers, f.Tension), shift: f.Shift,
		slope: make([]float64, n*(n-1)/2), unused: make([]float64, n), perArea: make([]float64, n),
	}
	m.shape = newShape(m.born.sphere)
	m.bonding = newBonding(numbers, f, m.area.sphere)
	return m, nil
}

// Update moves the atoms to x (3N, bohr). Error: *GeometryError for coordinates
// that are not finite, atoms on one another, and an atom without a Born radius;
// the model has no values then.
func (m *Model) Update(x []float64) error {
	if err := m.pairs.update(x); err != nil {
		return err
	}
	if err := m.born.update(m.pairs); err != nil {
		return err
	}
	m.shape.update(m.pairs.x)
	m.reaction.update(m.pairs, m.born.radius, m.shape.size)
	m.area.update(m.pairs)
	return nil
}

// ReactionField returns the energy of the charges q (one an atom, e) in the
// field with which the solvent answers them, in hartree, and adds its derivative
// with respect to them to v.
func (m *Model) ReactionField(q, v []float64) float64 {
	m.check(q)
	m.check(v)
	return m.reaction.energy(q, v)
}

// HydrogenBonds returns the energy of the hydrogen bonds to the solvent at the
// charges q, in hartree, and adds its derivative with respect to them to v.
func (m *Model) HydrogenBonds(q, v []float64) float64 {
	m.check(q)
	m.check(v)
	return m.bonding.energy(m.area.value, q, v)
}

// Shift returns the solvent's constant in hartree.
func (m *Model) Shift() float64 { return m.shift }

// Surface returns the energy of the surface tension in hartree.
func (m *Model) Surface() float64 {
	var sum float64
	for a, s := range m.area.value {
		sum += m.tension[a] * s
	}
	return sum
}

// Parts returns the energy at the charges q (one an atom, e), part by part.
func (m *Model) Parts(q []float64) Parts {
	return Parts{
		Polar:         m.ReactionField(q, m.unused),
		HydrogenBonds: m.HydrogenBonds(q, m.unused),
		Surface:       m.Surface(),
		Shift:         m.shift,
	}
}

// AddGradient adds the gradient of the whole energy at fixed charges q to grad
// (3N, hartree/bohr), at the place of the last Update.
func (m *Model) AddGradient(q, grad []float64) {
	m.check(q)
	if len(grad) != len(m.pairs.x) {
		panic("solvent: gradient of the wrong length")
	}
	m.addPolar(q, grad)
	m.addSurface(q, grad)
}

// addPolar adds the reaction field's gradient.
func (m *Model) addPolar(q, grad []float64) {
	m.reaction.slopes(m.pairs, m.born.radius, q, m.slope)
	m.born.addSlopes(m.reaction.dEdb, m.slope)
	m.pairs.addGradient(m.slope, grad)
	var charge float64
	for _, c := range q {
		charge += c
	}
	scale := -0.5 * m.reaction.kappa * m.reaction.alpha * charge * charge / m.shape.size
	m.shape.addGradient(scale, m.pairs.x, grad)
}

// addSurface adds the gradient of what goes with the surface: its tension and
// the hydrogen bonds.
func (m *Model) addSurface(q, grad []float64) {
	for a, c := range q {
		m.perArea[a] = m.tension[a] + m.bonding.strength[a]*c*c
	}
	m.area.addGradient(m.perArea, grad)
}

func (m *Model) check(q []float64) {
	if len(q) != m.pairs.n {
		panic("solvent: want one charge for each atom")
	}
}
