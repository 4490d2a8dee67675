package molecule

import "slices"

// cycleBasis collects linearly independent cycles over GF(2). A cycle is known by its chords, the bonds outside a spanning
// forest, so that the vectors have one bit for each ring and not for each bond.
type cycleBasis struct {
	adjacency [][]Neighbor
	chord     []int // number of the chord that a bond is, or -1
	rows      [][]uint64
	pivots    []int
	missing   int // rings still to be found
	rings     [][]int
}

func newCycleBasis(adjacency [][]Neighbor, bonds int) *cycleBasis {
	b := &cycleBasis{adjacency: adjacency, chord: make([]int, bonds)}
	inForest := make([]bool, bonds)
	seen := make([]bool, len(adjacency))
	for root := range adjacency {
		if seen[root] {
			continue
		}
		seen[root] = true
		for queue := []int{root}; len(queue) > 0; queue = queue[1:] {
			for _, n := range adjacency[queue[0]] {
				if !seen[n.Atom] {
					seen[n.Atom], inForest[n.Bond] = true, true
					queue = append(queue, n.Atom)
				}
			}
		}
	}
	for i := range b.chord {
		b.chord[i] = -1
	}
	for i, around := range adjacency {
		for _, n := range around {
			if i < n.Atom && !inForest[n.Bond] {
				b.chord[n.Bond] = b.missing
				b.missing++
			}
		}
	}
	return b
}

// add takes a ring into the basis if it is independent of those already there.
func (b *cycleBasis) add(ring []int) {
	if b.missing == 0 {
		return
	}
	row := make([]uint64, (len(b.rings)+b.missing+63)/64)
	for k, atom := range ring {
		next := ring[(k+1)%len(ring)]
		at := slices.IndexFunc(b.adjacency[atom], func(n Neighbor) bool { return n.Atom == next })
		if c := b.chord[b.adjacency[atom][at].Bond]; c >= 0 {
			row[c/64] ^= 1 << (c % 64)
		}
	}
	for i, other := range b.rows {
		if p := b.pivots[i]; row[p/64]>>(p%64)&1 == 1 {
			for w := range row {
				row[w] ^= other[w]
			}
		}
	}
	for c := range len(b.rings) + b.missing {
		if row[c/64]>>(c%64)&1 == 1 {
			b.rows, b.pivots = append(b.rows, row), append(b.pivots, c)
			b.rings = append(b.rings, ring)
			b.missing--
			return
		}
	}
}
