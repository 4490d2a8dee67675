package typing

// normalise brings the drawings in use to one form: nitro, N-oxide, azide and diazo groups with charges, four-coordinate S,
// P and Cl with charges (single bonds to O⁻, S⁻ and N⁻), sulfoxides, sulfilimines and ylides without.
func (g *graph) normalise() {
	for i, e := range g.element {
		if e == 7 {
			g.separateCharges(i)
		}
	}
	for i, e := range g.element {
		if e == 7 {
			g.shareDiazo(i)
			g.chargeIsonitrile(i)
		}
	}
	for i, e := range g.element {
		switch {
		case (e == 15 || e == 16 || e == 17) && g.degree(i) == 4:
			g.makeDative(i)
			g.joinYlide(i)
		case e == 16 && g.degree(i) == 3:
			g.makeSulfoxide(i)
		}
	}
}

// shift lowers the order of a bond by one and moves an electron pair from one of its atoms to the other.
func (g *graph) shift(bond, from, to int) {
	g.order[bond]--
	g.charge[from]++
	g.charge[to]--
}

// separateCharges gives five-valent nitrogen four bonds and a charge: N(=O)=O becomes N⁺(=O)–O⁻, N=N≡N becomes N=N⁺=N⁻.
func (g *graph) separateCharges(i int) {
	for g.valence(i) > 4 {
		bond, end := -1, -1
		for _, n := range g.neighbors(i) {
			if g.degree(n.Atom) != 1 {
				continue
			}
			if g.element[n.Atom] == 8 && g.order[n.Bond] == 2 {
				bond, end = n.Bond, n.Atom
				break
			}
			if g.element[n.Atom] == 7 && g.order[n.Bond] == 3 {
				bond, end = n.Bond, n.Atom
			}
		}
		if bond < 0 {
			return
		}
		g.shift(bond, i, end)
	}
}

// shareDiazo turns X⁻–N⁺≡N, with X = N or C, into X=N⁺=N⁻.
func (g *graph) shareDiazo(i int) {
	if g.charge[i] != 1 || g.degree(i) != 2 {
		return
	}
	for side, end := range g.neighbors(i) {
		other := g.neighbors(i)[1-side]
		if g.element[end.Atom] == 7 && g.degree(end.Atom) == 1 && g.order[end.Bond] == 3 && g.order[other.Bond] == 1 &&
			(g.element[other.Atom] == 7 || g.element[other.Atom] == 6) && g.charge[other.Atom] == -1 {
			g.order[end.Bond], g.order[other.Bond] = 2, 2
			g.charge[end.Atom]--
			g.charge[other.Atom]++
			return
		}
	}
}

// chargeIsonitrile gives an isonitrile that is drawn without charges its N⁺ and C⁻.
func (g *graph) chargeIsonitrile(i int) {
	c := g.bonded(i, 3, 6)
	if c >= 0 && g.degree(i) == 2 && g.degree(c) == 1 && g.charge[i] == 0 && g.charge[c] == 0 && g.valence(i) == 4 {
		g.charge[i], g.charge[c] = 1, -1
	}
}

// makeDative draws the double bonds of four-coordinate S, P or Cl to terminal O and S, and of S to N, as single bonds.
func (g *graph) makeDative(i int) {
	for _, n := range g.neighbors(i) {
		if g.order[n.Bond] != 2 {
			continue
		}
		e := g.element[n.Atom]
		if (e == 8 || e == 16) && g.degree(n.Atom) == 1 || e == 7 && g.element[i] == 16 {
			g.shift(n.Bond, i, n.Atom)
		}
	}
}

// makeSulfoxide draws S⁺–O⁻, S⁺–N⁻ and S⁺–C⁻ on three-coordinate S as double bonds. Sulfinate and thiosulfinate ions have a
// second terminal atom and stay.
func (g *graph) makeSulfoxide(i int) {
	if g.charge[i] != 1 || g.terminals(i, 8)+g.terminals(i, 16) > 1 {
		return
	}
	bond, partner, anions := -1, -1, 0
	for _, n := range g.neighbors(i) {
		oxide := g.element[n.Atom] == 8 && g.degree(n.Atom) == 1
		if g.order[n.Bond] == 1 && g.charge[n.Atom] == -1 && (oxide || g.isYlideEnd(n.Atom)) {
			bond, partner, anions = n.Bond, n.Atom, anions+1
		}
	}
	if anions == 1 {
		g.unite(bond, i, partner)
	}
}

// isYlideEnd says whether an anion is two-coordinate N or three-coordinate C.
func (g *graph) isYlideEnd(i int) bool {
	return g.element[i] == 7 && g.degree(i) == 2 || g.element[i] == 6 && g.degree(i) == 3
}

// unite raises the order of a bond by one at the expense of the charges of its atoms.
func (g *graph) unite(bond, cation, anion int) {
	g.order[bond]++
	g.charge[cation]--
	g.charge[anion]++
}

// joinYlide draws P⁺–N⁻ and P⁺–C⁻ as double bonds where P has no terminal O or S whose charge it balances.
func (g *graph) joinYlide(i int) {
	if g.element[i] != 15 || g.charge[i] != 1 || g.terminals(i, 8)+g.terminals(i, 16) > 0 {
		return
	}
	for _, n := range g.neighbors(i) {
		if g.order[n.Bond] == 1 && g.charge[n.Atom] == -1 && g.isYlideEnd(n.Atom) {
			g.unite(n.Bond, i, n.Atom)
			return
		}
	}
}
