package molecule

// Draft is a molecule as a notation gives it: hydrogens may be implied, ring bonds may be aromatic instead of single and
// double. [Draft.Build] completes it.
type Draft struct {
	Name        string
	Atoms       []DraftAtom
	Bonds       []DraftBond
	Centers     []Center // Neighbors may name ImplicitHydrogen
	DoubleBonds []DoubleBond
}

// DraftAtom is an atom with the number of hydrogens that the notation implies without writing them as atoms.
type DraftAtom struct {
	Atom
	Hydrogens int    // FillValence, or a stated number
	Aromatic  bool   // written as aromatic (lower case in SMILES)
	Place     string // where it stands in the input, for error messages: "column 7", "line 12"
}

// DraftBond is a bond; order 0 stands for an aromatic bond whose place in the Kekulé structure is still to be found.
type DraftBond struct {
	A, B, Order int
}

const (
	// FillValence asks for as many hydrogens as the usual valence of the element leaves room for.
	FillValence = -1
	// ImplicitHydrogen stands in a Center for the one hydrogen that the notation does not write as an atom.
	ImplicitHydrogen = -2
)
