package server

import (
	"encoding/json"
	"fmt"
	"io"
	"strings"
	"text/tabwriter"

	"github.com/spf13/cobra"

	"tarn/ensemble/report"
)

func moleculeCommand() *cobra.Command {
	var asJSON bool
	var record, charge int
	cmd := &cobra.Command{
		Use:   "molecule INPUT",
		Short: "Say what Tarn understands of a molecule",
		Long:  inputHelp,
		Args:  cobra.ExactArgs(1),
		RunE: func(cmd *cobra.Command, args []string) error {
			r, err := readOne(cmd, args[0], record, charge)
			if err != nil {
				return err
			}
			u, err := report.Understand(&r.Reading)
			if err != nil {
				return err
			}
			if asJSON {
				encoder := json.NewEncoder(cmd.OutOrStdout())
				encoder.SetIndent("", "  ")
				encoder.SetEscapeHTML(false)
				return encoder.Encode(u)
			}
			return printUnderstood(cmd.OutOrStdout(), u)
		},
	}
	cmd.Flags().BoolVar(&asJSON, "json", false, "print JSON")
	cmd.Flags().IntVar(&record, "record", 0, "record of a file that holds several, from 1")
	cmd.Flags().IntVar(&charge, "charge", 0, "total charge of an XYZ input")
	return cmd
}

func printUnderstood(w io.Writer, u report.Understood) error {
	t := tabwriter.NewWriter(w, 0, 0, 2, ' ', 0)
	row := func(name string, value any) { fmt.Fprintf(t, "%s\t%v\n", name, value) }
	if u.Name != "" {
		row("name", u.Name)
	}
	row("canonical SMILES", u.SMILES)
	row("key", u.Key)
	row("formula", u.Formula)
	row("mass", fmt.Sprintf("%.4f g/mol", u.MassU))
	row("charge", u.Charge)
	row("atoms, bonds", fmt.Sprintf("%d, %d", u.Atoms, u.Bonds))
	row("rotatable bonds", u.RotatableBonds)
	row("stereocentres", joined(u.Stereocentres, func(s report.Stereocentre) string { return fmt.Sprintf("%d%s", s.Atom, s.Label) }))
	row("stereo double bonds", joined(u.DoubleBonds, func(s report.StereoBond) string {
		return fmt.Sprintf("%d=%d %s", s.Atoms[0], s.Atoms[1], s.Label)
	}))
	row("symmetry order", u.SymmetryOrder)
	switch {
	case u.ForceField != "":
		row("MMFF94", "not covered: "+u.ForceField)
	default:
		row("MMFF94", "covered")
	}
	for _, isomer := range u.Stereoisomers {
		row("possible stereoisomer", isomer)
	}
	for _, fragment := range u.Fragments {
		row("fragment", fragment)
	}
	for _, note := range u.Notes {
		row("note", note)
	}
	return t.Flush()
}

func joined[T any](items []T, text func(T) string) string {
	if len(items) == 0 {
		return "none"
	}
	parts := make([]string, len(items))
	for i, item := range items {
		parts[i] = text(item)
	}
	return strings.Join(parts, ", ")
}
