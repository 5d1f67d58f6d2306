package forcefield

// conjugate turns types of single atoms into resonant ones. Each rule looks at
// the types of the atoms' own bonds (first) only, so that no rule feeds another
// and the order of the atoms does not matter.
func (t *typing) conjugate() {
	for i, name := range t.first {
		switch name {
		case "N_3":
			if len(t.m.Neighbours(i)) == 3 && !t.amide(i) && t.aniline(i) {
				t.names[i] = "N_R"
			}
		case "N_R":
			t.amidinium(i)
		case "O_3", "S_3+2":
			if len(t.m.Neighbours(i)) == 2 && t.flatNeighbour(i) {
				t.names[i] = name[:1] + "_R"
			}
		case "C_2":
			t.diene(i)
		}
	}
}

// amide makes a nitrogen, its acyl carbon and the bond between them resonant:
// C=O as in the paper; C=S and neutral C=N, thioamides and amidines, are our
// choice. An aromatic carbon or nitrogen takes no part.
func (t *typing) amide(n int) bool {
	found := false
	for a, c := range t.m.Neighbours(n) {
		if t.first[c] != "C_2" || t.doubleTo(c, 7, 8, 16) < 0 || t.charged(c) {
			continue
		}
		t.names[n], t.names[c] = "N_R", "C_R"
		t.orders[t.m.NeighbourBonds(n)[a]] = amideOrder
		found = true
	}
	return found
}

// charged reports the carbon of an amidinium, which has orders of its own.
func (t *typing) charged(c int) bool {
	n := t.doubleTo(c, 7)
	return n >= 0 && t.amidiniumCentre(n) == c
}

// amidinium makes all nitrogens of the cation that the double bond of n belongs
// to resonant, with like bonds to the carbon.
func (t *typing) amidinium(n int) {
	c := t.amidiniumCentre(n)
	if c < 0 {
		return
	}
	nitrogens := 0
	for _, j := range t.m.Neighbours(c) {
		if t.m.Atom(j).Number == 7 {
			nitrogens++
		}
	}
	order := amidiniumOrder
	if nitrogens == 3 {
		order = guanidiniumOrder
	}
	t.names[c] = "C_R"
	for a, j := range t.m.Neighbours(c) {
		if t.m.Atom(j).Number == 7 {
			t.names[j] = "N_R"
			t.orders[t.m.NeighbourBonds(c)[a]] = order
		}
	}
}

// aniline reports a nitrogen next to an aromatic carbon, an alkene, or the
// nitrogen of a double bond. Own choice; a sulfonamide stays pyramidal unless
// it is on an aromatic carbon too.
func (t *typing) aniline(n int) bool {
	aryl, flat, sulfonamide := false, false, false
	for _, j := range t.m.Neighbours(n) {
		switch t.first[j] {
		case "C_R":
			aryl = true
		case "C_2", "N_2":
			flat = true
		}
		sulfonamide = sulfonamide || t.sulfonyl(j)
	}
	return aryl || flat && !sulfonamide
}

func (t *typing) flatNeighbour(i int) bool {
	for _, j := range t.m.Neighbours(i) {
		switch t.first[j] {
		case "C_2", "C_R", "N_2", "N_R", "B_2":
			return true
		}
	}
	return false
}

// diene makes the carbons of two double bonds that a single bond joins
// resonant. A carbonyl carbon stays as it is: acetamide's and acetone's printed
// structures fit C_2 better.
func (t *typing) diene(c int) {
	for a, j := range t.m.Neighbours(c) {
		if b := t.m.Bond(t.m.NeighbourBonds(c)[a]); b.Order != 1 || b.Aromatic {
			continue
		}
		switch t.first[j] {
		case "C_2", "C_R", "N_2":
			t.resonant(c)
			t.resonant(t.doubleTo(c, 6))
			t.resonant(j)
			t.resonant(t.doubleTo(j, 6))
		}
	}
}

// resonant makes a carbon of a double bond C_R, unless it is a carbonyl's.
func (t *typing) resonant(c int) {
	if c >= 0 && t.first[c] == "C_2" && t.doubleTo(c, 8, 16) < 0 {
		t.names[c] = "C_R"
	}
}
