package forcefield

// nitrogen: the rules in order; the first that fits counts.
func (t *typing) nitrogen(i int) string {
	doubles, triples := t.multiples(i)
	switch {
	case t.m.Atom(i).Aromatic, t.nitro(i):
		return "N_R"
	case triples > 0 || doubles > 1:
		return "N_1"
	case t.amidiniumCentre(i) >= 0:
		return "N_R"
	case doubles == 1:
		return "N_2"
	case t.resonantAnion(i):
		return "N_R"
	}
	return "N_3"
}

// nitro reports the nitrogen of a nitro group, nitrate ester or nitrate.
func (t *typing) nitro(i int) bool {
	if t.m.Atom(i).Number != 7 || len(t.m.Neighbours(i)) != 3 {
		return false
	}
	oxygens := 0
	for _, j := range t.m.Neighbours(i) {
		if t.terminalOxygen(j) {
			oxygens++
		}
	}
	return oxygens >= 2
}

// amidiniumCentre returns the carbon that a charged nitrogen i has a double
// bond to, if that carbon has another nitrogen or sulfur on a single bond:
// amidinium, guanidinium, isothiouronium. Else -1.
func (t *typing) amidiniumCentre(i int) int {
	if t.m.Atom(i).Charge <= 0 {
		return -1
	}
	c := t.doubleTo(i, 6)
	if c < 0 || t.m.Atom(c).Aromatic {
		return -1
	}
	for n, j := range t.m.Neighbours(c) {
		z := t.m.Atom(j).Number
		if j != i && (z == 7 || z == 16) && t.m.Bond(t.m.NeighbourBonds(c)[n]).Order == 1 {
			return c
		}
	}
	return -1
}

// resonantAnion reports a deprotonated imide, sulfonamide or anilide nitrogen.
// Own choice: the paper has no anions.
func (t *typing) resonantAnion(i int) bool {
	if t.m.Atom(i).Charge >= 0 || len(t.m.Neighbours(i)) != 2 {
		return false
	}
	for _, j := range t.m.Neighbours(i) {
		a := t.m.Atom(j)
		if a.Number == 6 && (a.Aromatic || t.doubleTo(j, 8, 16) >= 0) || t.sulfonyl(j) {
			return true
		}
	}
	return false
}

// sulfonyl reports a sulfur with four neighbours and at least two terminal
// oxygens.
func (t *typing) sulfonyl(i int) bool {
	if t.m.Atom(i).Number != 16 || len(t.m.Neighbours(i)) != 4 {
		return false
	}
	oxygens := 0
	for _, j := range t.m.Neighbours(i) {
		if t.terminalOxygen(j) {
			oxygens++
		}
	}
	return oxygens >= 2
}

func (t *typing) oxygen(i int) string {
	doubles, triples := t.multiples(i)
	neighbours := t.m.Neighbours(i)
	switch {
	case t.m.Atom(i).Aromatic:
		return "O_R"
	case triples > 0:
		return "O_1"
	case len(neighbours) == 1 && (doubles > 0 || t.resonantOxide(i, neighbours[0])):
		return "O_2"
	case len(neighbours) == 2 && t.m.Atom(neighbours[0]).Number == 14 && t.m.Atom(neighbours[1]).Number == 14:
		return "O_3_z"
	case doubles > 0:
		return "O_R" // an oxonium in a double bond (own choice)
	}
	return "O_3"
}

// resonantOxide reports a terminal oxygen on a single bond to j that is written
// so only for the sake of one Kekule form: on N+, S, P, a halogen, or of a
// carboxylate.
func (t *typing) resonantOxide(i, j int) bool {
	switch a := t.m.Atom(j); a.Number {
	case 7:
		return a.Charge > 0
	case 15, 16, 33, 34, 17, 35, 53:
		return true
	case 6:
		return t.m.Atom(i).Charge < 0 && t.doubleTo(j, 8) >= 0
	}
	return false
}
