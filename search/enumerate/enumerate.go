// Package enumerate finds the minima of small molecules by brute force, as a yardstick for searches: every combination of torsion
// states, on every ring state, with every nitrogen both ways, is quenched. It shares the force field, the quench and the identity check
// with package search, but none of its walks. Its cost grows exponentially; it is meant for tests.
package enumerate

import (
	"context"
	"errors"
	"math"
	"math/rand/v2"

	"golang.org/x/sync/errgroup"

	"tarn/dedupe"
	"tarn/minimize"
	"tarn/molecule"
	"tarn/molecule/embed"
	"tarn/search/moves"
)

// Minimum is one minimum found.
type Minimum struct {
	X      []float64
	Energy float64
	Hits   int
}

// Settings limit the work.
type Settings struct {
	MostQuenches int // combinations of one ring state; the grid of torsions is made as fine as this allows
	RingDraws    int // random geometries from which ring states are collected
	Workers      int
	Seed         uint64
}

// Minima returns what all combinations lead to, in the order of discovery. Geometries that leave the stereochemistry are dropped.
func Minima(ctx context.Context, m *molecule.Molecule, f minimize.Field, symmetry *dedupe.Symmetry, draw func(*rand.Rand) (molecule.Geometry, error), s Settings) ([]Minimum, error) {
	set := moves.Analyze(m)
	bases, err := ringStates(ctx, m, f, set, draw, s)
	if err != nil {
		return nil, err
	}
	angles := grid(len(set.Torsions), len(set.Inversions), s.MostQuenches)
	var starts [][]float64
	for _, base := range bases {
		combinations := 1 << len(set.Inversions)
		for range set.Torsions {
			combinations *= angles
		}
		for code := range combinations {
			x := append([]float64(nil), base...)
			rest := code
			for i := range set.Inversions {
				if rest&1 == 1 {
					set.Inversions[i].Apply(x)
				}
				rest >>= 1
			}
			for i := range set.Torsions {
				t := &set.Torsions[i]
				now := molecule.Geometry(x).Torsion(t.Ends[0], t.A, t.B, t.Ends[1])
				want := 2*math.Pi*float64(rest%angles)/float64(angles) + math.Pi
				turn(t, x, want-now)
				rest /= angles
			}
			starts = append(starts, x)
		}
	}
	return quenchAll(ctx, m, f, symmetry, starts, s.Workers)
}

// turn changes the torsion angle by an amount whichever side moves.
func turn(t *moves.Torsion, x []float64, amount float64) {
	angle := func() float64 { return molecule.Geometry(x).Torsion(t.Ends[0], t.A, t.B, t.Ends[1]) }
	before := angle()
	t.Rotate(x, amount)
	if math.Abs(math.Remainder(angle()-before-amount, 2*math.Pi)) > 1e-6 {
		t.Rotate(x, -2*amount)
	}
}

// grid returns how many angles each torsion takes: 12, 6, 4 or 3, whatever the limit allows.
func grid(torsions, inversions, most int) int {
	for _, angles := range []int{12, 6, 4} {
		if float64(int(1)<<inversions)*math.Pow(float64(angles), float64(torsions)) <= float64(most) {
			return angles
		}
	}
	return 3
}

// ringStates returns one geometry for each distinct pattern of ring torsions among random quenched geometries.
func ringStates(ctx context.Context, m *molecule.Molecule, f minimize.Field, set *moves.Set, draw func(*rand.Rand) (molecule.Geometry, error), s Settings) ([][]float64, error) {
	rng := rand.New(rand.NewPCG(s.Seed, 17))
	draws := 1
	if len(set.Cranks) > 0 {
		draws = s.RingDraws
	}
	var bases [][]float64
	seen := map[string]bool{}
	q := minimize.NewQuencher(f, minimize.Settings{})
	for range draws {
		g, err := draw(rng)
		if errors.Is(err, embed.ErrNoGeometry) {
			continue
		}
		if err != nil {
			return nil, err
		}
		r, err := q.Crude(ctx, g)
		if err != nil {
			return nil, err
		}
		if pattern := ringPattern(m, r.X); !seen[pattern] {
			seen[pattern] = true
			bases = append(bases, r.X)
		}
	}
	return bases, nil
}

// ringPattern names the ring torsions to within 30°.
func ringPattern(m *molecule.Molecule, x molecule.Geometry) string {
	var pattern []byte
	for _, r := range m.Rings() {
		n := len(r)
		for k := range r {
			t := x.Torsion(r[k], r[(k+1)%n], r[(k+2)%n], r[(k+3)%n])
			pattern = append(pattern, byte('a'+int(math.Round(t/(math.Pi/6)))+6))
		}
	}
	return string(pattern)
}

func quenchAll(ctx context.Context, m *molecule.Molecule, f minimize.Field, symmetry *dedupe.Symmetry, starts [][]float64, workers int) ([]Minimum, error) {
	ends := make([]minimize.Result, len(starts))
	group, quenching := errgroup.WithContext(ctx)
	workers = max(1, workers)
	for worker := range workers {
		group.Go(func() error {
			q := minimize.NewQuencher(f, minimize.Settings{})
			for i := worker; i < len(starts); i += workers {
				r, err := q.Quench(quenching, starts[i])
				if quenching.Err() != nil {
					return quenching.Err()
				}
				if err == nil && m.CheckStereo(r.X) == nil {
					ends[i] = r
				}
			}
			return nil
		})
	}
	if err := group.Wait(); err != nil {
		return nil, err
	}
	index := dedupe.NewIndex(symmetry, dedupe.Tolerance{})
	var minima []Minimum
	for _, r := range ends {
		if r.X == nil {
			continue
		}
		id, ok := index.Find(r.X, r.Energy)
		if !ok {
			id = index.Add(r.X, r.Energy)
			minima = append(minima, Minimum{X: r.X, Energy: r.Energy})
		}
		minima[id].Hits++
	}
	return minima, nil
}
