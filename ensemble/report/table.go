package report

import (
	"fmt"
	"io"
	"math"
	"text/tabwriter"

	"tarn/search"
)

// Caution stands under every table.
const Caution = `These are force-field models of an isolated molecule: verify against experiment or higher-level theory. They are no basis for
clinical, safety or regulatory decisions; follow your local rules.`

// WriteTable writes a document for reading in a terminal.
func WriteTable(w io.Writer, d Document) error {
	unit := "kcal/mol"
	if d.Field == "lj" {
		unit = "epsilon"
	}
	fmt.Fprintf(w, "%s  %s", title(d.Molecule), d.Molecule.Formula)
	if d.Molecule.Name != "" && d.Molecule.SMILES != "" {
		fmt.Fprintf(w, "  %s", d.Molecule.SMILES)
	}
	fmt.Fprintf(w, "\n%s within %g %s in %s, %d quenches, %d energies, %.1f s\n",
		minimaCount(len(d.Minima)), d.Settings.WindowKcal, unit, fieldTitle(d.Field), d.Quenches, d.Evaluations, d.WallSeconds)
	fmt.Fprintf(w, "coverage %s, about %s minima unseen; stopped because %s\n\n",
		interval(d.Coverage), count(d.Coverage.Unseen), StopSentence(search.StopReason(d.StopReason)))
	if err := writeRows(w, d, unit); err != nil {
		return err
	}
	fmt.Fprintln(w)
	if d.Field != "lj" { // a temperature in kelvin has no meaning in reduced units
		fmt.Fprintf(w, "Populations at %g K; ", d.TemperatureK)
	}
	fmt.Fprintln(w, "g is the number of versions (symmetry, mirror images), sigma the rotational symmetry number.")
	for _, warning := range d.Warnings {
		fmt.Fprintf(w, "Note: %s\n", warning)
	}
	_, err := fmt.Fprintln(w, Caution)
	return err
}

func writeRows(w io.Writer, d Document, unit string) error {
	t := tabwriter.NewWriter(w, 0, 0, 2, ' ', tabwriter.AlignRight)
	if d.Field == "lj" {
		fmt.Fprintf(t, "rank\tE / %s\tdE\tg\tsigma\thits\t\n", unit)
		for _, m := range d.Minima {
			fmt.Fprintf(t, "%d\t%.6f\t%.6f\t%d\t%d\t%d\t\n", m.Rank, m.Energy, m.Relative, m.Degeneracy, m.SymmetryNumber, m.Hits)
		}
		return t.Flush()
	}
	fmt.Fprintf(t, "rank\tE / %s\tdE\tpopulation\tfree-energy pop.\tg\tsigma\thits\tdipole / D\tlowest mode / cm-1\t\n", unit)
	for _, m := range d.Minima {
		free := "-"
		if m.PopulationFreeEnergy != nil {
			free = percent(*m.PopulationFreeEnergy)
		}
		fmt.Fprintf(t, "%d\t%.4f\t%.4f\t%s\t%s\t%d\t%d\t%d\t%.3f\t%.1f\t\n",
			m.Rank, m.Energy, m.Relative, percent(m.Population), free, m.Degeneracy, m.SymmetryNumber, m.Hits, m.DipoleDebye, m.LowestModeCM1)
	}
	return t.Flush()
}

// StopSentence says in words why a search ended.
func StopSentence(reason search.StopReason) string {
	switch reason {
	case search.StopCoverage:
		return "the target coverage was reached"
	case search.StopRigid:
		return "the molecule is rigid"
	case search.StopQuenches:
		return "the budget of quenches was spent"
	case search.StopTime:
		return "the budget of time was spent"
	case "":
		return "it was interrupted"
	}
	return string(reason)
}

func fieldTitle(field string) string {
	switch field {
	case "mmff94":
		return "MMFF94"
	case "mmff94s":
		return "MMFF94s"
	case "lj":
		return "the Lennard-Jones potential"
	}
	return field
}

func minimaCount(n int) string {
	if n == 1 {
		return "1 minimum"
	}
	return fmt.Sprintf("%d minima", n)
}

func interval(c search.Coverage) string {
	return fmt.Sprintf("%.3f (95 %% interval %.3f to %.3f)", c.Estimate, c.Low, c.High)
}

func count(v float64) string {
	if math.IsNaN(v) || math.IsInf(v, 0) {
		return "?"
	}
	return fmt.Sprintf("%.1f", v)
}

func percent(fraction float64) string { return fmt.Sprintf("%.2f %%", 100*fraction) }
