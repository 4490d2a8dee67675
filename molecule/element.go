package molecule

// Element is an atomic number; 0 is no element.
type Element uint8

var symbols = [...]string{
	"", "H", "He", "Li", "Be", "B", "C", "N", "O", "F", "Ne", "Na", "Mg", "Al", "Si", "P", "S", "Cl", "Ar",
	"K", "Ca", "Sc", "Ti", "V", "Cr", "Mn", "Fe", "Co", "Ni", "Cu", "Zn", "Ga", "Ge", "As", "Se", "Br", "Kr",
	"Rb", "Sr", "Y", "Zr", "Nb", "Mo", "Tc", "Ru", "Rh", "Pd", "Ag", "Cd", "In", "Sn", "Sb", "Te", "I", "Xe",
	"Cs", "Ba", "La", "Ce", "Pr", "Nd", "Pm", "Sm", "Eu", "Gd", "Tb", "Dy", "Ho", "Er", "Tm", "Yb", "Lu",
	"Hf", "Ta", "W", "Re", "Os", "Ir", "Pt", "Au", "Hg", "Tl", "Pb", "Bi", "Po", "At", "Rn",
	"Fr", "Ra", "Ac", "Th", "Pa", "U", "Np", "Pu", "Am", "Cm", "Bk", "Cf", "Es", "Fm", "Md", "No", "Lr",
	"Rf", "Db", "Sg", "Bh", "Hs", "Mt", "Ds", "Rg", "Cn", "Nh", "Fl", "Mc", "Lv", "Ts", "Og",
}

var numbers = func() map[string]Element {
	byName := make(map[string]Element, len(symbols))
	for z, s := range symbols {
		if z > 0 {
			byName[s] = Element(z)
		}
	}
	return byName
}()

// ElementBySymbol returns the element of a symbol written as usual ("C", "Cl"), or 0 if there is none.
func ElementBySymbol(symbol string) Element { return numbers[symbol] }

// String returns the symbol, or "?" for no element.
func (e Element) String() string {
	if e == 0 || int(e) >= len(symbols) {
		return "?"
	}
	return symbols[e]
}
