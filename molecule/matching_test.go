package molecule

import (
	"testing"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"
)

// largestMatching counts by trying everything.
func largestMatching(adjacency [][]int, used []bool, from int) int {
	for ; from < len(adjacency); from++ {
		if used[from] {
			continue
		}
		best := largestMatching(adjacency, used, from+1) // leave it unmatched
		used[from] = true
		for _, j := range adjacency[from] {
			if !used[j] {
				used[j] = true
				best = max(best, 1+largestMatching(adjacency, used, from+1))
				used[j] = false
			}
		}
		used[from] = false
		return best
	}
	return 0
}

func TestMatchingIsMaximum(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(1, 10).Draw(t, "vertices")
		adjacency := make([][]int, n)
		for i := range n {
			for j := range i {
				if rapid.IntRange(0, 3).Draw(t, "edge") == 0 {
					adjacency[i] = append(adjacency[i], j)
					adjacency[j] = append(adjacency[j], i)
				}
			}
		}
		m := newMatching(n)
		m.extend(adjacency)
		size := 0
		for i, mate := range m.mate {
			if mate >= 0 {
				require.Equal(t, i, m.mate[mate])
				require.Contains(t, adjacency[i], mate)
				size++
			}
		}
		require.Equal(t, largestMatching(adjacency, make([]bool, n), 0), size/2)
	})
}
