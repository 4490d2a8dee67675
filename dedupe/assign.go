package dedupe

import "math"

// assign returns the permutation p that minimises Σ cost[i][p[i]] of a square matrix: the Hungarian method (H. W. Kuhn, Nav. Res.
// Logist. Q. 2, 83 (1955)) in the form of shortest augmenting paths (R. Jonker, A. Volgenant, Computing 38, 325 (1987)), O(n³).
func assign(cost [][]float64) []int {
	n := len(cost)
	u, v := make([]float64, n+1), make([]float64, n+1) // potentials of rows and columns; 0 is a virtual column
	row := make([]int, n+1)                            // row matched to a column, counted from 1
	for i := 1; i <= n; i++ {
		row[0] = i
		at := 0
		slack, from, done := make([]float64, n+1), make([]int, n+1), make([]bool, n+1)
		for j := range slack {
			slack[j] = math.Inf(1)
		}
		for row[at] != 0 {
			done[at] = true
			step, next := math.Inf(1), 0
			for j := 1; j <= n; j++ {
				if done[j] {
					continue
				}
				if reduced := cost[row[at]-1][j-1] - u[row[at]] - v[j]; reduced < slack[j] {
					slack[j], from[j] = reduced, at
				}
				if slack[j] < step {
					step, next = slack[j], j
				}
			}
			for j := range slack {
				if done[j] {
					u[row[j]] += step
					v[j] -= step
				} else {
					slack[j] -= step
				}
			}
			at = next
		}
		for at != 0 {
			row[at] = row[from[at]]
			at = from[at]
		}
	}
	p := make([]int, n)
	for j := 1; j <= n; j++ {
		p[row[j]-1] = j - 1
	}
	return p
}
