package parameters

import (
	"embed"
	"fmt"
	"sync"

	"tarn/molecule"
)

//go:embed tables/*.tsv
var files embed.FS

// Atom is what the tables say about one numeric atom type.
type Atom struct {
	Element    molecule.Element
	Bonds      int    // number of bonded atoms
	MinValence int    // sum of bond orders; MinValence < MaxValence where the drawing decides
	MaxValence int    //
	Multiple   int    // 2 or 3: takes part in double or triple bonds; 1: strongly delocalised
	LonePair   bool   // has a lone pair of π symmetry
	Aromatic   bool   //
	Linear     bool   // centre of linear angles
	Conjugates bool   // forms single bonds between multiple bonds
	Fallback   [3]int // the types of look-up levels 3, 4 and 5

	Polarizability     float64 // α, Å³
	EffectiveElectrons float64 // N
	A                  float64 // Å^¼
	G                  float64
	Donor, Acceptor    bool // of hydrogen bonds

	Increment float64 // partial bond charge increment, e
	Shared    float64 // fraction of the formal charge that is handed to the neighbours
}

// Bond is a reference length in Å and a force constant in md/Å.
type Bond struct{ Length, Stiffness float64 }

// Angle is a reference angle in degrees and a force constant in md·Å/rad².
type Angle struct{ Degrees, Stiffness float64 }

// Torsion holds the three barriers in kcal/mol.
type Torsion struct{ V1, V2, V3 float64 }

// Coupling holds the stretch-bend constants of the first and second bond of an angle in md/rad.
type Coupling struct{ First, Second float64 }

// Tables is one variant of the published parameters. It is immutable.
type Tables struct {
	atoms         map[int]Atom
	types         map[string]int    // by symbol
	hydrogens     map[string]string // symbol of the hydrogens on an atom, by its symbol
	bonds         map[key]Bond
	elementBonds  map[key]Bond
	angles        map[key]Angle
	couplings     map[key]Coupling
	rowCouplings  map[key]Coupling
	outOfPlanes   map[key]float64
	torsions      map[key]Torsion
	chargeOfBonds map[key]float64
	contacts      []contact // of pairs of types
}

// key packs the class of an interaction and up to four types.
type key uint64

func keyOf(class int, types ...int) key {
	k := key(class)
	for _, t := range types {
		k = k<<8 | key(t)
	}
	return k
}

var (
	standard = sync.OnceValues(func() (*Tables, error) { return read(false) })
	static   = sync.OnceValues(func() (*Tables, error) { return read(true) })
)

// Load returns the tables of MMFF94, or of MMFF94s if planar is set. They are read once and shared.
func Load(planar bool) (*Tables, error) {
	if planar {
		return static()
	}
	return standard()
}

// Type returns the numeric type of a symbol.
func (t *Tables) Type(symbol string) (int, bool) {
	n, ok := t.types[symbol]
	return n, ok
}

// HydrogenOn returns the symbol of a hydrogen that is bonded to an atom with the given symbol.
func (t *Tables) HydrogenOn(symbol string) (string, bool) {
	h, ok := t.hydrogens[symbol]
	return h, ok
}

// Atom returns the properties of a type; there are none for a type that does not exist.
func (t *Tables) Atom(atomType int) Atom { return t.atoms[atomType] }

func read(planar bool) (*Tables, error) {
	t := &Tables{
		atoms: map[int]Atom{}, types: map[string]int{}, hydrogens: map[string]string{},
		bonds: map[key]Bond{}, elementBonds: map[key]Bond{}, angles: map[key]Angle{},
		couplings: map[key]Coupling{}, rowCouplings: map[key]Coupling{}, outOfPlanes: map[key]float64{},
		torsions: map[key]Torsion{}, chargeOfBonds: map[key]float64{},
	}
	steps := []struct {
		file string
		line func(r *row)
	}{
		{"atoms", t.readAtom},
		{"symbols", t.readSymbol},
		{"bonds", func(r *row) {
			k := r.classedKey(2)
			put(r, t.bonds, k, Bond{Length: r.number(), Stiffness: r.number()})
		}},
		{"bond_elements", func(r *row) {
			k := keyOf(0, r.integers("-", 2)...)
			put(r, t.elementBonds, k, Bond{Length: r.number(), Stiffness: r.number()})
		}},
		{"angles", func(r *row) {
			k := r.classedKey(3)
			put(r, t.angles, k, Angle{Degrees: r.number(), Stiffness: r.number()})
		}},
		{"stretch_bends", func(r *row) {
			k := r.classedKey(3)
			put(r, t.couplings, k, Coupling{First: r.number(), Second: r.number()})
		}},
		{"stretch_bend_rows", func(r *row) {
			k := keyOf(0, r.integers("-", 3)...)
			put(r, t.rowCouplings, k, Coupling{First: r.number(), Second: r.number()})
		}},
		{"out_of_planes", func(r *row) {
			k := keyOf(0, r.integers("-", 4)...)
			stiffness, planarStiffness := r.number(), r.number()
			if planar {
				stiffness = planarStiffness
			}
			put(r, t.outOfPlanes, k, stiffness)
		}},
		{"torsions", func(r *row) {
			k := r.classedKey(4)
			put(r, t.torsions, k, Torsion{r.number(), r.number(), r.number()})
		}},
		{"charges", func(r *row) {
			k := r.classedKey(2)
			put(r, t.chargeOfBonds, k, r.number())
		}},
	}
	for _, s := range steps {
		if err := eachRow(s.file, s.line); err != nil {
			return nil, err
		}
	}
	t.tabulateContacts()
	if !planar {
		return t, nil
	}
	return t, eachRow("torsions_static", func(r *row) {
		k := r.classedKey(4)
		if _, ok := t.torsions[k]; !ok {
			r.fail("replaces no row of torsions.tsv")
		}
		t.torsions[k] = Torsion{r.number(), r.number(), r.number()}
	})
}

// put adds a row; a key that is there already is an error.
func put[V any](r *row, table map[key]V, k key, v V) {
	if _, ok := table[k]; ok {
		r.fail("listed twice")
	}
	table[k] = v
}

func (t *Tables) readAtom(r *row) {
	atomType := r.integer()
	a := Atom{Element: molecule.Element(r.integer()), Bonds: r.integer()}
	a.MinValence, a.MaxValence = r.span()
	a.Multiple = r.integer()
	for _, flag := range r.text() {
		switch flag {
		case 'P':
			a.LonePair = true
		case 'A':
			a.Aromatic = true
		case 'L':
			a.Linear = true
		case 'S':
			a.Conjugates = true
		case '-':
		default:
			r.fail(fmt.Sprintf("flag %q is unknown", flag))
		}
	}
	copy(a.Fallback[:], r.integers("/", 3))
	a.Polarizability, a.EffectiveElectrons, a.A, a.G = r.number(), r.number(), r.number(), r.number()
	bonding := r.text()
	a.Donor, a.Acceptor = bonding == "donor", bonding == "acceptor"
	a.Increment, a.Shared = r.number(), r.number()
	if _, ok := t.atoms[atomType]; ok {
		r.fail("listed twice")
	}
	t.atoms[atomType] = a
}

func (t *Tables) readSymbol(r *row) {
	symbol, atomType, hydrogen := r.text(), r.integer(), r.text()
	if _, ok := t.types[symbol]; ok {
		r.fail("listed twice")
	}
	t.types[symbol] = atomType
	if hydrogen != "-" {
		t.hydrogens[symbol] = hydrogen
	}
}
