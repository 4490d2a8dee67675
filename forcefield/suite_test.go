package forcefield

import (
	"bufio"
	"encoding/json"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/molecule"
)

// drawing is one way to draw the bonds of a molecule of the validation suite.
type drawing struct {
	Bonds         [][3]int `json:"bonds"`
	FormalCharges []int    `json:"formal_charges"`
}

// suiteRecord is a molecule of the validation suite with its published results.
type suiteRecord struct {
	Name           string       `json:"name"`
	Elements       []string     `json:"elements"`
	XYZ            [][3]float64 `json:"xyz"`
	Dative         drawing      `json:"dative"`
	Hypervalent    drawing      `json:"hypervalent"`
	PartialCharges []float64    `json:"partial_charges"`
	AtomTypes      []int        `json:"atom_types"`
	Energy         struct {
		Reference float64 `json:"reference"`
	} `json:"energy_kcal"`
}

func (r *suiteRecord) molecule(t *testing.T, d drawing) *molecule.Molecule {
	atoms := make([]molecule.Atom, len(r.Elements))
	for i, e := range r.Elements {
		atoms[i] = molecule.Atom{Element: molecule.ElementBySymbol(e[:1] + strings.ToLower(e[1:])), Charge: d.FormalCharges[i]}
	}
	var bonds []molecule.Bond
	for _, b := range d.Bonds {
		bonds = append(bonds, molecule.Bond{A: b[0], B: b[1], Order: b[2]})
	}
	m, err := molecule.New(r.Name, atoms, bonds, nil, nil)
	require.NoError(t, err)
	return m
}

func (r *suiteRecord) coordinates() []float64 {
	var x []float64
	for _, p := range r.XYZ {
		x = append(x, p[:]...)
	}
	return x
}

// readSuite returns the validation suite, or skips the test where it is not at hand.
func readSuite(t *testing.T) []suiteRecord {
	folder := os.Getenv("TARN_SHARED")
	if folder == "" {
		folder = filepath.Join("..", "..", "shared")
	}
	path := filepath.Join(folder, "mmff94", "validation.jsonl")
	file, err := os.Open(path)
	if err != nil {
		t.Skipf("SKIPPED, not checked: the full validation suite is not at %s (set TARN_SHARED to its folder)", path)
	}
	defer file.Close()
	var records []suiteRecord
	lines := bufio.NewScanner(file)
	lines.Buffer(nil, 1<<20)
	for lines.Scan() {
		var r suiteRecord
		require.NoError(t, json.Unmarshal(lines.Bytes(), &r))
		records = append(records, r)
	}
	require.NoError(t, lines.Err())
	return records
}

// TestFullValidationSuite compares types, charges and energies with the published MMFF94 validation suite (November 1998
// revision; T. A. Halgren, J. Comput. Chem. 17, 490 (1996)) in both of its drawings.
func TestFullValidationSuite(t *testing.T) {
	records := readSuite(t)
	require.Len(t, records, 618)
	for _, r := range records {
		for kind, d := range map[string]drawing{"dative": r.Dative, "hypervalent": r.Hypervalent} {
			t.Run(r.Name+"/"+kind, func(t *testing.T) {
				f, err := NewMMFF94(r.molecule(t, d), Options{})
				require.NoError(t, err)
				require.Equal(t, r.AtomTypes, f.AtomTypes())
				require.InDeltaSlice(t, r.PartialCharges, f.PartialCharges(), 1e-4)
				require.InDelta(t, r.Energy.Reference, f.Energy(r.coordinates(), nil), 1e-4)
			})
		}
	}
}
