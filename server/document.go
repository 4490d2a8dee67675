package server

import (
	"tarn/ensemble/report"
	"tarn/search"
	"tarn/store"
)

// documentOf reports the result of one search.
func documentOf(m store.Molecule, p *search.Problem, r *search.Result) report.Document {
	seed := r.Settings.Seed
	return report.Document{
		Molecule: report.Molecule{Name: m.Name, SMILES: m.SMILES, Formula: m.Formula, Key: m.Key},
		Field:    p.FieldName, Method: r.Settings.Method, Seed: &seed, Settings: r.Settings, TemperatureK: r.Settings.TemperatureK,
		Quenches: r.Quenches, Evaluations: r.Evaluations, WallSeconds: r.ElapsedSeconds,
		Coverage: r.Coverage, StopReason: string(r.StopReason), Warnings: report.Warnings(r.Counted),
		Elements: report.Symbols(p.Molecule, p.Atoms()), Minima: report.Ranked(r.Minima, r.Settings.TemperatureK),
	}
}
