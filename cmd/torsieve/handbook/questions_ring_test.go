package handbook

// chair is a six-membered ring of the atoms from r on, as a chair, with what is
// bonded to atom r (atom sub) in a given place. Both places belong to the same
// configuration at r; of a molecule with a stated configuration only one
// enantiomer has them.
func chair(sub, r int, ring, degrees float64) []turn {
	return []turn{
		at(r+5, r, r+1, r+2, ring), at(r, r+1, r+2, r+3, -ring), at(r+1, r+2, r+3, r+4, ring),
		at(sub, r, r+1, r+2, degrees),
	}
}

func equatorial(sub, r int) []turn { return chair(sub, r, 55, 175) }
func axial(sub, r int) []turn      { return chair(sub, r, -55, 65) }

// aValue asks for the free energy of the axial above the equatorial chairs, all
// rotamers of the substituent counted. sub is its first atom, the ring starts
// at r.
func aValue(fact, code string, c class, sub, r int) specimen {
	q := gap(fact, c, state(equatorial(sub, r)...), state(axial(sub, r)...))
	return specimen{fact, code, []question{q}}
}

// diaxial asks for the energy of the chair with two axial methyl groups above
// the one with two equatorial ones.
func diaxial(name, code string) specimen {
	return specimen{name, code, []question{gap(name+" diaxial", alkanes, minimum(equatorial(0, 1)...), minimum(axial(0, 1)...))}}
}

var aValues = []specimen{
	aValue("cyclohexane-CH3", "CC1CCCCC1", alkanes, 0, 1),
	aValue("cyclohexane-C2H5", "CCC1CCCCC1", alkanes, 1, 2),
	aValue("cyclohexane-iPr", "CC(C)C1CCCCC1", alkanes, 1, 3),
	aValue("cyclohexane-tBu", "CC(C)(C)C1CCCCC1", alkanes, 1, 4),
	aValue("cyclohexane-C6H5", "c1ccccc1C1CCCCC1", minima, 5, 6),
	aValue("cyclohexane-F", "FC1CCCCC1", minima, 0, 1),
	aValue("cyclohexane-Cl", "ClC1CCCCC1", minima, 0, 1),
	aValue("cyclohexane-Br", "BrC1CCCCC1", minima, 0, 1),
	aValue("cyclohexane-I", "IC1CCCCC1", minima, 0, 1),
	aValue("cyclohexane-OH", "OC1CCCCC1", minima, 0, 1),
	aValue("cyclohexane-OCH3", "COC1CCCCC1", minima, 1, 2),
	aValue("cyclohexane-NH2", "NC1CCCCC1", minima, 0, 1),
	aValue("cyclohexane-CN", "N#CC1CCCCC1", minima, 1, 2),
	aValue("cyclohexane-CO2H", "OC(=O)C1CCCCC1", minima, 1, 3),
	aValue("cyclohexane-CO2CH3", "COC(=O)C1CCCCC1", minima, 2, 4),
	aValue("cyclohexane-CF3", "FC(F)(F)C1CCCCC1", minima, 1, 4),
	aValue("cyclohexane-NO2", "[O-][N+](=O)C1CCCCC1", minima, 1, 3),
	aValue("cyclohexane-CHO", "O=CC1CCCCC1", minima, 1, 2),
	aValue("cyclohexane-C#CH", "C#CC1CCCCC1", minima, 1, 2),
	aValue("cyclohexane-vinyl", "C=CC1CCCCC1", minima, 1, 2),
	aValue("N-methylpiperidine", "CN1CCCCC1", minima, 0, 1),
	aValue("piperidine", "[H]N1CCCCC1", minima, 0, 1),
}

var cyclohexane = specimen{"cyclohexane", "C1CCCCC1", []question{
	gap("cyclohexane twist-boat", alkanes, minimum(along(0, 55, -55, 55)...), minimum(along(0, 30, 30, -63)...)),
	gap("cyclohexane boat", barriers, minimum(), saddle(
		shape{at(0, 1, 2, 3, 0), at(1, 2, 3, 4, 52), at(3, 4, 5, 0, 0), at(4, 5, 0, 1, 52)},
		keep(shape{at(0, 1, 2, 3, 0), at(3, 4, 5, 0, 0)})...)),
	gap("cyclohexane inversion", barriers, minimum(), saddle(
		shape{at(0, 1, 2, 3, 0), at(1, 2, 3, 4, 15), at(5, 0, 1, 2, 15)},
		append(keep(shape{at(0, 1, 2, 3, 0)}), difference(dihedral{1, 2, 3, 4}, dihedral{5, 0, 1, 2}))...)),
	angle("cyclohexane angle", first, along(0, 55, -55, 55)...),
	count("cyclohexane minima", 20),
}}

var rings = []specimen{
	cyclohexane,
	{"cyclobutane", "C1CCC1", []question{gap("cyclobutane", barriers, minimum(), held(at(0, 1, 2, 3, 0)))}},
	{"cyclopentane", "C1CCCC1", []question{gap("cyclopentane", barriers, minimum(), held(at(0, 1, 2, 3, 0), at(1, 2, 3, 4, 0)))}},
	{"cyclohexene", "C1CCCC=C1", []question{gap("cyclohexene", barriers, minimum(), saddle(
		shape{at(0, 1, 2, 3, 0), at(1, 2, 3, 4, -45), at(5, 0, 1, 2, 45)},
		keep(shape{at(0, 1, 2, 3, 0), at(3, 4, 5, 0, 0)})...))}},
	{"cyclooctane", "C1CCCCCCC1", []question{gap("cyclooctane crown", alkanes,
		minimum(along(0, 65, 45, -102, 65, -65)...), minimum(along(0, 85, -85, 85, -85, 85)...))}},
	{"trans-decalin", "C1CC[C@@H]2CCCC[C@H]2C1", []question{count("trans-decalin minima", 3)}},
	{"cis-decalin", "C1CC[C@H]2CCCC[C@H]2C1", []question{count("cis-decalin minima", 3)}},
	{"cis-1,2-dimethylcyclohexane", "C[C@@H]1CCCC[C@@H]1C", []question{
		isomer("dimethylcyclohexane cis-1,2", alkanes, "C[C@@H]1CCCC[C@H]1C"),
	}},
	diaxial("trans-1,2-dimethylcyclohexane", "C[C@H]1CCCC[C@@H]1C"),
	diaxial("cis-1,3-dimethylcyclohexane", "C[C@H]1CCC[C@H](C1)C"),
	diaxial("trans-1,4-dimethylcyclohexane", "C[C@H]1CC[C@@H](CC1)C"),
	{"2-methoxytetrahydropyran", "CO[C@H]1CCCCO1", []question{
		gap("methoxytetrahydropyran", minima, state(axial(1, 2)...), state(equatorial(1, 2)...)),
		gap("methoxytetrahydropyran enthalpy", minima, minimum(axial(1, 2)...), minimum(equatorial(1, 2)...)),
	}},
	{"2-chlorotetrahydropyran", "Cl[C@H]1CCCCO1", []question{
		gap("chlorotetrahydropyran", minima, minimum(axial(0, 1)...), minimum(equatorial(0, 1)...)),
	}},
	{"2-hydroxytetrahydropyran", "O[C@H]1CCCCO1", []question{
		gap("hydroxytetrahydropyran", minima, minimum(axial(0, 1)...), minimum(equatorial(0, 1)...)),
	}},
}
