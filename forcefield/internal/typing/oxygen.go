package typing

// oxygen returns the symbol of a bonded oxygen atom; inside an aromatic ring it is provisional. The carbons are typed.
func (t *typer) oxygen(i int) string {
	switch bonds := t.degree(i); {
	case bonds == 3:
		return "O+"
	case bonds == 2 && t.valence(i) == 3:
		return "O=+"
	case bonds == 2:
		return t.bridgingOxygen(i)
	case bonds > 3:
		return ""
	}
	n := t.neighbors(i)[0]
	switch t.element[n.Atom] {
	case 1:
		return "OM"
	case 6:
		return t.oxygenOnCarbon(n.Atom, t.order[n.Bond])
	case 7:
		return t.oxygenOnNitrogen(n.Atom, t.order[n.Bond])
	case 15:
		return [...]string{"", "OP", "O2P", "O3P", "O4P"}[t.terminals(n.Atom, 8)]
	case 16:
		return t.oxygenOnSulfur(n.Atom)
	case 17:
		return "O4CL"
	}
	return ""
}

// bridgingOxygen types O with two single bonds.
func (t *typer) bridgingOxygen(i int) string {
	if t.count(i, 1) == 2 {
		return "OH2"
	}
	for _, partner := range conjugatedOxygen {
		for _, n := range t.neighbors(i) {
			if t.element[n.Atom] == 6 && t.has(n.Atom, 2, partner.element) {
				return partner.symbol
			}
		}
	}
	for _, n := range t.neighbors(i) {
		if t.element[n.Atom] != 7 {
			continue
		}
		if t.terminals(n.Atom, 8) > 1 {
			return "ONO2"
		}
		if t.has(n.Atom, 2, 8) {
			return "ON=O"
		}
	}
	for _, n := range t.neighbors(i) {
		oxygens := t.count(n.Atom, 8)
		switch e := t.element[n.Atom]; {
		case e == 16 && oxygens == 4:
			return "OSO3"
		case e == 16 && oxygens == 3:
			return "OSO2"
		case e == 16 && oxygens == 2 && t.degree(n.Atom) == 3 && t.terminals(n.Atom, 8) == 1:
			return "OS=O"
		case e == 16 && oxygens == 2:
			return "OSO"
		case e == 16:
			return "-OS"
		case e == 15:
			return [...]string{"", "-OP", "OPO", "OPO2", "OPO3"}[oxygens]
		}
	}
	if t.count(i, 6) > 0 {
		return "OR"
	}
	return "-O-"
}

func (t *typer) oxygenOnCarbon(carbon, order int) string {
	switch {
	case t.symbols[carbon] == "CO2M":
		return "O2CM"
	case order == 1 && t.degree(carbon) == 4:
		return "OM"
	case order == 1:
		return "OM2"
	}
	switch t.symbols[carbon] {
	case "C=ON", "CONN", "COON":
		return "O=CN"
	case "COO", "COOO":
		return "O=CO"
	case "C=OR":
		return "O=CR"
	}
	return "O=C"
}

func (t *typer) oxygenOnNitrogen(nitrogen, order int) string {
	terminal, all := t.terminals(nitrogen, 8), t.count(nitrogen, 8)
	switch {
	case order == 2 && t.degree(nitrogen) == 2:
		return "O=N"
	case t.valence(nitrogen) == 3:
		return "OM"
	case terminal == 1:
		return "OXN"
	case terminal == 2 && all == 2:
		return "O2N"
	case terminal == 2:
		return "O2NO"
	}
	return "O3N"
}

func (t *typer) oxygenOnSulfur(sulfur int) string {
	terminal := t.terminals(sulfur, 8)
	switch bonds := t.degree(sulfur); {
	case bonds == 4:
		return [...]string{"", "O-S", "O2S", "O3S", "O4S"}[terminal]
	case bonds == 3 && terminal > 1:
		return "O2S"
	case bonds == 3 && t.terminals(sulfur, 16) > 0:
		return "OSMS"
	case bonds == 3:
		return "O=S"
	case bonds == 2 && t.valence(sulfur) == 4:
		return "O=S="
	}
	return ""
}
