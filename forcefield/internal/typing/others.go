package typing

import (
	"fmt"

	"tarn/molecule"
)

// ion is an atom without bonds.
type ion struct {
	element molecule.Element
	charge  int
}

// ions holds the symbols of the ions that have a type.
var ions = map[ion]string{
	{3, 1}: "LI+", {9, -1}: "F-", {11, 1}: "NA+", {12, 2}: "MG+2", {17, -1}: "CL-", {19, 1}: "K+", {20, 2}: "CA+2",
	{26, 2}: "FE+2", {26, 3}: "FE+3", {29, 1}: "CU+1", {29, 2}: "CU+2", {30, 2}: "ZN+2", {35, -1}: "BR-",
}

// ionCharges returns the charges that an element may have as an ion, ascending.
func ionCharges(e molecule.Element) []string {
	var charges []string
	for charge := -1; charge <= 3; charge++ {
		if ions[ion{e, charge}] != "" {
			charges = append(charges, fmt.Sprintf("%+d", charge))
		}
	}
	return charges
}

// conjugatedOxygen holds the symbols of O on a carbon by the doubly bonded partner of that carbon, in order of precedence.
var conjugatedOxygen = [...]struct {
	element molecule.Element
	symbol  string
}{{8, "OC=O"}, {16, "OC=S"}, {7, "OC=N"}, {6, "OC=C"}}

// otherElement returns the symbol of a bonded Si, P, S or halogen atom.
func (t *typer) otherElement(i int) string {
	bonds := t.degree(i)
	switch t.element[i] {
	case 9:
		return "F"
	case 14:
		return "SI"
	case 15:
		switch bonds {
		case 4:
			return [...]string{"PTET", "PO", "PO2", "PO3", "PO4"}[t.count(i, 8)]
		case 3:
			return "P"
		case 2:
			return "-P=C"
		}
	case 16:
		return t.sulfur(i)
	case 17:
		if bonds == 4 {
			return "CLO4"
		}
		return "CL"
	case 35:
		return "BR"
	case 53:
		return "I"
	}
	return ""
}

func (t *typer) sulfur(i int) string {
	oxides := t.terminals(i, 8)
	switch bonds := t.degree(i); bonds {
	case 4:
		return t.sulfonylSulfur(i)
	case 3:
		switch {
		case oxides > 1 && t.has(i, 2, 6):
			return "=SO2"
		case oxides > 1 && t.valence(i)+t.charge[i] == 4:
			return "SO2M"
		case oxides > 1:
			return ""
		case oxides == 1 && t.terminals(i, 16) > 0:
			return "SSOM"
		case oxides == 1:
			return "S=O"
		}
		return ">S=N"
	case 2:
		switch {
		case t.valence(i) == 2:
			return "S"
		case t.has(i, 2, 6) && oxides == 1:
			return "=S=O"
		}
		return ""
	}
	n := t.neighbors(i)[0]
	switch e := t.element[n.Atom]; {
	case e == 15:
		return "S-P"
	case t.symbols[n.Atom] == "CS2M":
		return "S2CM"
	case e == 6 && t.order[n.Bond] == 2:
		return "S=C"
	case e == 16:
		return "SSMO"
	case t.order[n.Bond] == 1:
		return "SM"
	}
	return ""
}

func (t *typer) sulfonylSulfur(i int) string {
	oxygens := t.count(i, 8)
	switch {
	case t.terminals(i, 8)+t.terminals(i, 16)+t.count(i, 7) < 2:
		return ""
	case t.terminals(i, 8) < 2:
		return "SNO"
	case oxygens == 4:
		return "SO4"
	case oxygens == 3:
		return "SO3"
	case t.count(i, 7) > 0:
		return "SO2N"
	}
	return "SO2"
}
