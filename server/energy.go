package server

import (
	"cmp"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"math"

	"github.com/spf13/cobra"

	"tarn/forcefield"
	"tarn/molecule"
	"tarn/molecule/notation"
)

type fieldOptions struct {
	field             string
	dielectric        float64
	distanceDependent bool
	json              bool
	charge            int
}

func (o *fieldOptions) add(cmd *cobra.Command) {
	f := cmd.Flags()
	f.StringVar(&o.field, "field", "mmff94", "force field: mmff94 or mmff94s")
	f.Float64Var(&o.dielectric, "dielectric", 1, "dielectric constant")
	f.BoolVar(&o.distanceDependent, "distance-dependent", false, "let the dielectric grow with the distance")
	f.BoolVar(&o.json, "json", false, "print one JSON object a record")
	f.IntVar(&o.charge, "charge", 0, "total charge of XYZ frames")
}

func (o *fieldOptions) options() (forcefield.Options, error) {
	out := forcefield.Options{Static: o.field == "mmff94s", Dielectric: o.dielectric, DistanceDependent: o.distanceDependent}
	if o.field != "mmff94" && o.field != "mmff94s" {
		return out, fmt.Errorf("there is no force field %q for molecules; use mmff94 or mmff94s", o.field)
	}
	if !(o.dielectric > 0) || math.IsInf(o.dielectric, 0) {
		return out, fmt.Errorf("--dielectric must be a positive number")
	}
	return out, nil
}

// energyRecord is the JSON of one record.
type energyRecord struct {
	Record         int                    `json:"record"`
	Name           string                 `json:"name"`
	Field          string                 `json:"field,omitempty"`
	Options        *forcefield.Options    `json:"options,omitempty"`
	Energy         *float64               `json:"energy_kcal_mol,omitempty"`
	Terms          *forcefield.Terms      `json:"terms,omitempty"`
	PartialCharges []float64              `json:"partial_charges,omitempty"`
	AtomTypes      []int                  `json:"atom_types,omitempty"`
	GradientRMS    *float64               `json:"gradient_rms,omitempty"`
	Empirical      []forcefield.Empirical `json:"empirical,omitempty"`
	Notes          []string               `json:"notes,omitempty"`
	Error          string                 `json:"error,omitempty"`
}

func energyCommand() *cobra.Command {
	var o fieldOptions
	cmd := &cobra.Command{
		Use:   "energy FILE",
		Short: "Energies of the coordinates in a file, one line a record",
		Long: `FILE is .sdf, .mol or .xyz, or - for standard input. The coordinates are taken as they are. A record that cannot be
used yields an error line, the others go on, and the exit status is 1; if none can even be read it is 2.`,
		Args: cobra.ExactArgs(1),
		RunE: func(cmd *cobra.Command, args []string) error {
			options, err := o.options()
			if err != nil {
				return err
			}
			return eachGeometry(cmd, args[0], o.charge, func(r *notation.Record) error {
				return o.print(cmd.OutOrStdout(), evaluate(r, o.field, options))
			}, func(f recordFault) error {
				return o.print(cmd.OutOrStdout(), energyRecord{Record: f.number, Name: f.name, Error: f.err.Error()})
			})
		},
	}
	o.add(cmd)
	return cmd
}

// evaluate returns the energy of a record or, in its place, why there is none.
func evaluate(r *notation.Record, field string, options forcefield.Options) energyRecord {
	out := energyRecord{Record: r.Number, Name: r.Name, Notes: r.Notes}
	f, err := forcefield.NewMMFF94(r.Molecule, options)
	if err != nil {
		out.Error = err.Error()
		return out
	}
	gradient := make([]float64, len(r.Geometry))
	energy := f.Energy(r.Geometry, gradient)
	if math.IsNaN(energy) || math.IsInf(energy, 0) {
		out.Error = "the coordinates have no finite energy; check for numbers that are no numbers"
		return out
	}
	terms, applied, rms := f.Terms(r.Geometry), f.Options(), rootMeanSquare(gradient)
	out.Field, out.Options, out.Energy, out.Terms, out.GradientRMS = field, &applied, &energy, &terms, &rms
	out.PartialCharges, out.AtomTypes, out.Empirical = f.PartialCharges(), f.AtomTypes(), f.Empirical()
	return out
}

func rootMeanSquare(v []float64) float64 {
	sum := 0.0
	for _, x := range v {
		sum += x * x
	}
	return math.Sqrt(sum / float64(max(len(v), 1)))
}

// errRecord says that a record failed and its line has been printed.
var errRecord = errors.New("record failed")

func (o *fieldOptions) print(w io.Writer, r energyRecord) error {
	var err error
	switch {
	case o.json:
		err = json.NewEncoder(w).Encode(r)
	case r.Error != "":
		_, err = fmt.Fprintf(w, "%d\t%s\terror: %s\n", r.Record, r.Name, r.Error)
	default:
		_, err = fmt.Fprintf(w, "%d\t%s\t%.5f kcal/mol\tgradient rms %.5f%s\n", r.Record, r.Name, *r.Energy, *r.GradientRMS, empiricalNote(r.Empirical))
	}
	if err == nil && r.Error != "" {
		err = errRecord
	}
	return err
}

func empiricalNote(e []forcefield.Empirical) string {
	if len(e) == 0 {
		return ""
	}
	return fmt.Sprintf("\t%d parameters by empirical rule", len(e))
}

// recordFault is a record that could not be read or has no coordinates.
type recordFault struct {
	number int
	name   string
	err    error
}

// eachGeometry calls use with every record of a file that has coordinates, and fault for the others. Records that fail make the command
// end with a partialError after the last one, or with another error if there was nothing to use.
func eachGeometry(cmd *cobra.Command, path string, charge int, use func(*notation.Record) error, fault func(recordFault) error) error {
	if !isFile(path) {
		return fmt.Errorf("%s: there is no such file; give a .sdf, .mol or .xyz file with coordinates, or -", path)
	}
	source, closer, err := openSource(cmd, path, charge)
	if err != nil {
		return err
	}
	defer closer.Close()
	records, used, failed := 0, 0, 0
	var first error
	for {
		if err := cmd.Context().Err(); err != nil {
			return &partialError{fmt.Sprintf("interrupted after %d records", records)}
		}
		r, err := source.Read()
		if errors.Is(err, io.EOF) {
			break
		}
		records++
		var broken *notation.RecordError
		switch {
		case errors.As(err, &broken):
			first = cmp.Or(first, err)
			err = fault(recordFault{broken.Number, "", broken.Err})
		case err != nil:
			return err
		case r.Geometry == nil:
			first = cmp.Or(first, errNoCoordinates(r.Molecule))
			err = fault(recordFault{r.Number, r.Name, errNoCoordinates(r.Molecule)})
		default:
			used++
			err = use(r)
		}
		if errors.Is(err, errRecord) {
			failed++
		} else if err != nil {
			return err
		}
	}
	switch {
	case records == 0:
		return fmt.Errorf("%s holds no records", path)
	case used == 0:
		return fmt.Errorf("no record of %s can be used: %w", path, first)
	case failed > 0:
		return &partialError{fmt.Sprintf("%d of %d records failed", failed, records)}
	}
	return nil
}

func errNoCoordinates(m *molecule.Molecule) error {
	return fmt.Errorf("the record has no 3D coordinates for its %d atoms, hydrogens included; make some with tarn build", len(m.Atoms))
}
