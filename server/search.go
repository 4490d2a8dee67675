package server

import (
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"time"

	"github.com/schollz/progressbar/v3"
	"github.com/spf13/cobra"
	"golang.org/x/term"

	"tarn/ensemble/report"
	"tarn/molecule"
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
	problem, name, err := o.problem(cmd, argument)
	var open *search.UnspecifiedError
	switch {
	case errors.As(err, &open) && o.all:
		return o.searchAll(cmd, open.Isomers)
	case errors.As(err, &open):
		return fmt.Errorf("%w; or search them all with --all-stereoisomers", err)
	case err != nil:
		return err
	}
	document, failure := o.search(cmd, problem, name)
	if failure != nil && document == nil {
		return failure
	}
	return errors.Join(o.print(cmd.OutOrStdout(), *document, problem), failure)
}

// searchAll searches stereoisomers one after the other.
func (o *searchOptions) searchAll(cmd *cobra.Command, isomers []*molecule.Molecule) error {
	documents := make([]report.Document, 0, len(isomers))
	for i, m := range isomers {
		problem, err := search.NewMoleculeProblem(cmd.Context(), m, o.field, nil, o.settings.Seed)
		if err != nil {
			return fmt.Errorf("stereoisomer %s: %w", smiles.Canonical(m), err)
		}
		document, failure := o.search(cmd, problem, m.Name)
		if failure != nil && document == nil {
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
func (o *searchOptions) search(cmd *cobra.Command, problem *search.Problem, name string) (*report.Document, error) {
	ctx := cmd.Context()
	var last search.Checkpoint
	var progress search.Progress
	show, finish := progressOn(cmd.ErrOrStderr())
	result, err := search.Run(ctx, problem, o.settings, nil, search.Hooks{
		Progress: func(p search.Progress) {
			progress = p
			show(p)
		},
		Checkpoint: func(c search.Checkpoint) error {
			last = c
			last.Minima = slices.Clone(c.Minima)
			return nil
		},
	})
	finish()
	interrupted := errors.Is(err, context.Canceled) && len(last.Minima) > 0
	if interrupted {
		result = resultSoFar(last, progress, o.settings.WithDefaults(problem.Cluster()))
	} else if err != nil {
		return nil, err
	}
	document := documentOf(jobs.Identity(name, problem), problem, result)
	if interrupted {
		return &document, &partialError{"interrupted; the minima of the finished rounds are above"}
	}
	return &document, nil
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

func (o *searchOptions) problem(cmd *cobra.Command, argument string) (p *search.Problem, name string, err error) {
	n, cluster, err := clusterSize(argument)
	if err != nil {
		return nil, "", err
	}
	if cluster {
		if o.field != "" && o.field != "lj" {
			return nil, "", fmt.Errorf("a Lennard-Jones cluster takes --field lj")
		}
		p, err = search.NewClusterProblem(n)
		return p, "", err
	}
	r, err := readOne(cmd, argument, o.record, o.charge)
	if err != nil {
		return nil, "", err
	}
	m, err := r.Single()
	if err != nil {
		return nil, "", err
	}
	p, err = search.NewMoleculeProblem(cmd.Context(), m, o.field, r.Geometry, o.settings.Seed)
	return p, r.Name, err
}

// resultSoFar reports the finished rounds of an interrupted search.
func resultSoFar(c search.Checkpoint, p search.Progress, s search.Settings) *search.Result {
	r := &search.Result{Settings: s, Counted: c.Counted, Coverage: p.Coverage}
	for _, m := range c.Minima {
		if m.Degeneracy > 0 {
			r.Minima = append(r.Minima, m)
		}
	}
	return r
}

func (o *searchOptions) print(out io.Writer, d report.Document, p *search.Problem) error {
	if o.output != "" {
		if err := writeOutput(o.output, d, p); err != nil {
			return err
		}
	}
	if o.json {
		return report.Write(out, report.JSON, d, p.Molecule)
	}
	return report.WriteTable(out, d)
}

func writeOutput(path string, d report.Document, p *search.Problem) (err error) {
	format, err := outputFormat(path)
	if err != nil {
		return err
	}
	f, err := os.Create(path)
	if err != nil {
		return fmt.Errorf("the output file cannot be written: %w", err)
	}
	defer func() { err = errors.Join(err, f.Close()) }()
	return report.Write(f, format, d, p.Molecule)
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
