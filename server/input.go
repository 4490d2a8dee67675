package server

import (
	"errors"
	"fmt"
	"io"
	"os"
	"strconv"
	"strings"

	"github.com/spf13/cobra"

	"tarn/molecule/notation"
	"tarn/molecule/smiles"
)

const inputHelp = `INPUT is a file (.sdf .mol .xyz .smi), - for standard input, or a SMILES.`

// openSource opens a file argument: a path, or - for standard input, whose format is found out from its first lines.
func openSource(cmd *cobra.Command, path string, charge int) (*notation.Source, io.Closer, error) {
	if path == "-" {
		s, err := notation.NewSource(cmd.InOrStdin(), "", charge)
		return s, io.NopCloser(nil), err
	}
	f, err := os.Open(path)
	if err != nil {
		return nil, nil, fmt.Errorf("the input file cannot be read: %w", err)
	}
	s, err := notation.NewSource(f, notation.FormatOf(path), charge)
	if err != nil {
		return nil, nil, errors.Join(err, f.Close())
	}
	return s, f, nil
}

// isFile reports whether an INPUT argument means a file: it exists, or it ends like one.
func isFile(argument string) bool {
	if argument == "-" || notation.FormatOf(argument) != "" {
		return true
	}
	info, err := os.Stat(argument)
	return err == nil && !info.IsDir()
}

// readOne returns the molecule of an INPUT argument. A file with several records needs the number of one of them.
func readOne(cmd *cobra.Command, argument string, record, charge int) (*notation.Record, error) {
	if !isFile(argument) {
		m, err := smiles.Parse(strings.TrimSpace(argument))
		if err != nil {
			return nil, err
		}
		return &notation.Record{Reading: notation.Reading{Molecule: m}, Number: 1, Line: 1}, nil
	}
	source, closer, err := openSource(cmd, argument, charge)
	if err != nil {
		return nil, err
	}
	defer closer.Close()
	var chosen *notation.Record
	for number := 1; ; number++ {
		r, err := source.Read()
		switch {
		case errors.Is(err, io.EOF) && chosen != nil:
			return chosen, nil
		case errors.Is(err, io.EOF):
			return nil, fmt.Errorf("%s has no record %d; it holds %d", argument, max(record, 1), number-1)
		case number == max(record, 1) && err != nil:
			return nil, fmt.Errorf("%s: %w", argument, err)
		case number == max(record, 1):
			chosen = r
			if record > 0 {
				return chosen, nil
			}
		case record == 0:
			return nil, fmt.Errorf("%s holds several records; choose one with --record N", argument)
		}
	}
}

// clusterSize returns N of an argument lj:N.
func clusterSize(argument string) (n int, ok bool, err error) {
	text, found := strings.CutPrefix(argument, "lj:")
	if !found {
		return 0, false, nil
	}
	n, err = strconv.Atoi(text)
	if err != nil {
		return 0, true, fmt.Errorf("%q is no cluster; write lj:N with the number of atoms, such as lj:13", argument)
	}
	return n, true, nil
}
