package typing

import (
	"fmt"

	"tarn/forcefield/internal/parameters"
	"tarn/molecule"
)

// Assignment is what MMFF94 sees in a molecule.
type Assignment struct {
	Symbols       []string  // one an atom
	Types         []int     // numeric type, one an atom
	FormalCharges []float64 // shared over equivalent atoms, e, one an atom
	Orders        []int     // bond orders after normalisation, one a bond
	AromaticBonds []bool    // ring bonds of aromatic rings, one a bond
}

// Error names an atom (index) whose environment has no type.
type Error struct {
	Atom   int
	Reason string
}

func (e *Error) Error() string { return fmt.Sprintf("atom %d: %s", e.Atom+1, e.Reason) }

const noType = "MMFF94 has no atom type for this environment"

// typer holds the state of one assignment.
type typer struct {
	*graph
	rings   *aromaticity
	symbols []string
}

// Assign types every atom of m. The error is an *[Error].
func Assign(m *molecule.Molecule, tables *parameters.Tables) (*Assignment, error) {
	g := newGraph(m)
	if err := g.checkElements(); err != nil {
		return nil, err
	}
	g.normalise()
	if err := g.checkValences(); err != nil {
		return nil, err
	}
	t := &typer{graph: g, rings: g.findAromaticity(), symbols: make([]string, g.atoms())}
	if err := t.assignSymbols(tables); err != nil {
		return nil, err
	}
	a := &Assignment{
		Symbols: t.symbols, Types: make([]int, g.atoms()), FormalCharges: t.formalCharges(),
		Orders: g.order, AromaticBonds: t.rings.bonds,
	}
	for i, s := range t.symbols {
		atomType, ok := tables.Type(s)
		if !ok {
			return nil, &Error{i, noType}
		}
		a.Types[i] = atomType
	}
	return a, t.checkCharges(a.FormalCharges)
}

func (t *typer) assignSymbols(tables *parameters.Tables) error {
	for i, e := range t.element {
		if e == 6 {
			t.symbols[i] = t.carbon(i)
		}
	}
	for i, e := range t.element {
		switch {
		case e == 1 || e == 6:
		case t.degree(i) == 0:
			t.symbols[i] = ions[ion{e, t.charge[i]}]
		case e == 7:
			t.symbols[i] = t.nitrogen(i)
		case e == 8:
			t.symbols[i] = t.oxygen(i)
		default:
			t.symbols[i] = t.otherElement(i)
		}
	}
	for i, e := range t.element {
		if e != 1 && t.symbols[i] == "" {
			return &Error{i, noType}
		}
	}
	t.refineRings()
	for i, e := range t.element {
		if e != 1 {
			continue
		}
		if t.degree(i) == 1 {
			t.symbols[i], _ = tables.HydrogenOn(t.symbols[t.neighbors(i)[0].Atom])
		}
		if t.symbols[i] == "" {
			return &Error{i, "MMFF94 has no type for hydrogen in this environment"}
		}
	}
	return nil
}
