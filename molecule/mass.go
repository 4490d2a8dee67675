package molecule

import (
	_ "embed"
	"fmt"
	"strconv"
	"strings"
)

// elements.tsv holds the abridged standard atomic weights of IUPAC (Prohaska et al., Pure Appl. Chem. 94, 573 (2022); for
// elements without one the mass number of the longest-lived isotope known) in u and the covalent radii of Cordero et al.,
// Dalton Trans. 2832 (2008) in Å (C: sp3; Mn, Fe, Co: low spin). isotopes.tsv holds masses of common isotopes in u from the
// atomic mass evaluation of 2020 (Wang et al., Chin. Phys. C 45, 030003 (2021)). All written down from memory.
var (
	//go:embed elements.tsv
	elementTable string
	//go:embed isotopes.tsv
	isotopeTable string

	weights, radii = loadElements()
	isotopeMasses  = loadIsotopes()
)

type isotope struct {
	element Element
	number  int
}

func loadElements() (weights, radii [len(symbols)]float64) {
	for _, row := range tableRows(elementTable, 4) {
		e := ElementBySymbol(row[1])
		if strconv.Itoa(int(e)) != row[0] {
			panic(fmt.Sprintf("elements.tsv: %s is not element %s", row[1], row[0]))
		}
		weights[e] = tableNumber(row[2])
		if row[3] != "-" {
			radii[e] = tableNumber(row[3])
		}
	}
	return weights, radii
}

func loadIsotopes() map[isotope]float64 {
	masses := map[isotope]float64{}
	for _, row := range tableRows(isotopeTable, 3) {
		masses[isotope{Element(tableNumber(row[0])), int(tableNumber(row[1]))}] = tableNumber(row[2])
	}
	return masses
}

func tableRows(table string, columns int) [][]string {
	var rows [][]string
	for line := range strings.Lines(table) {
		if strings.HasPrefix(line, "#") {
			continue
		}
		row := strings.Split(strings.TrimSpace(line), "\t")
		if len(row) != columns {
			panic(fmt.Sprintf("embedded table: %q has not %d columns", line, columns))
		}
		rows = append(rows, row)
	}
	return rows
}

func tableNumber(text string) float64 {
	x, err := strconv.ParseFloat(text, 64)
	if err != nil {
		panic("embedded table: " + err.Error())
	}
	return x
}

// Mass returns the standard atomic weight in u, or 0 for no element.
func (e Element) Mass() float64 {
	if int(e) >= len(weights) {
		return 0
	}
	return weights[e]
}

// CovalentRadius returns the covalent radius in Å, or 0 if none is published (beyond curium).
func (e Element) CovalentRadius() float64 {
	if int(e) >= len(radii) {
		return 0
	}
	return radii[e]
}

// Mass returns the mass of the atom in u: that of its isotope if one is given (its mass number where the table has no exact
// mass), else the standard atomic weight.
func (a Atom) Mass() float64 {
	if a.Isotope == 0 {
		return a.Element.Mass()
	}
	if mass, known := isotopeMasses[isotope{a.Element, a.Isotope}]; known {
		return mass
	}
	return float64(a.Isotope)
}

// Masses returns the mass of every atom in u.
func (m *Molecule) Masses() []float64 {
	masses := make([]float64, len(m.Atoms))
	for i, a := range m.Atoms {
		masses[i] = a.Mass()
	}
	return masses
}

// Mass returns the molecular mass in u.
func (m *Molecule) Mass() float64 {
	total := 0.0
	for _, mass := range m.Masses() {
		total += mass
	}
	return total
}
