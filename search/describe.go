package search

import (
	"context"

	"golang.org/x/sync/errgroup"

	"tarn/ensemble"
	"tarn/minimize"
)

// described tells whether the properties of a minimum have been computed.
func (m *Minimum) described() bool { return m.Degeneracy > 0 }

// describe computes the properties of minima in parallel; each is independent of the others.
func (p *Problem) describe(ctx context.Context, minima []*Minimum, workers int) error {
	group, describing := errgroup.WithContext(ctx)
	group.SetLimit(workers)
	for _, m := range minima {
		if m.described() {
			continue
		}
		group.Go(func() error {
			if err := describing.Err(); err != nil {
				return err
			}
			return p.describeOne(m)
		})
	}
	return group.Wait()
}

func (p *Problem) describeOne(m *Minimum) error {
	v, err := p.Symmetry.Versions(m.X, p.tolerance())
	if err != nil {
		return err
	}
	m.SymmetryNumber, m.Chiral, m.Degeneracy = v.SymmetryNumber, v.Chiral, v.Degeneracy
	if p.Cluster() {
		return nil
	}
	modes, err := minimize.NormalModes(minimize.HessianAt(p.Field, m.X), p.masses, m.X)
	if err != nil {
		return err
	}
	m.WavenumbersCM1 = modes.WavenumbersCM1
	if len(m.WavenumbersCM1) > 0 {
		m.LowestModeCM1 = m.WavenumbersCM1[0]
	}
	m.RotationalConstantsMHz = ensemble.RotationalConstants(m.X, p.masses)
	m.DipoleDebye = ensemble.Dipole(m.X, p.charges, p.masses)
	return nil
}
