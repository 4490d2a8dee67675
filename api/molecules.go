package api

import (
	"context"

	"tarn/ensemble/report"
	"tarn/molecule/notation"
)

type moleculeList struct {
	Body struct {
		Molecules []report.Molecule `json:"molecules"`
	}
}

func (s *server) listMolecules(ctx context.Context, _ *struct{}) (*moleculeList, error) {
	found, err := s.Library.Molecules()
	if err != nil {
		return nil, s.problem(ctx, err)
	}
	list := &moleculeList{}
	list.Body.Molecules = make([]report.Molecule, 0, len(found))
	for _, m := range found {
		list.Body.Molecules = append(list.Body.Molecules, identity(m))
	}
	return list, nil
}

// LibraryOverview says what is known of a molecule in one force field.
type LibraryOverview struct {
	Field  string  `json:"field"`
	Minima int     `json:"minima"`
	Lowest float64 `json:"lowest_energy_kcal_mol"`
}

type moleculeAnswer struct {
	Body struct {
		report.Molecule
		Libraries []LibraryOverview `json:"libraries"`
	}
}

type moleculeKey struct {
	Key string `path:"key" maxLength:"100"`
}

func (s *server) getMolecule(ctx context.Context, in *moleculeKey) (*moleculeAnswer, error) {
	m, err := s.Library.Molecule(in.Key)
	if err != nil {
		return nil, s.problem(ctx, err)
	}
	fields, err := s.Library.Fields(in.Key)
	if err != nil {
		return nil, s.problem(ctx, err)
	}
	out := &moleculeAnswer{}
	out.Body.Molecule, out.Body.Libraries = identity(m), []LibraryOverview{}
	for _, field := range fields {
		entries, err := s.Library.Entries(in.Key, field)
		if err != nil {
			return nil, s.problem(ctx, err)
		}
		overview := LibraryOverview{Field: field, Minima: len(entries)}
		for i, e := range entries {
			if i == 0 || e.Energy < overview.Lowest {
				overview.Lowest = e.Energy
			}
		}
		out.Body.Libraries = append(out.Body.Libraries, overview)
	}
	return out, nil
}

func (s *server) checkMolecule(ctx context.Context, in *struct{ Body notation.Input }) (*struct{ Body report.Understood }, error) {
	reading, err := in.Body.Parse()
	if err != nil {
		return nil, s.refusal(ctx, err)
	}
	understood, err := report.Understand(reading)
	if err != nil {
		return nil, s.refusal(ctx, err)
	}
	return &struct{ Body report.Understood }{understood}, nil
}
