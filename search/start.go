package search

import (
	"context"
	"fmt"
	"math/rand/v2"
	"slices"

	"tarn/minimize"
	"tarn/molecule"
	"tarn/search/moves"
)

// Settle returns the molecule with all its stereochemistry decided: what it leaves open is read off the geometry (Å), if there is one,
// or has only one possibility. Otherwise it returns an *[UnspecifiedError].
func Settle(m *molecule.Molecule, geometry molecule.Geometry) (*molecule.Molecule, error) {
	if geometry != nil {
		if geometry.Atoms() != len(m.Atoms) {
			return nil, fmt.Errorf("the geometry has %d atoms, the molecule %d", geometry.Atoms(), len(m.Atoms))
		}
		if err := m.CheckStereo(geometry); err != nil {
			return nil, fmt.Errorf("the given coordinates: %w", err)
		}
	}
	open := m.Stereo().Unspecified()
	if open == 0 {
		return m, nil
	}
	if geometry != nil {
		settled, err := m.StereoFromGeometry(geometry)
		if err != nil {
			return nil, fmt.Errorf("reading the stereochemistry off the given coordinates: %w", err)
		}
		return settled, nil
	}
	isomers, err := m.Stereoisomers()
	if err != nil {
		return nil, err
	}
	if len(isomers) == 1 {
		return isomers[0], nil
	}
	return nil, &UnspecifiedError{Open: open, Isomers: isomers}
}

// firstTries is how many random geometries are tried before a molecule is given up.
const firstTries = 20

// firstGeometry quenches the given geometry, or random ones until a quench keeps the stereochemistry.
func (p *Problem) firstGeometry(ctx context.Context, given molecule.Geometry, seed uint64) (molecule.Geometry, error) {
	q := minimize.NewQuencher(p.Field, minimize.Settings{})
	if given != nil {
		r, err := q.Quench(ctx, given)
		if err != nil {
			return nil, fmt.Errorf("quenching the given coordinates: %w", err)
		}
		if err := p.check(r.X); err != nil {
			return nil, fmt.Errorf("quenching the given coordinates: %w", err)
		}
		return r.X, nil
	}
	rng := rand.New(rand.NewPCG(seed, firstStream))
	var reason error
	for range firstTries {
		g, err := p.embedder.Draw(ctx, rng)
		if err != nil {
			return nil, fmt.Errorf("making a first geometry: %w", err)
		}
		r, err := q.Quench(ctx, g)
		if err == nil {
			err = p.check(r.X)
		}
		if err == nil {
			return r.X, nil
		}
		if ctx.Err() != nil {
			return nil, ctx.Err()
		}
		reason = err
	}
	return nil, fmt.Errorf("no first geometry kept its stereochemistry and bonds in the force field (%d tries; the last: %w)", firstTries, reason)
}

// brokenError says that two bonded atoms are no longer at the distance of a bond, or that an atom has left its cluster.
type brokenError struct{ a, b int }

func (e *brokenError) Error() string {
	if e.a == e.b {
		return fmt.Sprintf("atom %d has left the cluster", e.a+1)
	}
	return fmt.Sprintf("the bond between atoms %d and %d is gone", e.a+1, e.b+1)
}

// check returns a *molecule.StereoError or a *brokenError if a quenched geometry is not the molecule any more.
func (p *Problem) check(x molecule.Geometry) error {
	if p.Cluster() {
		return connected(x)
	}
	const shortest, longest = 0.75, 1.35 // of the reference length; bonds in minima are within 10 %
	for i, b := range p.Molecule.Bonds {
		if d := x.Distance(b.A, b.B); p.lengths[i] > 0 && (d < shortest*p.lengths[i] || d > longest*p.lengths[i]) {
			return &brokenError{b.A, b.B}
		}
	}
	return p.Molecule.CheckStereo(x)
}

// connected returns a *brokenError if the atoms of a cluster are not all within reach of each other over neighbours. In minima neighbours
// are within 1.2 σ; quenches that stop on the flat far side of the potential have parts that are farther away.
func connected(x molecule.Geometry) error {
	const reach = 1.6 // σ
	n := x.Atoms()
	seen := make([]bool, n)
	seen[0] = true
	stack, count := []int{0}, 1
	for len(stack) > 0 {
		i := stack[len(stack)-1]
		stack = stack[:len(stack)-1]
		for j := range n {
			if !seen[j] && x.Distance(i, j) < reach {
				seen[j] = true
				count++
				stack = append(stack, j)
			}
		}
	}
	if count == n {
		return nil
	}
	alone := slices.Index(seen, false)
	return &brokenError{alone, alone}
}

// watchedTorsions are those of the rotatable bonds and of the flexible rings.
func watchedTorsions(m *molecule.Molecule, s *moves.Set) [][4]int {
	var watched [][4]int
	for _, t := range s.Torsions {
		watched = append(watched, [4]int{t.Ends[0], t.A, t.B, t.Ends[1]})
	}
	flexible := make(map[int]bool)
	for _, c := range s.Cranks {
		flexible[c.A], flexible[c.B] = true, true
	}
	for _, r := range m.Rings() {
		n := len(r)
		for k := range r {
			if n > 3 && flexible[r[(k+1)%n]] && flexible[r[(k+2)%n]] {
				watched = append(watched, [4]int{r[k], r[(k+1)%n], r[(k+2)%n], r[(k+3)%n]})
			}
		}
	}
	return watched
}
