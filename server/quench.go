package server

import (
	"encoding/json"
	"fmt"
	"io"

	"github.com/spf13/cobra"

	"tarn/forcefield"
	"tarn/minimize"
	"tarn/molecule/notation"
)

// quenchRecord is the JSON of one quenched record.
type quenchRecord struct {
	energyRecord
	LowestModeCM1 *float64     `json:"lowest_mode_cm1,omitempty"`
	Evaluations   int          `json:"energy_evaluations,omitempty"`
	XYZ           [][3]float64 `json:"xyz,omitempty"`
}

func quenchCommand() *cobra.Command {
	var o fieldOptions
	var output string
	cmd := &cobra.Command{
		Use:   "quench FILE",
		Short: "Minimise every record of a file from its own coordinates, without a search",
		Long: `FILE is .sdf, .mol or .xyz, or - for standard input. A record that cannot be used yields an error line, the others go on,
and the exit status is 1.`,
		Args: cobra.ExactArgs(1),
		RunE: func(cmd *cobra.Command, args []string) (err error) {
			options, err := o.options()
			if err != nil {
				return err
			}
			sink, err := openSink(output)
			if err != nil {
				return err
			}
			defer func() { err = sink.close(err) }()
			return eachGeometry(cmd, args[0], o.charge, func(r *notation.Record) error {
				out := o.quench(cmd, r, options)
				if out.Error == "" {
					if err := sink.write(r, r.Geometry); err != nil {
						return err
					}
				}
				return o.printQuench(cmd.OutOrStdout(), out)
			}, func(f recordFault) error {
				return o.printQuench(cmd.OutOrStdout(), quenchRecord{energyRecord: energyRecord{Record: f.number, Name: f.name, Error: f.err.Error()}})
			})
		},
	}
	o.add(cmd)
	cmd.Flags().StringVarP(&output, "output", "o", "", "write the quenched geometries to this file: .sdf or .xyz")
	return cmd
}

// quench minimises a record in place and describes the result.
func (o *fieldOptions) quench(cmd *cobra.Command, r *notation.Record, options forcefield.Options) quenchRecord {
	fail := func(err error) quenchRecord {
		return quenchRecord{energyRecord: energyRecord{Record: r.Number, Name: r.Name, Error: err.Error()}}
	}
	f, err := forcefield.NewMMFF94(r.Molecule, options)
	if err != nil {
		return fail(err)
	}
	q, err := minimize.Quench(cmd.Context(), f, r.Geometry, minimize.Settings{})
	if err != nil {
		return fail(err)
	}
	copy(r.Geometry, q.X)
	modes, err := minimize.NormalModes(minimize.HessianAt(f, q.X), r.Molecule.Masses(), q.X)
	if err != nil {
		return fail(err)
	}
	out := quenchRecord{energyRecord: evaluate(r, o.field, options), Evaluations: q.Evaluations}
	out.GradientRMS = &q.GradientRMS
	if len(modes.WavenumbersCM1) > 0 {
		out.LowestModeCM1 = &modes.WavenumbersCM1[0]
	}
	for i := range r.Geometry.Atoms() {
		out.XYZ = append(out.XYZ, r.Geometry.At(i))
	}
	if err := r.Molecule.CheckStereo(r.Geometry); err != nil {
		out.Notes = append(out.Notes, "the quench changed the stereochemistry: "+err.Error())
	}
	return out
}

func (o *fieldOptions) printQuench(w io.Writer, r quenchRecord) error {
	var err error
	switch {
	case o.json:
		err = json.NewEncoder(w).Encode(r)
	case r.Error != "":
		_, err = fmt.Fprintf(w, "%d\t%s\terror: %s\n", r.Record, r.Name, r.Error)
	default:
		lowest := "no vibration"
		if r.LowestModeCM1 != nil {
			lowest = fmt.Sprintf("lowest mode %.1f cm-1", *r.LowestModeCM1)
		}
		_, err = fmt.Fprintf(w, "%d\t%s\t%.5f kcal/mol\tgradient rms %.1e\t%s\t%d energies\n", r.Record, r.Name, *r.Energy, *r.GradientRMS, lowest, r.Evaluations)
	}
	if err == nil && r.Error != "" {
		err = errRecord
	}
	return err
}
