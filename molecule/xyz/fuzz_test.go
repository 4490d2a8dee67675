package xyz_test

import (
	"errors"
	"io"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/molecule"
	"tarn/molecule/xyz"
)

// FuzzRead feeds arbitrary bytes: every frame is a molecule that can be written and read back, or a *FrameError.
func FuzzRead(f *testing.F) {
	f.Add([]byte(water+water), 0)
	f.Add([]byte("4\nmethyl\nC 0 0 0\nH 1.08 0 0\nH -0.54 0.935 0\nH -0.54 -0.935 0\n"), 1)
	f.Add([]byte("6\n\nC 0 0 0\nC 1.33 0 0\nCl -0.9 1.4 0\nH -0.5 -0.95 0\nCL 2.2 1.4 0\n1 1.9 -.95 0 x\n"), 0)
	f.Add([]byte("2\n\nNa 0 0 0\nCl 2.36 0 0\n\n\n1\n\nXq 0 0 0\n3\n"), 0)
	f.Fuzz(func(t *testing.T, data []byte, charge int) {
		r := xyz.NewReader(strings.NewReader(string(data)), xyz.Options{Charge: charge})
		for {
			frame, err := r.Read()
			if err == io.EOF {
				return
			}
			if err != nil {
				var broken *xyz.FrameError
				require.True(t, errors.As(err, &broken), "%v", err)
				require.Positive(t, broken.Frame)
				require.Positive(t, broken.Line)
				continue
			}
			require.Len(t, frame.Geometry, 3*len(frame.Molecule.Atoms))
			require.Equal(t, charge, frame.Molecule.Charge())
			var elements []molecule.Element
			for _, a := range frame.Molecule.Atoms {
				elements = append(elements, a.Element)
			}
			var file strings.Builder
			require.NoError(t, xyz.Write(&file, strings.ReplaceAll(frame.Title, "\r", " "), elements, frame.Geometry))
		}
	})
}
