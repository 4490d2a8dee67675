package ctfile

import (
	"math"
	"strconv"
	"strings"

	"tarn/molecule"
)

// table is a connection table as the file states it, whatever its version.
type table struct {
	atoms     []tableAtom
	bonds     []tableBond
	dimension string // "2D", "3D" or ""
	notes     []string
	noted     map[string]bool
}

type tableAtom struct {
	element  molecule.Element
	isotope  int // mass number or 0
	named    int // isotope that the symbol stands for (D, T)
	position [3]float64
	charge   int
	radical  int // 0, or 1 singlet, 2 doublet, 3 triplet
	valence  int // sum of bond orders with hydrogens, or unstated
	parity   int // 0, or 1 odd, 2 even, 3 either
	line     int
}

const unstated = -1

type tableBond struct {
	a, b      int // indices; a stereo bond is narrow at a
	kind      int // 1 to 3, or aromatic
	direction direction
	line      int
}

const aromatic = 4

// direction is the stereo mark of a bond in a drawing.
type direction int

const (
	plain direction = iota
	wedge
	hash
	either
)

// note keeps a sentence for the user, each once.
func (t *table) note(sentence string) {
	if t.noted == nil {
		t.noted = map[string]bool{}
	}
	if !t.noted[sentence] {
		t.noted[sentence] = true
		t.notes = append(t.notes, sentence)
	}
}

// symbolAtom reads an atom symbol; D and T are isotopes of hydrogen.
func symbolAtom(symbol string) (e molecule.Element, isotope int, ok bool) {
	switch symbol {
	case "D":
		return 1, 2, true
	case "T":
		return 1, 3, true
	}
	if e = molecule.ElementBySymbol(symbol); e == 0 && symbol != "" {
		e = molecule.ElementBySymbol(strings.ToUpper(symbol[:1]) + strings.ToLower(symbol[1:]))
	}
	return e, 0, e != 0
}

func symbolFault(line, atom int, symbol string) error {
	if c := symbol[0]; c >= '0' && c <= '9' {
		return faultf(line, "atom %d has %q where its symbol belongs; is the number of atoms in the counts line right?", atom, symbol)
	}
	return faultf(line, "atom %d is %q, which is no element; give a definite molecule without placeholders, "+
		"atom lists, R groups or lone pairs", atom, symbol)
}

// coordinate reads a coordinate in Å.
func coordinate(text string) (float64, bool) {
	for _, c := range []byte(text) {
		if !strings.ContainsRune("+-.0123456789eE", rune(c)) {
			return 0, false
		}
	}
	v, err := strconv.ParseFloat(text, 64)
	return v, err == nil && math.Abs(v) < 1e6
}

func coordinateFault(line, atom int, text string) error {
	return faultf(line, "atom %d has the coordinate %q; write three numbers in ångström, each below 1000000", atom, text)
}

func (t *table) bond(line, a, b, kind int) (tableBond, error) {
	number := len(t.bonds) + 1
	for _, atom := range [...]int{a, b} {
		if atom < 1 || atom > len(t.atoms) {
			return tableBond{}, faultf(line, "bond %d names atom %d, but there are %d atoms", number, atom, len(t.atoms))
		}
	}
	if a == b {
		return tableBond{}, faultf(line, "bond %d joins atom %d to itself", number, a)
	}
	switch {
	case kind >= 1 && kind <= aromatic:
	case kind >= 5 && kind <= 8:
		return tableBond{}, faultf(line, "bond %d has the query type %d; give single (1), double (2), triple (3) or aromatic (4)", number, kind)
	case kind == 9:
		return tableBond{}, faultf(line, "bond %d is a coordination bond (type 9), which is not supported; "+
			"draw it as a single bond with formal charges", number)
	default:
		return tableBond{}, faultf(line, "bond %d has the unknown type %d; give single (1), double (2), triple (3) or aromatic (4)", number, kind)
	}
	return tableBond{a: a - 1, b: b - 1, kind: kind, line: line}, nil
}

// massFromDifference turns the mass difference of the atom block into a mass number.
func massFromDifference(e molecule.Element, difference int) int {
	return int(math.Round(e.Mass())) + difference
}

// set takes over a property of an atom; it returns what is wrong with the value, or "".
func (a *tableAtom) set(name string, value int) string {
	switch name {
	case "CHG":
		if value < -15 || value > 15 {
			return "the charge " + strconv.Itoa(value) + "; it can be -15 to 15"
		}
		a.charge = value
	case "RAD":
		if value < 0 || value > 3 {
			return "the radical code " + strconv.Itoa(value) + "; it can be 0, 1 (singlet), 2 (doublet) or 3 (triplet)"
		}
		a.radical = value
	case "ISO":
		if value < 1 || value > 999 {
			return "the mass " + strconv.Itoa(value) + "; give a mass number"
		}
		a.isotope = value
	case "VAL":
		if value < -1 || value > 14 {
			return "the valence " + strconv.Itoa(value) + "; it can be -1 (none), 0 (usual) or 1 to 14"
		}
		switch {
		case value < 0:
			a.valence = 0
		case value > 0:
			a.valence = value
		}
	case "CFG":
		if value < 0 || value > 3 {
			return "the configuration " + strconv.Itoa(value) + "; it can be 0 (none), 1 (odd), 2 (even) or 3 (either)"
		}
		a.parity = value
	}
	return ""
}

// shortened keeps messages readable.
func shortened(line string) string {
	if len(line) > 60 {
		return line[:60] + "…"
	}
	return line
}
