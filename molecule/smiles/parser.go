package smiles

import (
	"errors"
	"fmt"
	"strings"
	"unicode/utf8"

	"tarn/molecule"
)

// Limits of what Parse takes. They keep the work bounded; a molecule near them is far beyond any conformer search.
const (
	MaxLength = 100_000 // bytes
	MaxAtoms  = 5_000   // written atoms
)

// Parse reads one SMILES with all that OpenSMILES defines, except the wildcard atom and square planar, trigonal bipyramidal
// and octahedral centres, which it refuses. Parts separated by dots come out as one molecule; the caller judges its
// Fragments. White space around the SMILES is ignored. Every error is a *SyntaxError.
func Parse(s string) (*molecule.Molecule, error) {
	trimmed := strings.TrimSpace(s)
	p := &parser{input: trimmed, openings: map[int]opening{}}
	if len(trimmed) > MaxLength {
		return nil, &SyntaxError{Input: trimmed[:80], Column: 1, Reason: fmt.Sprintf(
			"the SMILES has %d bytes; at most %d are read", len(trimmed), MaxLength)}
	}
	if err := p.run(); err != nil {
		return nil, err
	}
	m, err := p.draft.Build()
	if err != nil {
		return nil, p.chemistryError(err)
	}
	return m, nil
}

// parser reads from left to right; branches are kept on a stack of its own, so that nesting cannot overflow anything.
type parser struct {
	input string
	pos   int

	draft    molecule.Draft
	written  []writtenAtom
	bonds    []writtenBond // parallel to draft.Bonds
	openings map[int]opening
	branches []branch

	previous int // atom that the next one is bonded to, -1 at the start of a part
	bond     bondMark
}

// writtenAtom is what the stereodescriptors need to know of an atom beyond the draft.
type writtenAtom struct {
	column    int
	neighbors []int // in the order of writing; closurePlace-n until ring closure n is closed
	preceded  bool  // neighbors[0] is the atom written before it
	chirality chirality
}

// bondMark is a bond symbol waiting for its second atom.
type bondMark struct {
	symbol byte // 0 if none was written
	column int
}

// writtenBond adds the direction of a bond: symbol is '/' or '\\' as seen from the first atom of the draft bond, else 0.
type writtenBond struct {
	direction byte
	column    int
}

type branch struct {
	atom, column int
	empty        bool
}

func (p *parser) run() error {
	p.previous = -1
	if p.input == "" {
		return p.fault(0, "the SMILES is empty")
	}
	for p.pos < len(p.input) {
		if err := p.step(); err != nil {
			return err
		}
	}
	if p.bond.symbol != 0 {
		return p.faultColumn(p.bond.column, "the bond %q leads to no atom", p.bond.symbol)
	}
	if len(p.branches) > 0 {
		return p.faultColumn(p.branches[len(p.branches)-1].column, "the branch is not closed")
	}
	if p.previous < 0 {
		return p.fault(p.pos-1, "an atom must follow the dot")
	}
	if err := p.checkClosures(); err != nil {
		return err
	}
	if err := p.placeCenters(); err != nil {
		return err
	}
	return p.placeDoubleBonds()
}

func (p *parser) step() error {
	start := p.pos
	switch c := p.input[p.pos]; c {
	case '(':
		if p.previous < 0 || p.bond.symbol != 0 || p.afterOpening() {
			return p.fault(start, "a branch must follow an atom")
		}
		p.branches = append(p.branches, branch{atom: p.previous, column: p.column(start), empty: true})
		p.pos++
	case ')':
		return p.closeBranch()
	case '.':
		if p.previous < 0 || p.bond.symbol != 0 {
			return p.fault(start, "a dot must stand between two parts")
		}
		p.previous = -1
		p.pos++
	case '-', '=', '#', '$', ':', '/', '\\':
		if p.previous < 0 {
			return p.fault(start, "the bond %q has no atom before it", c)
		}
		if p.bond.symbol != 0 {
			return p.fault(start, "two bond symbols in a row")
		}
		p.bond = bondMark{c, p.column(start)}
		p.pos++
	case '%', '0', '1', '2', '3', '4', '5', '6', '7', '8', '9':
		if p.afterOpening() {
			return p.fault(start, "a ring closure must follow its atom, not the opening of a branch")
		}
		return p.ringClosure()
	case '[':
		return p.bracketAtom()
	default:
		return p.organicAtom()
	}
	return nil
}

// afterOpening tells whether nothing has been written yet in the innermost branch.
func (p *parser) afterOpening() bool {
	return len(p.branches) > 0 && p.branches[len(p.branches)-1].empty
}

func (p *parser) closeBranch() error {
	if len(p.branches) == 0 {
		return p.fault(p.pos, "no branch is open here")
	}
	if p.bond.symbol != 0 {
		return p.faultColumn(p.bond.column, "the bond %q leads to no atom", p.bond.symbol)
	}
	top := p.branches[len(p.branches)-1]
	if top.empty {
		return p.fault(p.pos, "the branch is empty")
	}
	if p.previous < 0 {
		return p.fault(p.pos, "an atom must follow the dot")
	}
	p.branches = p.branches[:len(p.branches)-1]
	p.previous = top.atom
	p.pos++
	return nil
}

// addAtom appends an atom read from start to the present position and bonds it to the previous one.
func (p *parser) addAtom(start int, a molecule.DraftAtom, mark chirality) error {
	if len(p.draft.Atoms) == MaxAtoms {
		return p.fault(start, "more than %d atoms", MaxAtoms)
	}
	column := p.column(start)
	a.Place = fmt.Sprintf("column %d", column)
	index := len(p.draft.Atoms)
	p.draft.Atoms = append(p.draft.Atoms, a)
	w := writtenAtom{column: column, preceded: p.previous >= 0, chirality: mark}
	if w.preceded {
		w.neighbors = append(w.neighbors, p.previous)
	}
	for range max(0, a.Hydrogens) {
		w.neighbors = append(w.neighbors, molecule.ImplicitHydrogen)
	}
	p.written = append(p.written, w)
	if w.preceded {
		p.written[p.previous].neighbors = append(p.written[p.previous].neighbors, index)
		if err := p.addBond(p.previous, index, p.bond); err != nil {
			return err
		}
	}
	p.bond = bondMark{}
	p.previous = index
	if len(p.branches) > 0 {
		p.branches[len(p.branches)-1].empty = false
	}
	return nil
}

// addBond appends the bond that a symbol between atoms a and b, seen from a, stands for.
func (p *parser) addBond(a, b int, mark bondMark) error {
	bond := molecule.DraftBond{A: a, B: b, Order: 1}
	written := writtenBond{column: mark.column}
	switch mark.symbol {
	case 0:
		if p.draft.Atoms[a].Aromatic && p.draft.Atoms[b].Aromatic {
			bond.Order = 0
		}
	case '=':
		bond.Order = 2
	case '#':
		bond.Order = 3
	case '$':
		bond.Order = 4
	case ':':
		if !p.draft.Atoms[a].Aromatic || !p.draft.Atoms[b].Aromatic {
			return p.faultColumn(mark.column, "an aromatic bond needs aromatic atoms (lower case) at both ends")
		}
		bond.Order = 0
	case '/', '\\':
		written.direction = mark.symbol
	}
	p.draft.Bonds = append(p.draft.Bonds, bond)
	p.bonds = append(p.bonds, written)
	return nil
}

// column returns the place of a byte counted in characters from 1.
func (p *parser) column(pos int) int { return utf8.RuneCountInString(p.input[:pos]) + 1 }

func (p *parser) fault(pos int, format string, arguments ...any) error {
	return p.faultColumn(p.column(pos), format, arguments...)
}

func (p *parser) faultColumn(column int, format string, arguments ...any) error {
	return &SyntaxError{Input: p.input, Column: column, Reason: fmt.Sprintf(format, arguments...)}
}

// chemistryError puts the caret under the atom that an error of Build names.
func (p *parser) chemistryError(err error) error {
	atom := -1
	var valence *molecule.ValenceError
	var kekule *molecule.KekuleError
	var build *molecule.BuildError
	switch {
	case errors.As(err, &valence):
		atom = valence.Atom
	case errors.As(err, &kekule):
		atom = kekule.Atoms[0]
	case errors.As(err, &build):
		atom = build.Atom
	}
	column := 1
	if atom >= 0 && atom < len(p.written) {
		column = p.written[atom].column
	}
	return &SyntaxError{Input: p.input, Column: column, Reason: err.Error(), cause: err}
}
