package handbook

// crossways is the lower saddle of the turn of an amide's N about C-N, nitrogen
// N with substituents a and b, O and C: its lone pair lies in the plane of O=C-N
// and points towards oxygen or away.
func crossways(o, c, n, a, b int) (away, towards pick) {
	side := func(degrees float64) pick {
		return saddle(shape{at(o, c, n, a, degrees), at(o, c, n, b, -degrees)}, sum(dihedral{o, c, n, a}, dihedral{o, c, n, b}))
	}
	return side(60), side(120)
}

var carbonyls = []specimen{
	{"formic acid", "[H]OC=O", []question{turned("formic acid", 0, 180)}},
	{"acetic acid", "[H]OC(=O)C", []question{turned("acetic acid", 0, 180)}},
	{"methyl formate", "COC=O", []question{turned("methyl formate", 0, 180)}},
	{"methyl acetate", "COC(=O)C", []question{turned("methyl acetate", 0, 180)}},
	{"N-methylformamide", "CNC=O", []question{turned("N-methylformamide", 0, 180)}},
	{"N-methylacetamide", "CNC(=O)C", []question{turned("N-methylacetamide", 0, 180)}},
	{"N-methylacetanilide", "CN(c1ccccc1)C(=O)C", []question{
		gap("N-methylacetanilide", minima, minimum(at(2, 1, 8, 9, 180)), minimum(at(2, 1, 8, 9, 0))),
	}},
	{"acetamide", "CC(=O)N([H])[H]", acetamide},
	{"N,N-dimethylformamide", "O=CN(C)C", amideBarrier("dimethylformamide", 0, 1, 2, 3, 4)},
	{"N,N-dimethylacetamide", "CC(=O)N(C)C", amideBarrier("dimethylacetamide", 2, 1, 3, 4, 5)},
	{"Ac-Gly-NHMe", "CC(=O)NCC(=O)NC", glycyl},
	{"Ac-Ala-NHMe", "CC(=O)N[C@@H](C)C(=O)NC", alanyl},
}

var acetamide = func() []question {
	a, b := crossways(2, 1, 3, 4, 5)
	return []question{
		gap("acetamide lower barrier", barriers, minimum(), lower(a, b)),
		gap("acetamide upper barrier", barriers, minimum(), upper(a, b)),
	}
}()

func amideBarrier(fact string, o, c, n, a, b int) []question {
	return []question{gap(fact, barriers, minimum(), lower(crossways(o, c, n, a, b)))}
}

// backbone is phi, psi and the two amide bonds. Phi and psi may be farther off
// than usual: the surface is flat there.
func backbone(turns ...turn) pick {
	turns[0].slack, turns[1].slack = 45, 45
	return minimum(turns...)
}

// glycyl and alanyl: phi, psi, and the two amide bonds (180 is the trans amide),
// from the published geometries.
var glycyl = func() []question {
	s := func(phi, psi, before, after float64) pick {
		return backbone(at(1, 3, 4, 5, phi), at(3, 4, 5, 7, psi), at(0, 1, 3, 4, before), at(4, 5, 7, 8, after))
	}
	lowest := s(83, -71, 180, 180)
	return []question{
		gap("glycyl xae", peptides, lowest, s(180, 180, 180, 180)),
		gap("glycyl xad", peptides, lowest, s(-101, 11, -172, 174)),
		gap("glycyl xab", peptides, lowest, s(180, 180, 180, 0)),
		gap("glycyl xag", peptides, lowest, s(86, 7, -6, 180)),
	}
}()

var alanyl = func() []question {
	s := func(phi, psi, before, after float64) pick {
		return backbone(at(1, 3, 4, 6, phi), at(3, 4, 6, 8, psi), at(0, 1, 3, 4, before), at(4, 6, 8, 9, after))
	}
	extended := s(-160, 161, 180, 180)
	return []question{
		gap("alanyl xac", peptides, extended, s(74, -57, 174, 180)),
		gap("alanyl xak", peptides, extended, s(-82, -15, 7, 180)),
		gap("alanyl xai", peptides, extended, s(-75, 129, 167, -13)),
		gap("alanyl xab", peptides, extended, s(-168, -35, 169, -171)),
		gap("alanyl C5", peptides, s(-83, 73, 180, 180), extended),
	}
}()
