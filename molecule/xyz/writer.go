package xyz

import (
	"bufio"
	"fmt"
	"io"
	"math"
	"strings"

	"tarn/molecule"
)

// Write writes one frame: the number of atoms, the title, and the coordinates in Å with eight decimals. It returns an error
// if the title has several lines, the coordinates are not three for each element, or one of them is not finite.
func Write(w io.Writer, title string, elements []molecule.Element, g molecule.Geometry) error {
	if strings.ContainsAny(title, "\r\n") {
		return fmt.Errorf("the title %q has several lines; an XYZ frame has room for one", shortened(title))
	}
	if len(g) != 3*len(elements) {
		return fmt.Errorf("%d coordinates for %d atoms; each atom needs three", len(g), len(elements))
	}
	for i, x := range g {
		if math.IsNaN(x) || math.Abs(x) >= 1e6 {
			return fmt.Errorf("atom %d has the coordinate %v; only finite ones below 1000000 Å can be written", i/3+1, x)
		}
	}
	out := bufio.NewWriter(w)
	fmt.Fprintf(out, "%d\n%s\n", len(elements), title)
	for i, e := range elements {
		at := g.At(i)
		fmt.Fprintf(out, "%-2s %15.8f %15.8f %15.8f\n", e, at[0], at[1], at[2])
	}
	return out.Flush()
}
