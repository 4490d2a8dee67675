package ctfile

import (
	"fmt"
	"io"
	"strconv"
)

func (o *output) v3000(w io.Writer) {
	m := o.Molecule
	line := func(format string, arguments ...any) { fmt.Fprintf(w, v30+format+"\n", arguments...) }
	fmt.Fprintln(w, "  0  0  0     0  0            999 V3000")
	line("BEGIN CTAB")
	line("COUNTS %d %d 0 0 %d", len(m.Atoms), len(m.Bonds), o.chiral())
	line("BEGIN ATOM")
	for i, a := range m.Atoms {
		var at [3]float64
		if o.Geometry != nil {
			at = o.Geometry.At(i)
		}
		rest := ""
		for _, p := range [...]struct {
			key   string
			value int
		}{{"CHG", a.Charge}, {"RAD", radicalCode(a)}, {"CFG", o.parity[i]}, {"MASS", a.Isotope}} {
			if p.value != 0 {
				rest += fmt.Sprintf(" %s=%d", p.key, p.value)
			}
		}
		switch valence := o.valence[i]; {
		case valence > 0:
			rest += fmt.Sprintf(" VAL=%d", valence)
		case valence == 0:
			rest += " VAL=-1"
		}
		line("%d %s %s %s %s 0%s", i+1, a.Element, digits(at[0]), digits(at[1]), digits(at[2]), rest)
	}
	line("END ATOM")
	if len(m.Bonds) > 0 {
		line("BEGIN BOND")
		for i, b := range m.Bonds {
			line("%d %d %d %d", i+1, b.Order, b.A+1, b.B+1)
		}
		line("END BOND")
	}
	line("END CTAB")
	fmt.Fprintln(w, "M  END")
}

// digits writes the shortest decimal number that reads back exactly.
func digits(x float64) string { return strconv.FormatFloat(x, 'f', -1, 64) }
