package embed

// smooth tightens the bounds until they obey the triangle inequality: no upper bound exceeds a detour over a third atom, no
// lower bound is less than what the sides of a triangle leave. Where the two cross, as in strained cages whose assumed angles
// do not fit together, the lower bound gives way. Source: Crippen & Havel (1988), chapter 5.
func (c *constraints) smooth() {
	n := c.n
	for k := range n {
		toK := c.upper[k*n : k*n+n]
		for i := range n {
			ik := c.upper[i*n+k]
			row := c.upper[i*n : i*n+n]
			for j, kj := range toK {
				if ik+kj < row[j] {
					row[j] = ik + kj
				}
			}
		}
	}
	for i := range n {
		c.upper[i*n+i] = 0
	}
	for k := range n {
		lowK, highK := c.lower[k*n:k*n+n], c.upper[k*n:k*n+n]
		for i := range n {
			low, high := c.lower[i*n+k], c.upper[i*n+k]
			row := c.lower[i*n : i*n+n]
			for j, l := range row {
				if d := low - highK[j]; d > l {
					l = d
				}
				if d := lowK[j] - high; d > l {
					l = d
				}
				row[j] = l
			}
		}
	}
	for i := range n {
		c.lower[i*n+i] = 0
		for j := range i {
			if l, u := c.lower[i*n+j], c.upper[i*n+j]; l > u {
				c.set(i, j, u, u)
			}
		}
	}
}
