package handbook

// first is the dihedral of the first four atoms of a SMILES.
var first = dihedral{0, 1, 2, 3}

// methyl asks for the barrier of a rotor whose top is at a given angle of the
// first four atoms.
func methyl(fact string, top float64) []question {
	return []question{gap(fact, barriers, minimum(), held(at(0, 1, 2, 3, top)))}
}

func span(from, to, step float64) (degrees []float64) {
	for d := from; d <= to; d += step {
		degrees = append(degrees, d)
	}
	return degrees
}

var rotors = []specimen{
	{"ethane", "[H]CC[H]", append(methyl("ethane barrier", 0), methyl("ethane barrier V3", 0)...)},
	{"propane", "[H]CCC", methyl("propane barrier", 0)},
	{"isobutane", "[H]CC(C)C", methyl("isobutane barrier", 0)},
	{"neopentane", "[H]CC(C)(C)C", methyl("neopentane barrier", 0)},
	{"methanol", "[H]CO[H]", methyl("methanol barrier", 0)},
	{"methylamine", "[H]CN[H]", []question{gap("methylamine barrier", barriers, minimum(), barrierTop(first, span(-60, 55, 5)...))}},
	{"methanethiol", "[H]CS[H]", methyl("methanethiol barrier", 0)},
	{"dimethyl ether", "[H]COC", methyl("dimethyl ether barrier", 0)},
	{"hydrogen peroxide", "[H]OO[H]", append(methyl("hydrogen peroxide trans", 180), methyl("hydrogen peroxide cis", 0)...)},
	{"hydrogen disulfide", "[H]SS[H]", append(methyl("hydrogen disulfide trans", 180), methyl("hydrogen disulfide cis", 0)...)},
	{"hydrazine", "[H]N([H])N([H])[H]", []question{
		gap("hydrazine trans", barriers, minimum(), held(at(0, 1, 3, 4, 180), at(2, 1, 3, 5, 180))),
		gap("hydrazine cis", barriers, minimum(), held(at(0, 1, 3, 4, 0), at(2, 1, 3, 5, 0))),
	}},
	{"hydroxylamine", "[H]ON([H])[H]", []question{
		gap("hydroxylamine st1", barriers, minimum(at(0, 1, 2, 3, 120)), barrierTop(first, span(0, 175, 5)...)),
		gap("hydroxylamine st2", barriers, minimum(at(0, 1, 2, 3, 55), at(0, 1, 2, 4, -55)), barrierTop(first, span(0, 175, 5)...)),
	}},
	{"propene", "C=CC[H]", methyl("propene barrier", 60)},
	{"acetaldehyde", "O=CC[H]", methyl("acetaldehyde barrier", 60)},
	{"acetone", "O=C(C)C[H]", []question{gap("acetone barrier", barriers, minimum(), held(at(0, 1, 3, 4, 60)))}},
	{"styrene", "C=Cc1ccccc1", methyl("styrene barrier", 90)},
	{"anisole", "COc1ccccc1", methyl("anisole barrier", 90)},
	{"thioanisole", "CSc1ccccc1", methyl("thioanisole barrier", 90)},
	{"phenol", "[H]Oc1ccccc1", methyl("phenol barrier", 90)},
	{"benzaldehyde", "O=Cc1ccccc1", methyl("benzaldehyde barrier", 90)},
	{"nitrobenzene", "[O-][N+](=O)c1ccccc1", []question{
		gap("nitrobenzene barrier", barriers, minimum(), held(at(0, 1, 3, 4, 90))),
	}},
	{"aniline", "[H]N([H])c1ccccc1", []question{
		gap("aniline inversion", barriers, minimum(), held(at(0, 1, 3, 4, 0), at(2, 1, 3, 4, 180))),
		gap("aniline torsion", barriers, minimum(), saddle(shape{at(0, 1, 3, 4, 60), at(2, 1, 3, 4, -60)},
			sum(dihedral{0, 1, 3, 4}, dihedral{2, 1, 3, 4}))),
	}},
	{"biphenyl", "c1ccccc1-c1ccccc1", []question{
		gap("biphenyl planar", barriers, minimum(), held(at(4, 5, 6, 7, 0))),
		gap("biphenyl planar experiment", barriers, minimum(), held(at(4, 5, 6, 7, 0))),
		gap("biphenyl perpendicular experiment", barriers, minimum(), held(at(4, 5, 6, 7, 90))),
		angle("biphenyl twist", dihedral{4, 5, 6, 7}, at(4, 5, 6, 7, 40)),
	}},
	{"2,2'-bifuran", "c1cc(oc1)-c1ccco1", []question{
		gap("bifuran anti", barriers, minimum(at(3, 2, 5, 9, 180)), barrierTop(dihedral{3, 2, 5, 9}, span(70, 110, 10)...)),
		gap("bifuran syn", barriers, minimum(at(3, 2, 5, 9, 0)), barrierTop(dihedral{3, 2, 5, 9}, span(70, 110, 10)...)),
	}},
	{"2,2'-bithiophene", "c1cc(sc1)-c1cccs1", []question{
		gap("bithiophene anti", barriers, minimum(at(3, 2, 5, 9, 155)), barrierTop(dihedral{3, 2, 5, 9}, span(70, 110, 10)...)),
		gap("bithiophene syn", barriers, minimum(at(3, 2, 5, 9, 28)), barrierTop(dihedral{3, 2, 5, 9}, span(70, 110, 10)...)),
	}},
	{"dimethyl disulfide", "CSSC", append(append(methyl("dimethyl disulfide trans", 180), methyl("dimethyl disulfide cis", 0)...),
		angle("dimethyl disulfide angle", first, at(0, 1, 2, 3, 85)))},
}
