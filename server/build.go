package server

import (
	"fmt"
	"math/rand/v2"

	"github.com/spf13/cobra"

	"tarn/forcefield"
	"tarn/molecule"
	"tarn/molecule/embed"
	"tarn/molecule/notation"
	"tarn/search"
)

func buildCommand() *cobra.Command {
	var output, format string
	var seed uint64
	var record, charge int
	cmd := &cobra.Command{
		Use:     "build INPUT",
		Short:   "Make a first 3D geometry, without a quench",
		Long:    inputHelp + " The geometry comes from distance geometry and shows the stereochemistry asked for; it is no minimum.",
		Example: "  tarn build 'C[C@@H]1CCCCCCCCCCCCC(=O)C1' -o muscone.sdf",
		Args:    cobra.ExactArgs(1),
		RunE: func(cmd *cobra.Command, args []string) (err error) {
			target := notation.Format(format)
			if output != "" {
				if target = notation.FormatOf(output); target != notation.SDF && target != notation.XYZ {
					return fmt.Errorf("the output file %s must end in .sdf, .mol or .xyz", output)
				}
			} else if target != notation.SDF && target != notation.XYZ {
				return fmt.Errorf("there is no output format %q; use sdf or xyz", format)
			}
			r, err := readOne(cmd, args[0], record, charge)
			if err != nil {
				return err
			}
			g, err := firstGeometry(cmd, r, seed)
			if err != nil {
				return err
			}
			if output == "" {
				return writeGeometry(cmd.OutOrStdout(), target, r, g)
			}
			s, err := openSink(output)
			if err != nil {
				return err
			}
			defer func() { err = s.close(err) }()
			return s.write(r, g)
		},
	}
	f := cmd.Flags()
	f.StringVarP(&output, "output", "o", "", "write to this file: .sdf, .mol or .xyz")
	f.StringVar(&format, "format", "sdf", "format on standard output: sdf or xyz")
	f.Uint64Var(&seed, "seed", 1, "of the random stream")
	f.IntVar(&record, "record", 0, "record of a file that holds several, from 1")
	f.IntVar(&charge, "charge", 0, "total charge of an XYZ input")
	return cmd
}

func firstGeometry(cmd *cobra.Command, r *notation.Record, seed uint64) (molecule.Geometry, error) {
	if _, err := r.Single(); err != nil {
		return nil, err
	}
	m, err := search.Settle(r.Molecule, r.Geometry)
	if err != nil {
		return nil, err
	}
	r.Molecule = m
	f, err := forcefield.NewMMFF94(m, forcefield.Options{})
	if err != nil {
		return nil, err
	}
	return embed.Embed(cmd.Context(), m, f, rand.New(rand.NewPCG(seed, 0)))
}
