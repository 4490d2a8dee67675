package search

import (
	"context"

	"tarn/search/integrate"
	"tarn/search/schedule"
)

// limits are the temperatures, as kT, between which a walk is annealed.
type limits struct{ coldest, hottest float64 }

// For molecules 400 to 1500 K: below, walks no longer leave their minimum; above, snapshots are far from any minimum of the window.
// For clusters in reduced units: they freeze near 0.15 and evaporate above 0.4.
func thermalLimits(p *Problem) limits {
	if p.Cluster() {
		return limits{0.1, 0.45}
	}
	return limits{400 * integrate.Boltzmann, 1500 * integrate.Boltzmann}
}

// annealWalk is Metropolis Monte Carlo on the potential energy surface, cooled from a start temperature that sampled uphill moves set, with
// snapshots quenched along each stage. When it is cold it is reheated, lower each time, from a minimum of the library.
func (w *walker) annealWalk(ctx context.Context, start []float64) error {
	p := w.problem
	proposals := clusterProposals(p.Atoms())
	if !p.Cluster() {
		proposals = moleculeProposals(p.moves, p.Atoms())
	}
	between := 40 + 6*p.moves.Freedom() // moves from snapshot to snapshot
	if p.Cluster() {
		between = 20 * p.Atoms()
	}
	m := newMetropolis(w.energy, start, proposals, w.rng)
	span := thermalLimits(p)
	factor, slowness := schedule.Reheat(w.reheat)
	hottest := factor * schedule.Start(m.uphill(40), schedule.StartAcceptance)
	hottest = min(span.hottest, max(2*span.coldest, hottest))
	kT := hottest
	for {
		m.kT, m.tuning = kT, true
		for range between {
			m.move()
		}
		m.tuning = false
		m.stage()
		const snapshots = 3
		for range snapshots {
			for range between {
				m.move()
			}
			if err := ctx.Err(); err != nil {
				return err
			}
			if _, err := w.quench(ctx, m.x, w.kelvin(kT)); err != nil {
				return err
			}
		}
		acceptance, mean, deviation := m.stage()
		w.noteStage(kT, acceptance, mean)
		kT = schedule.Cool(kT, deviation, slowness)
		if kT < span.coldest {
			hottest = max(2*span.coldest, 0.8*hottest)
			kT = hottest
			if minimum := w.jump(func(float64) bool { return true }); minimum != nil {
				m.place(minimum.X)
			}
		}
	}
}

// kelvin turns kT into a temperature; for clusters it stays in reduced units.
func (w *walker) kelvin(kT float64) float64 {
	if w.problem.Cluster() {
		return kT
	}
	return kT / integrate.Boltzmann
}

func (w *walker) noteStage(kT, acceptance, mean float64) {
	w.trail.stages = append(w.trail.stages, Stage{
		Stage: len(w.trail.stages) + 1, Kind: w.trail.kind.String(), Walks: 1,
		TemperatureK: w.kelvin(kT), Acceptance: acceptance, EnergyKcal: mean,
	})
}
