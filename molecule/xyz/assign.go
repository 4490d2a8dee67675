package xyz

import (
	"cmp"
	"encoding/binary"
	"math"
	"slices"

	"tarn/molecule"
)

// cost compares drawings: valences and charges first, geometry among equals.
type cost struct {
	valence  int
	geometry float64
}

func (c cost) plus(o cost) cost { return cost{c.valence + o.valence, c.geometry + o.geometry} }

func (c cost) less(o cost) bool {
	return c.valence < o.valence || c.valence == o.valence && c.geometry < o.geometry-1e-9
}

// structure is what is known before bond orders: neighbours, lengths, and what each atom may be.
type structure struct {
	elements []molecule.Element
	g        molecule.Geometry
	bonds    []contact
	around   [][]molecule.Neighbor
	choices  [][]state
	outward  []bool // bonds that leave a ring which could be aromatic
}

// step is one decision on the way to an assignment: orders of bonds and states of atoms.
type step struct {
	before *step
	atom   int // atom whose state is chosen, or -1
	state  state
	bond   int // bond whose extra order is chosen, or -1
	extra  int
}

// partial is the best way so far to a situation: how many extra bonds each open atom has already, and the charge.
type partial struct {
	used   string // one byte for each atom of the front, in its order
	charge int
	rare   int // atoms in a state that is not usual
	cost   cost
	last   *step
}

// maxRare is how many atoms of one part may be in states that are not usual, and maxPartials how many situations are
// followed: enough for fullerenes and for flakes of graphene with a hundred rings.
const (
	maxRare     = 2
	maxPartials = 10_000
)

// solve returns the best assignment of one part (atoms joined by bonds that may be multiple) for each charge it can have,
// by dynamic programming: atoms are taken in one after the other, and of all ways that leave the same open valences at the
// front and the same charge only the best is kept. It returns false if the part is too entangled, and no charge if nothing fits.
func (s *structure) solve(part []int, limit rank) (map[int]*partial, bool) {
	in := make(map[int]int, len(part)) // atom → number of its neighbours not taken in yet
	for _, atom := range part {
		in[atom] = 0
	}
	for _, atom := range part {
		for _, n := range s.around[atom] {
			if _, ok := in[n.Atom]; ok && s.mayBeMultiple(n.Bond) {
				in[atom]++
			}
		}
	}
	taken := make(map[int]bool, len(part))
	var front []int
	now := []*partial{{}}
	for range part {
		atom := s.nextAtom(part, taken, front, in)
		taken[atom] = true
		front = append(front, atom)
		for _, p := range now {
			p.used += "\x00"
		}
		for _, n := range s.around[atom] {
			if at := slices.Index(front, n.Atom); at >= 0 && s.mayBeMultiple(n.Bond) {
				now = s.bondOrders(now, n.Bond, at, len(front)-1, s.most(n.Atom, limit), s.most(atom, limit))
				in[atom]--
				in[n.Atom]--
			}
		}
		for k := len(front) - 1; k >= 0; k-- {
			if in[front[k]] == 0 {
				now = s.close(now, front[k], k, limit)
				front = slices.Delete(front, k, k+1)
			}
		}
		if len(now) > maxPartials {
			return nil, false
		}
	}
	best := make(map[int]*partial, len(now))
	for _, p := range now {
		best[p.charge] = p
	}
	return best, true
}

// nextAtom chooses the atom that keeps the front short.
func (s *structure) nextAtom(part []int, taken map[int]bool, front []int, in map[int]int) int {
	candidates := part
	if len(front) > 0 {
		candidates = nil
		for _, f := range front {
			for _, n := range s.around[f] {
				if _, ok := in[n.Atom]; ok && !taken[n.Atom] && s.mayBeMultiple(n.Bond) {
					candidates = append(candidates, n.Atom)
				}
			}
		}
	}
	best, bestGrowth := -1, 0
	for _, atom := range candidates {
		if taken[atom] {
			continue
		}
		growth, closed := 1, in[atom]
		for _, n := range s.around[atom] {
			if taken[n.Atom] && s.mayBeMultiple(n.Bond) && slices.Contains(front, n.Atom) {
				closed--
				if in[n.Atom] == 1 {
					growth--
				}
			}
		}
		if closed == 0 {
			growth--
		}
		if best < 0 || growth < bestGrowth || growth == bestGrowth && atom < best {
			best, bestGrowth = atom, growth
		}
	}
	return best
}

// most returns the highest number of extra bonds an atom may have.
func (s *structure) most(atom int, limit rank) int {
	most := 0
	for _, c := range s.choices[atom] {
		if c.rank <= limit {
			most = max(most, c.extra)
		}
	}
	return most
}

func (s *structure) mayBeMultiple(bond int) bool {
	return s.most(s.bonds[bond].a, open) > 0 && s.most(s.bonds[bond].b, open) > 0
}

// bondOrders follows every situation with each order that a bond between two atoms of the front may have.
func (s *structure) bondOrders(now []*partial, bond, i, j, mostI, mostJ int) []*partial {
	next := newFollowed(len(now))
	for _, p := range now {
		for extra := 0; extra <= min(2, mostI-int(p.used[i]), mostJ-int(p.used[j])); extra++ {
			used := append(next.used[:0], p.used...)
			used[i] += byte(extra)
			used[j] += byte(extra)
			next.used = used
			next.add(p, 0, p.rare, p.cost.plus(cost{0, s.misfit(bond, extra)}), step{atom: -1, bond: bond, extra: extra})
		}
	}
	return next.list
}

// close chooses the states of an atom all of whose bonds are decided and takes it off the front.
func (s *structure) close(now []*partial, atom, at int, limit rank) []*partial {
	next := newFollowed(len(now))
	for _, p := range now {
		for _, c := range s.choices[atom] {
			if c.rank > limit || c.extra != int(p.used[at]) {
				continue
			}
			rare := p.rare
			if c.rank > usual {
				rare++
			}
			if rare > maxRare {
				continue
			}
			next.used = append(append(next.used[:0], p.used[:at]...), p.used[at+1:]...)
			next.add(p, c.charge, rare, p.cost.plus(cost{c.cost, s.strain(atom, c)}), step{atom: atom, state: c, bond: -1})
		}
	}
	return next.list
}

// followed keeps the best of equal situations, in the order in which they came up.
type followed struct {
	list []*partial
	at   map[string]int
	used []byte // of the situation to be added next
	key  []byte
}

func newFollowed(size int) *followed { return &followed{at: make(map[string]int, size)} }

// add follows p to f.used with a decision that changes the charge.
func (f *followed) add(p *partial, charge, rare int, c cost, decision step) {
	charge += p.charge
	f.key = binary.AppendVarint(append(f.key[:0], f.used...), int64(charge))
	at, known := f.at[string(f.key)]
	if known && !c.less(f.list[at].cost) {
		return
	}
	decision.before = p.last
	q := &partial{used: string(f.used), charge: charge, rare: rare, cost: c, last: &decision}
	if known {
		f.list[at] = q
		return
	}
	f.at[string(f.key)] = len(f.list)
	f.list = append(f.list, q)
}

// misfit is how far a bond is from the usual length of its order, in tenths of an ångström. A multiple bond that leaves a
// ring which could be aromatic counts as 0.3 Å off, so that of two equal drawings the aromatic one is taken.
func (s *structure) misfit(bond, extra int) float64 {
	const outward = 3
	b := s.bonds[bond]
	off := 0.0
	if length, ok := usualLength(s.elements[b.a], s.elements[b.b], extra); ok {
		off = 10 * max(length-b.distance, b.distance-length)
	}
	if extra > 0 && s.outward[bond] {
		off += outward
	}
	return off
}

// strain is the price of a state in tenths of an ångström: of a triple bond or two double bonds at a light atom whose two
// neighbours are not in line (150° and more), and of a charge on sulfur where it could be on oxygen or nitrogen.
func (s *structure) strain(atom int, c state) float64 {
	const (
		line   = 150 * math.Pi / 180
		bent   = 5
		sulfur = 2
	)
	around := s.around[atom]
	switch {
	case c.extra == 2 && len(around) == 2 && s.elements[atom] < 14 && s.g.Angle(around[0].Atom, atom, around[1].Atom) < line:
		return bent
	case c.charge == -1 && s.elements[atom] >= 16:
		return sulfur
	}
	return 0
}

// parts returns the sets of atoms joined by bonds that may be multiple, ordered by first atom.
func (s *structure) parts() [][]int {
	seen := make([]bool, len(s.elements))
	var parts [][]int
	for start := range s.elements {
		if seen[start] {
			continue
		}
		seen[start] = true
		part := []int{start}
		for k := 0; k < len(part); k++ {
			for _, n := range s.around[part[k]] {
				if !seen[n.Atom] && s.mayBeMultiple(n.Bond) {
					seen[n.Atom] = true
					part = append(part, n.Atom)
				}
			}
		}
		slices.Sort(part)
		parts = append(parts, part)
	}
	slices.SortFunc(parts, func(a, b []int) int { return cmp.Compare(a[0], b[0]) })
	return parts
}
