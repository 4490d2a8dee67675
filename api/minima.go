package api

import (
	"cmp"
	"context"
	"fmt"
	"math"
	"mime"
	"net/http"
	"slices"
	"strconv"
	"strings"
	"unicode"

	"github.com/danielgtaylor/huma/v2"

	"tarn/dedupe"
	"tarn/ensemble/report"
	"tarn/molecule"
	"tarn/search"
	"tarn/server/jobs"
	"tarn/store"
)

type minimaQuery struct {
	Key          string  `path:"key" maxLength:"100"`
	Field        string  `query:"field" enum:"mmff94,mmff94s,lj" doc:"Force field; default: the one in which there is a library"`
	TemperatureK float64 `query:"temperature_k" default:"298.15" exclusiveMinimum:"0" maximum:"10000" doc:"Of the populations"`
	Window       float64 `query:"window" minimum:"0" maximum:"1000" doc:"Energy range above the lowest minimum, kcal/mol; default: the widest that was searched"`
	RMSD         float64 `query:"rmsd" minimum:"0" maximum:"100" doc:"Leave out minima closer than this, in Å over all atoms, to a lower one; populations are those of the whole list"`
	Limit        int     `query:"limit" default:"1000" minimum:"1" maximum:"100000"`
	Cursor       string  `query:"cursor" pattern:"^[0-9]{1,9}$" patternDescription:"the next_cursor of another answer" doc:"next_cursor of the page before"`
	Format       string  `query:"format" enum:"json,sdf,xyz,csv" doc:"Instead of the Accept header"`
	Accept       string  `header:"Accept"`
}

// Resolve refuses what is written as a number but is none; huma calls it.
func (q *minimaQuery) Resolve(huma.Context) []error {
	var faults []error
	for name, v := range map[string]float64{"temperature_k": q.TemperatureK, "window": q.Window, "rmsd": q.RMSD} {
		if math.IsNaN(v) || math.IsInf(v, 0) {
			faults = append(faults, &Fault{Location: "query." + name, Message: "expected a finite number"})
		}
	}
	return faults
}

func minimaOperation(op huma.Operation) huma.Operation {
	text := &huma.MediaType{Schema: &huma.Schema{Type: "string"}}
	op.Responses = map[string]*huma.Response{"200": {
		Description: "The ranked minima",
		Content: map[string]*huma.MediaType{
			report.JSON.MediaType(): {Schema: &huma.Schema{Type: "object"}},
			report.SDF.MediaType():  text,
			report.XYZ.MediaType():  text,
			"text/csv":              text,
		},
	}}
	return op
}

func (s *server) listMinima(ctx context.Context, in *minimaQuery) (*huma.StreamResponse, error) {
	format, err := in.format()
	if err != nil {
		return nil, err
	}
	document, reference, err := s.document(in)
	if err != nil {
		return nil, s.problem(ctx, err)
	}
	if reference == nil && format == report.SDF {
		return nil, newProblem(http.StatusNotAcceptable, "a cluster has no bonds to write into an SD file; ask for xyz, csv or json")
	}
	return &huma.StreamResponse{Body: func(hc huma.Context) {
		hc.SetHeader("Content-Type", format.MediaType())
		if format != report.JSON || in.Format != "" {
			name := fileName(document.Molecule) + "." + string(format)
			hc.SetHeader("Content-Disposition", mime.FormatMediaType("attachment", map[string]string{"filename": name}))
		}
		if err := report.Write(hc.BodyWriter(), format, document, reference); err != nil {
			s.Log.Warn("a download was not finished", "molecule", in.Key, "error", err)
		}
	}}, nil
}

var acceptable = map[string]report.Format{
	"application/json": report.JSON, "*/*": report.JSON, "application/*": report.JSON,
	"chemical/x-mdl-sdfile": report.SDF, "chemical/x-xyz": report.XYZ, "text/csv": report.CSV, "text/*": report.CSV,
}

// format picks the format from the query or the Accept header.
func (q *minimaQuery) format() (report.Format, error) {
	if q.Format != "" {
		return report.Format(q.Format), nil
	}
	if q.Accept == "" {
		return report.JSON, nil
	}
	best, most := report.Format(""), 0.0
	for part := range strings.SplitSeq(q.Accept, ",") {
		media, parameters, err := mime.ParseMediaType(part)
		if err != nil {
			continue
		}
		weight := 1.0
		if text, given := parameters["q"]; given {
			weight, _ = strconv.ParseFloat(text, 64)
		}
		if f := acceptable[media]; f != "" && weight > most {
			best, most = f, weight
		}
	}
	if best != "" {
		return best, nil
	}
	return "", newProblem(http.StatusNotAcceptable,
		"minima come as application/json, chemical/x-mdl-sdfile, chemical/x-xyz or text/csv; or add ?format=json|sdf|xyz|csv")
}

// document ranks the library of a molecule as the query asks for it.
func (s *server) document(q *minimaQuery) (report.Document, *molecule.Molecule, error) {
	var d report.Document
	m, err := s.Library.Molecule(q.Key)
	if err != nil {
		return d, nil, err
	}
	reference, err := jobs.Reference(m)
	if err != nil {
		return d, nil, err
	}
	if d.Field, err = s.fieldOf(q); err != nil {
		return d, nil, err
	}
	entries, err := s.Library.Entries(q.Key, d.Field)
	if err != nil {
		return d, nil, err
	}
	searches, err := s.Queue.JobsOf(q.Key, d.Field)
	if err != nil {
		return d, nil, err
	}
	d.Molecule, d.TemperatureK = identity(m), q.TemperatureK
	describeSearches(&d, searches)
	if q.Window > 0 {
		d.Settings.WindowKcal = q.Window
	}
	minima := inWindow(entries, d.Settings.WindowKcal)
	d.Elements = report.Symbols(reference, atomsOf(minima))
	d.Minima = report.Ranked(minima, q.TemperatureK)
	if q.RMSD > 0 && reference != nil {
		if d.Minima, err = thinned(d.Minima, minima, reference, q.RMSD); err != nil {
			return d, nil, err
		}
	}
	return page(d, q), reference, nil
}

// fieldOf returns the force field asked for, or the first one in which there is a library.
func (s *server) fieldOf(q *minimaQuery) (string, error) {
	if q.Field != "" {
		return q.Field, nil
	}
	fields, err := s.Library.Fields(q.Key)
	if err != nil {
		return "", err
	}
	if len(fields) > 0 {
		return fields[0], nil
	}
	return "mmff94", nil
}

// describeSearches says which searches a library comes from: settings, coverage and warnings of the one that came farthest, effort of all.
func describeSearches(d *report.Document, searches []store.Job) {
	window, coverage := 0.0, -1.0
	for i := range searches {
		job := &searches[i]
		d.Quenches += job.Progress.Quenches
		d.Evaluations += job.Progress.Evaluations
		d.WallSeconds += job.Counted.ElapsedSeconds
		if job.Progress.Quenches > 0 {
			window = max(window, job.Settings.WindowKcal)
		}
		if job.Progress.Coverage.Estimate < coverage {
			continue
		}
		coverage = job.Progress.Coverage.Estimate
		d.Settings, d.Method, d.Seed = job.Settings, job.Settings.Method, &job.Settings.Seed
		d.Coverage, d.StopReason = job.Progress.Coverage, string(job.StopReason)
		d.Warnings = append(slices.Clone(job.Notes), report.Warnings(job.Counted)...)
	}
	d.Settings.WindowKcal = max(window, d.Settings.WindowKcal)
}

// inWindow returns the described minima within a window of the lowest. Those above every window that was searched have no properties.
func inWindow(entries []store.Entry, window float64) []search.Minimum {
	lowest := math.Inf(1)
	for i := range entries {
		lowest = min(lowest, entries[i].Energy)
	}
	minima := make([]search.Minimum, 0, len(entries))
	for i := range entries {
		if m := entries[i].Minimum; m.Degeneracy > 0 && m.Energy <= lowest+window {
			minima = append(minima, m)
		}
	}
	slices.SortStableFunc(minima, func(a, b search.Minimum) int { return cmp.Compare(a.Energy, b.Energy) })
	return minima
}

func atomsOf(minima []search.Minimum) int {
	if len(minima) == 0 {
		return 0
	}
	return len(minima[0].X) / 3
}

// thinned keeps a minimum only if it is at least rmsd away from every lower one that is kept.
func thinned(rows []report.Minimum, minima []search.Minimum, reference *molecule.Molecule, rmsd float64) ([]report.Minimum, error) {
	symmetry, err := dedupe.NewSymmetry(reference)
	if err != nil {
		return nil, err
	}
	var kept []int
	for i := range rows {
		if !slices.ContainsFunc(kept, func(j int) bool { return symmetry.Match(minima[j].X, minima[i].X).RMSD < rmsd }) {
			kept = append(kept, i)
		}
	}
	out := make([]report.Minimum, 0, len(kept))
	for _, i := range kept {
		out = append(out, rows[i])
	}
	return out, nil
}

// page cuts the rows to the page asked for; cursors are positions in the list.
func page(d report.Document, q *minimaQuery) report.Document {
	from, _ := strconv.Atoi(q.Cursor)
	from = min(max(from, 0), len(d.Minima))
	to := min(from+q.Limit, len(d.Minima))
	if to < len(d.Minima) {
		d.NextCursor = strconv.Itoa(to)
	}
	d.Minima = d.Minima[from:to]
	return d
}

// fileName is a plain name for a download.
func fileName(m report.Molecule) string {
	name := strings.Map(func(r rune) rune {
		if unicode.IsLetter(r) || unicode.IsDigit(r) || r == '-' {
			return r
		}
		return '-'
	}, cmp.Or(m.Name, m.Formula))
	return fmt.Sprintf("%s-%s", strings.Trim(name, "-"), m.Key)
}
