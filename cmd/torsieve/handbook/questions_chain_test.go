package handbook

// turned asks for the energy of a minimum above another, both told by the
// dihedral of the first four atoms.
func turned(fact string, from, to float64) question {
	return gap(fact, minima, minimum(at(0, 1, 2, 3, from)), minimum(at(0, 1, 2, 3, to)))
}

var butadieneTop = barrierTop(first, span(85, 115, 5)...)

var chains = []specimen{
	{"1-butene", "C=CCC", []question{turned("1-butene", 0, 120)}},
	{"butadiene", "C=CC=C", []question{
		turned("butadiene", 180, 30),
		gap("butadiene trans barrier", barriers, minimum(at(0, 1, 2, 3, 180)), butadieneTop),
		gap("butadiene gauche barrier", barriers, minimum(at(0, 1, 2, 3, 30)), butadieneTop),
	}},
	{"acrolein", "C=CC=O", []question{turned("acrolein", 180, 0)}},
	{"methyl vinyl ether", "C=COC", []question{turned("methyl vinyl ether", 0, 165)}},
	{"1,2-difluoroethane", "FCCF", []question{
		turned("difluoroethane", 70, 180),
		angle("difluoroethane angle", first, at(0, 1, 2, 3, 70)),
	}},
	{"1,2-dichloroethane", "ClCCCl", []question{turned("dichloroethane", 180, 67)}},
	{"1-fluoropropane", "FCCC", []question{turned("fluoropropane", 180, 64)}},
	{"1,2-dimethoxyethane", "COCCOC", []question{
		gap("dimethoxyethane", minima, minimum(along(0, 180, 180, 180)...), minimum(along(0, 180, 72, 180)...)),
	}},
	{"methyl ethyl ether", "COCC", []question{turned("methyl ethyl ether", 180, 75)}},
	{"dimethoxymethane", "COCOC", []question{
		gap("dimethoxymethane", minima, minimum(along(0, 67, 67)...), minimum(along(0, 180, 67)...)),
	}},
	{"ethanol", "[H]OCC", []question{turned("ethanol", 180, 62)}},
	{"propanal", "O=CCC", []question{turned("propanal", 0, 125)}},
	{"1-propanol", "[H]OCCC", []question{
		gap("propanol span", minima, minimum(), highest()),
		count("propanol minima", 20),
	}},
	{"ethylene glycol", "[H]OCCO[H]", []question{
		gap("ethylene glycol", diols, minimum(at(1, 2, 3, 4, 180)), minimum(at(0, 1, 2, 3, 180), at(1, 2, 3, 4, 60), at(2, 3, 4, 5, -55))),
	}},
	{"1,4-butanediol", "[H]OCCCCO[H]", butanediol},
	{"glycine", "[H]OC(=O)CN", []question{
		gap("glycine", minima, minimum(at(0, 1, 2, 3, 0), at(5, 4, 2, 3, 0)), minimum(at(0, 1, 2, 3, 180), at(5, 4, 2, 3, 180))),
		count("glycine minima", 20),
	}},
	{"methanesulfonamide", "CS(=O)(=O)N[H]", []question{
		angle("methanesulfonamide angle", dihedral{0, 1, 4, 5}, at(0, 1, 4, 5, 65)),
	}},
	{"methyl nitrite", "CON=O", []question{turned("methyl nitrite", 0, 180)}},
	{"nitrous acid", "[H]ON=O", []question{turned("nitrous acid", 180, 0)}},
}

// butanediol has its shapes from the published geometries.
var butanediol = func() []question {
	lowest := minimum(along(0, 177, 77, -68, 74, -67)...)
	return []question{
		gap("butanediol 2", diols, lowest, minimum(along(0, 63, 73, -65, 76, -68)...)),
		gap("butanediol 3", diols, lowest, minimum(along(0, -78, 52, 54, -77, 175)...)),
		gap("butanediol 4", diols, lowest, minimum(along(0, 81, -53, -51, 78, 86)...)),
	}
}()
