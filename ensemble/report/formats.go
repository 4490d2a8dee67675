package report

import (
	"encoding/csv"
	"encoding/json"
	"fmt"
	"io"
	"strconv"
	"strings"

	"tarn/molecule"
	"tarn/molecule/ctfile"
)

// Format of a document.
type Format string

const (
	JSON Format = "json"
	SDF  Format = "sdf"
	XYZ  Format = "xyz"
	CSV  Format = "csv"
)

// MediaType returns the media type that the format is served with.
func (f Format) MediaType() string {
	switch f {
	case SDF:
		return "chemical/x-mdl-sdfile"
	case XYZ:
		return "chemical/x-xyz"
	case CSV:
		return "text/csv; charset=utf-8"
	}
	return "application/json"
}

// Write writes a document in a format. m is the molecule of the minima; nil for a cluster, which has no SDF.
func Write(w io.Writer, f Format, d Document, m *molecule.Molecule) error {
	switch f {
	case JSON:
		encoder := json.NewEncoder(w)
		encoder.SetIndent("", "  ")
		encoder.SetEscapeHTML(false)
		return encoder.Encode(d)
	case SDF:
		return writeSDF(w, d, m)
	case XYZ:
		return writeXYZ(w, d)
	case CSV:
		return writeCSV(w, d)
	}
	return fmt.Errorf("there is no format %q; use json, sdf, xyz or csv", f)
}

func writeSDF(w io.Writer, d Document, m *molecule.Molecule) error {
	if m == nil {
		return fmt.Errorf("a cluster of Lennard-Jones atoms has no bonds to write into an SD file; use xyz, csv or json")
	}
	for _, row := range d.Minima {
		record := &ctfile.Record{Name: title(d.Molecule), Molecule: m, Geometry: row.geometry()}
		values := row.fields()
		for i, name := range columns {
			record.Data = append(record.Data, ctfile.Field{Name: name, Value: values[i]})
		}
		record.Data = append(record.Data,
			ctfile.Field{Name: "field", Value: d.Field}, ctfile.Field{Name: "temperature_k", Value: number(d.TemperatureK, 2)})
		if err := ctfile.WriteRecord(w, record); err != nil {
			return err
		}
	}
	return nil
}

func writeXYZ(w io.Writer, d Document) error {
	for _, row := range d.Minima {
		_, err := fmt.Fprintf(w, "%d\n%s  minimum %d  energy_kcal_mol=%.6f  relative_kcal_mol=%.4f  population=%.6f\n",
			len(row.XYZ), strings.ReplaceAll(title(d.Molecule), "\n", " "), row.Rank, row.Energy, row.Relative, row.Population)
		if err != nil {
			return err
		}
		for i, p := range row.XYZ {
			if _, err := fmt.Fprintf(w, "%-2s %14.8f %14.8f %14.8f\n", d.Elements[i], p[0], p[1], p[2]); err != nil {
				return err
			}
		}
	}
	return nil
}

// columns are the names of the CSV columns and of the SDF data fields.
var columns = []string{
	"rank", "energy_kcal_mol", "relative_kcal_mol", "population", "free_energy_relative_kcal_mol", "population_free_energy",
	"degeneracy", "symmetry_number", "hits", "dipole_debye", "lowest_mode_cm1", "rotational_a_mhz", "rotational_b_mhz", "rotational_c_mhz",
}

func (m Minimum) fields() []string {
	rotational := [3]string{}
	for i, v := range m.RotationalConstantsMHz {
		rotational[i] = number(v, 3)
	}
	return []string{
		strconv.Itoa(m.Rank), number(m.Energy, 6), number(m.Relative, 6), number(m.Population, 8),
		optional(m.FreeEnergyRelative, 6), optional(m.PopulationFreeEnergy, 8),
		strconv.Itoa(m.Degeneracy), strconv.Itoa(m.SymmetryNumber), strconv.Itoa(m.Hits),
		number(m.DipoleDebye, 4), number(m.LowestModeCM1, 2), rotational[0], rotational[1], rotational[2],
	}
}

func writeCSV(w io.Writer, d Document) error {
	table := csv.NewWriter(w)
	if err := table.Write(columns); err != nil {
		return err
	}
	for _, row := range d.Minima {
		if err := table.Write(row.fields()); err != nil {
			return err
		}
	}
	table.Flush()
	return table.Error()
}

func number(v float64, digits int) string { return strconv.FormatFloat(v, 'f', digits, 64) }

func optional(v *float64, digits int) string {
	if v == nil {
		return ""
	}
	return number(*v, digits)
}

func title(m Molecule) string {
	if m.Name != "" {
		return m.Name
	}
	if m.SMILES != "" {
		return m.SMILES
	}
	return m.Key
}
