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

// suiteDrawing is one way to draw the bonds of a molecule of the validation suite.
type suiteDrawing struct {
	Bonds         [][3]int `json:"bonds"`
	FormalCharges []int    `json:"formal_charges"`
}

// suiteRecord is a molecule of the validation suite with its published results.
type suiteRecord struct {
	Name           string       `json:"name"`
	Elements       []string     `json:"elements"`
	XYZ            [][3]float64 `json:"xyz"`
	Dative         suiteDrawing `json:"dative"`
	Hypervalent    suiteDrawing `json:"hypervalent"`
	PartialCharges []float64    `json:"partial_charges"`
	AtomTypes      []int        `json:"atom_types"`
	Energy         struct {
		Reference float64 `json:"reference"`
	} `json:"energy_kcal"`
}

// in returns the molecule in one of its drawings.
func (r *suiteRecord) in(d suiteDrawing) *publishedMolecule {
	p := &publishedMolecule{name: r.Name, energy: r.Energy.Reference, charges: d.FormalCharges, types: r.AtomTypes, partial: r.PartialCharges}
	for i, e := range r.Elements {
		p.elements = append(p.elements, molecule.ElementBySymbol(e[:1]+strings.ToLower(e[1:])))
		p.coordinates = append(p.coordinates, r.XYZ[i][:]...)
	}
	for _, b := range d.Bonds {
		p.bonds = append(p.bonds, molecule.Bond{A: b[0], B: b[1], Order: b[2]})
	}
	return p
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
// revision; T. A. Halgren, J. Comput. Chem. 17, 490 (1996)) in both of its drawings and with the Kekulé structure of each
// six-ring flipped.
func TestFullValidationSuite(t *testing.T) {
	records := readSuite(t)
	require.Len(t, records, 618)
	for _, r := range records {
		t.Run(r.Name, func(t *testing.T) {
			requirePublished(t, r.in(r.Dative))
			requirePublished(t, r.in(r.Hypervalent))
			m := r.in(r.Dative).molecule(t)
			for _, ring := range alternateSixRings(m) {
				other := r.in(r.Dative)
				other.bonds = flipped(t, m, ring).Bonds
				requirePublished(t, other)
			}
		})
	}
}
