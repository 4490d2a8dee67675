package report

import (
	"fmt"

	"tarn/dedupe"
	"tarn/forcefield"
	"tarn/molecule/notation"
	"tarn/molecule/smiles"
	"tarn/search"
)

// Understood is what Tarn read out of an input.
type Understood struct {
	Molecule
	MassU          float64        `json:"mass_g_mol"`
	Charge         int            `json:"charge"`
	Atoms          int            `json:"atoms"`
	Bonds          int            `json:"bonds"`
	RotatableBonds int            `json:"rotatable_bonds"`
	Stereocentres  []Stereocentre `json:"stereocentres"`
	DoubleBonds    []StereoBond   `json:"stereo_double_bonds"`
	// Stereoisomers lists the possible ones where the input leaves some stereochemistry open; one of them must be chosen.
	Stereoisomers []string `json:"stereoisomers,omitempty"`
	Fragments     []string `json:"fragments,omitempty" doc:"The parts of a salt or mixture, one of which must be chosen"`
	SymmetryOrder string   `json:"symmetry_order" doc:"Automorphisms of the molecular graph, like hydrogens on one atom exchangeable"`
	HasGeometry   bool     `json:"has_geometry"`
	// ForceField is empty if MMFF94 covers the molecule, and otherwise says why it does not.
	ForceField string   `json:"mmff94_obstacle,omitempty"`
	Notes      []string `json:"notes,omitempty"`
}

// Stereocentre is a tetrahedral centre or an allene. Label is R or S, r or s for one that depends on others, M or P for an allene; "?" if
// it is open, "-" if the sequence rules do not name it.
type Stereocentre struct {
	Atom  int    `json:"atom"` // counted from 1
	Label string `json:"label"`
}

// StereoBond is a stereogenic double bond. Label is E or Z, or "?" if it is open.
type StereoBond struct {
	Atoms [2]int `json:"atoms"` // counted from 1
	Label string `json:"label"`
}

// mostIsomers bounds the stereoisomers that are listed.
const mostIsomers = 64

// Understand describes a reading. It returns an error if the molecule is larger than can be searched, or its symmetry cannot be found.
func Understand(r *notation.Reading) (Understood, error) {
	m := r.Molecule
	if n := len(m.Atoms); n > search.MaxAtoms {
		return Understood{}, fmt.Errorf("the molecule has %d atoms with its hydrogens; at most %d can be searched", n, search.MaxAtoms)
	}
	u := Understood{
		Molecule: Molecule{Name: r.Name, SMILES: smiles.Canonical(m), Formula: m.Formula(), Key: smiles.Key(m)},
		MassU:    m.Mass(), Charge: m.Charge(), Atoms: len(m.Atoms), Bonds: len(m.Bonds), RotatableBonds: len(m.RotatableBonds()),
		Stereocentres: []Stereocentre{}, DoubleBonds: []StereoBond{}, HasGeometry: r.Geometry != nil, Notes: r.Notes,
	}
	u.describeStereo(r)
	u.Fragments = notation.Fragments(m)
	symmetry, err := dedupe.NewSymmetry(m)
	if err != nil {
		return u, err
	}
	order, err := symmetry.Order()
	if err != nil {
		return u, fmt.Errorf("counting the symmetry of the molecule: %w", err)
	}
	u.SymmetryOrder = order.String()
	if _, err := forcefield.NewMMFF94(m, forcefield.Options{}); err != nil {
		u.ForceField = err.Error()
	}
	return u, nil
}

func (u *Understood) describeStereo(r *notation.Reading) {
	m := r.Molecule
	labels := m.Labels()
	stereo := m.Stereo()
	for i, c := range stereo.Centers {
		u.Stereocentres = append(u.Stereocentres, Stereocentre{c.Atom + 1, shown(labels.Centers[i], c.Specified)})
	}
	for i, d := range stereo.DoubleBonds {
		u.DoubleBonds = append(u.DoubleBonds, StereoBond{[2]int{d.A + 1, d.B + 1}, shown(labels.DoubleBonds[i], d.Specified)})
	}
	if stereo.Unspecified() == 0 || r.Geometry != nil {
		return
	}
	isomers, err := m.Stereoisomers()
	if err != nil {
		u.Notes = append(u.Notes, err.Error())
		return
	}
	for _, isomer := range isomers[:min(len(isomers), mostIsomers)] {
		u.Stereoisomers = append(u.Stereoisomers, smiles.Canonical(isomer))
	}
}

// shown is the label, "?" for an open configuration, and "-" for one that is specified but that the sequence rules do not name.
func shown(label string, specified bool) string {
	switch {
	case !specified:
		return "?"
	case label == "":
		return "-"
	}
	return label
}
