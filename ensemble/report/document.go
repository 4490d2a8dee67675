package report

import (
	"cmp"
	"slices"

	"tarn/ensemble"
	"tarn/molecule"
	"tarn/search"
)

// Molecule identifies what the minima belong to.
type Molecule struct {
	Name    string `json:"name"`
	SMILES  string `json:"smiles"`
	Formula string `json:"formula"`
	Key     string `json:"key"`
}

// Document is a ranked list of minima with all that a reader needs to judge it. Energies are in kcal/mol and lengths in Å, or both in
// reduced units for the field lj.
type Document struct {
	Molecule     Molecule        `json:"molecule"`
	Field        string          `json:"field"`
	Method       search.Method   `json:"method,omitempty"`
	Seed         *uint64         `json:"seed,omitempty"`
	Settings     search.Settings `json:"settings"`
	TemperatureK float64         `json:"temperature_k"` // of the populations
	Quenches     int             `json:"quenches"`
	Evaluations  int             `json:"energy_evaluations"`
	WallSeconds  float64         `json:"wall_s"`
	Coverage     search.Coverage `json:"coverage"`
	StopReason   string          `json:"stop_reason,omitempty"`
	Warnings     []string        `json:"warnings,omitempty"`
	Elements     []string        `json:"elements"`
	Minima       []Minimum       `json:"minima"`
	NextCursor   string          `json:"next_cursor,omitempty"`
}

// Minimum is one row of the ranking.
type Minimum struct {
	Rank                   int          `json:"rank"`
	Energy                 float64      `json:"energy_kcal_mol"`
	Relative               float64      `json:"relative_kcal_mol"`
	Hits                   int          `json:"hits"`
	Degeneracy             int          `json:"degeneracy"`
	SymmetryNumber         int          `json:"symmetry_number"`
	Population             float64      `json:"population"`
	FreeEnergyRelative     *float64     `json:"free_energy_relative_kcal_mol"`
	PopulationFreeEnergy   *float64     `json:"population_free_energy"`
	RotationalConstantsMHz []float64    `json:"rotational_constants_mhz"`
	DipoleDebye            float64      `json:"dipole_debye"`
	LowestModeCM1          float64      `json:"lowest_mode_cm1"`
	XYZ                    [][3]float64 `json:"xyz"`
}

// Ranked returns the rows for minima, ranked by energy and weighed at a temperature in kelvin. Populations by free energy are left
// out (null) for clusters, whose minima have no masses.
func Ranked(minima []search.Minimum, temperatureK float64) []Minimum {
	sorted := slices.Clone(minima)
	slices.SortStableFunc(sorted, func(a, b search.Minimum) int { return cmp.Compare(a.Energy, b.Energy) })
	states := make([]ensemble.State, len(sorted))
	vibrating := true
	for i, m := range sorted {
		states[i] = ensemble.State{
			Energy: m.Energy, Degeneracy: m.Degeneracy,
			RotationalConstantsMHz: m.RotationalConstantsMHz, WavenumbersCM1: m.WavenumbersCM1,
		}
		vibrating = vibrating && (m.WavenumbersCM1 != nil || len(m.X) == 3)
	}
	populations := ensemble.Populations(states, temperatureK)
	var free, freePopulations []float64
	if vibrating {
		if g, err := ensemble.FreeEnergies(states, temperatureK); err == nil {
			free, freePopulations = g, ensemble.FreeEnergyPopulations(g, temperatureK)
		}
	}
	rows := make([]Minimum, len(sorted))
	for i, m := range sorted {
		rows[i] = Minimum{
			Rank: i + 1, Energy: m.Energy, Relative: m.Energy - sorted[0].Energy, Hits: m.Hits,
			Degeneracy: m.Degeneracy, SymmetryNumber: m.SymmetryNumber, Population: populations[i],
			RotationalConstantsMHz: m.RotationalConstantsMHz, DipoleDebye: m.DipoleDebye, LowestModeCM1: m.LowestModeCM1,
			XYZ: points(m.X),
		}
		if rows[i].RotationalConstantsMHz == nil {
			rows[i].RotationalConstantsMHz = []float64{}
		}
		if free != nil {
			rows[i].FreeEnergyRelative, rows[i].PopulationFreeEnergy = &free[i], &freePopulations[i]
		}
	}
	return rows
}

// Symbols returns the element symbols of a molecule. For a cluster m is nil; its atoms, as many as atoms says, have the symbol X.
func Symbols(m *molecule.Molecule, atoms int) []string {
	if m == nil {
		return slices.Repeat([]string{"X"}, atoms)
	}
	symbols := make([]string, len(m.Atoms))
	for i, a := range m.Atoms {
		symbols[i] = a.Element.String()
	}
	return symbols
}

func points(x []float64) [][3]float64 {
	p := make([][3]float64, len(x)/3)
	for i := range p {
		p[i] = [3]float64(x[3*i:])
	}
	return p
}

func (m Minimum) geometry() molecule.Geometry {
	g := make(molecule.Geometry, 0, 3*len(m.XYZ))
	for _, p := range m.XYZ {
		g = append(g, p[:]...)
	}
	return g
}
