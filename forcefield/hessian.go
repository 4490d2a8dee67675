package forcefield

// addPairBlocks adds a·δ + b·d·dᵀ to the diagonal blocks of two atoms and subtracts it from the blocks between them. h is
// the Hessian of n coordinates; the atoms are given by the offsets of their coordinates.
func addPairBlocks(h []float64, n int, i, j int32, d vector, a, b float64) {
	c := [3]float64{d.x, d.y, d.z}
	for p := range 3 {
		for q := range 3 {
			v := b * c[p] * c[q]
			if p == q {
				v += a
			}
			ip, iq, jp, jq := int(i)+p, int(i)+q, int(j)+p, int(j)+q
			h[ip*n+iq] += v
			h[jp*n+jq] += v
			h[ip*n+jq] -= v
			h[jp*n+iq] -= v
		}
	}
}
