package search

import (
	"context"
	"math"

	"tarn/minimize"
	"tarn/molecule"
	"tarn/search/integrate"
)

const (
	// dynamicsTemperature in K and friction in 1/fs of walks by dynamics; for clusters, kT and friction in reduced units of time.
	dynamicsTemperature = 1000
	friction            = 0.002
	hydrogenMass        = 3.0 // u, repartitioned
	// A snapshot is taken when the watched torsions have turned so far from the last one that the mean of cos(change) is below
	// decorrelated, but within these numbers of pieces of the trajectory.
	decorrelated        = 0.6
	piece               = 25 // steps
	leastPieces         = 2
	mostPieces          = 16
	equilibrationPieces = 8
)

// dynamicsWalk is Langevin dynamics at high temperature with snapshots quenched on a stride that follows the decorrelation of torsions. The
// trajectory starts again where it began when a snapshot turns out to have left the stereochemistry or the bonds.
func (w *walker) dynamicsWalk(ctx context.Context, start []float64) error {
	p := w.problem
	masses, temperature, dt := p.masses, float64(dynamicsTemperature), 0.0
	if p.Cluster() {
		// One unit of reduced time is sqrt(m σ²/ε); in the units of package integrate that is the length below for m = 1 u.
		temperature = 0.35 / integrate.Boltzmann
		dt = 0.01 / math.Sqrt(4184/6.02214076e23/1.66053906892e-27*1e-10)
	} else {
		masses = integrate.HeavyHydrogens(p.Molecule, p.masses, hydrogenMass)
		modes, err := minimize.NormalModes(minimize.HessianAt(p.Field, start), masses, start)
		if err != nil {
			return err
		}
		fastest := 3000.0
		if n := len(modes.WavenumbersCM1); n > 0 {
			fastest = modes.WavenumbersCM1[n-1]
		}
		dt = integrate.StepFor(fastest)
	}
	s := integrate.NewSystem(p.Field, start, masses, temperature, w.rng)
	run := func(pieces int) {
		s.Langevin(pieces*piece, dt, temperature, friction, w.rng)
		w.trail.evaluations += pieces * piece
	}
	run(equilibrationPieces)
	sum, count := 0.0, 0
	reference := append([]float64(nil), s.X...)
	for {
		for pieces := 1; pieces <= mostPieces; pieces++ {
			run(1)
			if err := ctx.Err(); err != nil {
				return err
			}
			if pieces >= leastPieces && p.correlation(reference, s.X) < decorrelated {
				break
			}
		}
		copy(reference, s.X)
		sum += s.Energy
		count++
		o, err := w.quench(ctx, s.X, w.kelvin(temperature*integrate.Boltzmann))
		if err != nil {
			w.noteStage(temperature*integrate.Boltzmann, 0, sum/float64(count))
			return err
		}
		if o.fate == inverted || o.fate == broken || math.IsNaN(s.Energy) {
			s = integrate.NewSystem(p.Field, start, masses, temperature, w.rng)
			run(equilibrationPieces)
			copy(reference, s.X)
		}
	}
}

// correlation is the mean cosine of the changes of the watched torsions; without any it is 1.
func (p *Problem) correlation(a, b molecule.Geometry) float64 {
	if len(p.watched) == 0 {
		return 1
	}
	sum := 0.0
	for _, t := range p.watched {
		sum += math.Cos(a.Torsion(t[0], t[1], t[2], t[3]) - b.Torsion(t[0], t[1], t[2], t[3]))
	}
	return sum / float64(len(p.watched))
}
