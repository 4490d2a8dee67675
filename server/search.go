package server

import (
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"strings"
	"time"

	"github.com/schollz/progressbar/v3"
	"github.com/spf13/cobra"
	"golang.org/x/term"

	"tarn/ensemble/report"
	"tarn/molecule"
	"tarn/molecule/notation"
	"tarn/molecule/smiles"
	"tarn/search"
	"tarn/server/jobs"
)

type searchOptions struct {
	field    string
	settings search.Settings
	limit    time.Duration
	output   string
	json     bool
	record   int
	charge   int
	all      bool
}

func searchCommand() *cobra.Command {
	var o searchOptions
	cmd := &cobra.Command{
		Use:   "search INPUT",
		Short: "Search the minima of one molecule without a server",
		Long: inputHelp + ` lj:N stands for a cluster of N Lennard-Jones atoms in reduced units.

The ranked table (or JSON) goes to standard output, progress to standard error if it is a terminal.`,
		Example: "  tarn search 'CCCC'\n  tarn search muscone.sdf --seed 7 -o muscone-minima.sdf\n  tarn search lj:13 --json",
		Args:    cobra.ExactArgs(1),
		RunE:    func(cmd *cobra.Command, args []string) error { return runSearch(cmd, args[0], &o) },
	}
	f := cmd.Flags()
	f.StringVar(&o.field, "field", "", "force field: mmff94 (default), mmff94s; lj for clusters")
	f.StringVar((*string)(&o.settings.Method), "method", "", "how walks move: anneal, dynamics or mixed")
	f.Uint64Var(&o.settings.Seed, "seed", 1, "of all random streams; the same seed gives the same result")
	f.Float64Var(&o.settings.WindowKcal, "window", 0, "energy range above the lowest minimum that matters, kcal/mol (default 6)")
	f.IntVar(&o.settings.MaxQuenches, "quenches", 0, "budget of quenches (default 200000)")
	f.DurationVar(&o.limit, "time", 0, "budget of wall time, such as 90s or 2h (default none)")
	f.Float64Var(&o.settings.Coverage, "coverage", 0, "estimated coverage at which to stop (default 0.99)")
	f.IntVar(&o.settings.Workers, "workers", 0, "walks at a time (default one for each processor); never changes the result")
	f.Float64Var(&o.settings.TemperatureK, "temperature", 0, "temperature of the populations, K (default 298.15)")
	f.StringVarP(&o.output, "output", "o", "", "write the minima to this file too: .sdf, .xyz, .csv or .json")
	f.BoolVar(&o.json, "json", false, "print JSON instead of the table")
	f.IntVar(&o.record, "record", 0, "record of a file that holds several, from 1")
	f.IntVar(&o.charge, "charge", 0, "total charge of an XYZ input")
	f.BoolVar(&o.all, "all-stereoisomers", false, "where the stereochemistry is open, search every stereoisomer in turn; JSON is then an array")
	return cmd
}

func runSearch(cmd *cobra.Command, argument string, o *searchOptions) error {
	if err := o.check(cmd); err != nil {
		return err
	}
	problem, subject, err := o.problem(cmd, argument)
	var open *search.UnspecifiedError
	switch {
	case errors.As(err, &open) && o.all:
		return o.searchAll(cmd, open.Isomers, subject)
	case errors.As(err, &open):
		return fmt.Errorf("%w; or search them all with --all-stereoisomers", err)
	case err != nil:
		return err
	}
	if err := o.checkOutput(problem); err != nil {
		return err
	}
	document, failure := o.search(cmd, problem, subject)
	if document == nil {
		return failure
	}
	return errors.Join(o.print(cmd.OutOrStdout(), *document, problem), failure)
}

// searchAll searches stereoisomers one after the other.
func (o *searchOptions) searchAll(cmd *cobra.Command, isomers []*molecule.Molecule, subject *notation.Reading) error {
	documents := make([]report.Document, 0, len(isomers))
	for i, m := range isomers {
		problem, err := search.NewMoleculeProblem(cmd.Context(), m, o.field, nil, o.settings.Seed)
		if err != nil {
			return fmt.Errorf("stereoisomer %s: %w", smiles.Canonical(m), err)
		}
		if err := o.checkOutput(problem); err != nil {
			return err
		}
		document, failure := o.search(cmd, problem, subject)
		if document == nil {
			return failure
		}
		one := *o
		if o.output != "" {
			extension := filepath.Ext(o.output)
			one.output = fmt.Sprintf("%s-%d%s", strings.TrimSuffix(o.output, extension), i+1, extension)
		}
		out := cmd.OutOrStdout()
		if o.json { // printed together below
			documents, out = append(documents, *document), io.Discard
		}
		if err := errors.Join(one.print(out, *document, problem), failure); err != nil {
			return err
		}
	}
	if !o.json {
		return nil
	}
	encoder := json.NewEncoder(cmd.OutOrStdout())
	encoder.SetIndent("", "  ")
	encoder.SetEscapeHTML(false)
	return encoder.Encode(documents)
}

// search runs one search. If it is interrupted it returns what the finished rounds have found together with the error.
func (o *searchOptions) search(cmd *cobra.Command, problem *search.Problem, subject *notation.Reading) (*report.Document, error) {
	var last search.Checkpoint
	show, finish := progressOn(cmd.ErrOrStderr())
	result, err := search.Run(cmd.Context(), problem, o.settings, nil, search.Hooks{
		Progress:   show,
		Checkpoint: func(c search.Checkpoint) error { last = c; return nil },
	})
	finish()
	interrupted := errors.Is(err, context.Canceled) && len(last.Minima) > 0
	if interrupted {
		result, err = o.soFar(problem, last)
	}
	if err != nil {
		return nil, err
	}
	document := documentOf(jobs.Identity(subject.Name, problem), problem, result)
	document.Warnings = append(jobs.Notes(subject, problem), document.Warnings...)
	if interrupted {
		document.StopReason = ""
		return &document, &partialError{"interrupted; the minima of the finished rounds are above"}
	}
	return &document, nil
}

// soFar ranks and describes what a search had found at a checkpoint, as if that had been its budget.
func (o *searchOptions) soFar(p *search.Problem, c search.Checkpoint) (*search.Result, error) {
	spent := o.settings
	spent.MaxQuenches = c.Quenches
	result, err := search.Run(context.Background(), p, spent, &c, search.Hooks{})
	if err == nil {
		result.Settings = o.settings.WithDefaults(p.Cluster())
	}
	return result, err
}

// check refuses options that cannot be used, among them budgets of zero that were asked for in so many words.
func (o *searchOptions) check(cmd *cobra.Command) error {
	for name, zero := range map[string]bool{
		"quenches": o.settings.MaxQuenches == 0, "time": o.limit == 0, "window": o.settings.WindowKcal == 0,
		"coverage": o.settings.Coverage == 0, "temperature": o.settings.TemperatureK == 0,
	} {
		if zero && cmd.Flags().Changed(name) {
			return fmt.Errorf("--%s must be positive; leave it out for its default", name)
		}
	}
	if o.limit < 0 {
		return fmt.Errorf("--time must be positive; leave it out for no limit")
	}
	o.settings.MaxSeconds = o.limit.Seconds()
	if o.output != "" {
		if _, err := outputFormat(o.output); err != nil {
			return err
		}
	}
	return o.settings.Validate()
}

// checkOutput finds out before the search whether its result can be written.
func (o *searchOptions) checkOutput(p *search.Problem) error {
	if o.output == "" {
		return nil
	}
	if strings.EqualFold(filepath.Ext(o.output), ".sdf") && p.Cluster() {
		return errors.New("a cluster has no bonds to write into an SD file; use .xyz, .csv or .json")
	}
	d, err := newDraft(o.output)
	if err != nil {
		return err
	}
	return errors.Join(d.File.Close(), os.Remove(d.Name()))
}

// problem prepares the search of an INPUT argument, and returns what was read.
func (o *searchOptions) problem(cmd *cobra.Command, argument string) (*search.Problem, *notation.Reading, error) {
	n, cluster, err := clusterSize(argument)
	if err != nil {
		return nil, nil, err
	}
	if cluster {
		if o.field != "" && o.field != "lj" {
			return nil, nil, fmt.Errorf("a Lennard-Jones cluster takes --field lj")
		}
		p, err := search.NewClusterProblem(n)
		return p, &notation.Reading{}, err
	}
	r, err := readOne(cmd, argument, o.record, o.charge)
	if err != nil {
		return nil, nil, err
	}
	m, err := r.Single()
	if err != nil {
		return nil, nil, err
	}
	p, err := search.NewMoleculeProblem(cmd.Context(), m, o.field, r.Geometry, o.settings.Seed)
	return p, &r.Reading, err
}

// print shows a document first: what takes long to find must not be lost because a file cannot be written.
func (o *searchOptions) print(out io.Writer, d report.Document, p *search.Problem) error {
	var shown error
	if o.json {
		shown = report.Write(out, report.JSON, d, p.Molecule)
	} else {
		shown = report.WriteTable(out, d)
	}
	if o.output == "" {
		return shown
	}
	return errors.Join(shown, writeOutput(o.output, d, p))
}

func writeOutput(path string, d report.Document, p *search.Problem) error {
	format, err := outputFormat(path)
	if err != nil {
		return err
	}
	f, err := newDraft(path)
	if err != nil {
		return err
	}
	return f.close(report.Write(f, format, d, p.Molecule))
}

func outputFormat(path string) (report.Format, error) {
	switch strings.ToLower(filepath.Ext(path)) {
	case ".sdf":
		return report.SDF, nil
	case ".xyz":
		return report.XYZ, nil
	case ".csv":
		return report.CSV, nil
	case ".json":
		return report.JSON, nil
	}
	return "", fmt.Errorf("the output file %s must end in .sdf, .xyz, .csv or .json", path)
}

// progressOn returns a function that shows progress on a terminal, and one that wipes it away; both do nothing elsewhere.
func progressOn(w io.Writer) (show func(search.Progress), finish func()) {
	f, ok := w.(*os.File)
	if !ok || !term.IsTerminal(int(f.Fd())) {
		return func(search.Progress) {}, func() {}
	}
	const steps = 1000
	bar := progressbar.NewOptions(steps, progressbar.OptionSetWriter(w), progressbar.OptionClearOnFinish(),
		progressbar.OptionSetWidth(24), progressbar.OptionSetPredictTime(false), progressbar.OptionThrottle(100*time.Millisecond))
	show = func(p search.Progress) {
		bar.Describe(fmt.Sprintf("round %d  %d quenches  %d minima  coverage %.3f  %.0f K", p.Round+1, p.Quenches, p.Minima, p.Coverage.Estimate, p.TemperatureK))
		_ = bar.Set(int(steps * min(max(p.Fraction, 0), 1)))
	}
	return show, func() { _ = bar.Finish() }
}
