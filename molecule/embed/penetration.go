package embed

import (
	"fmt"

	"tarn/molecule"
)

// penetration returns an error that names the first bond that passes through a ring. The ring is spanned by a film whose
// inner vertices have settled to the mean of their neighbours, like a soap film; a bond between two atoms outside the ring
// that cuts a triangle of the film passes through it.
func (g *graph) penetration(x molecule.Geometry) error {
	for _, ring := range g.rings {
		if len(ring) < 4 {
			continue // no room for an atom
		}
		if b := g.bondThrough(ring, newFilm(x, ring), x); b >= 0 {
			bond := g.Bonds[b]
			return fmt.Errorf("the bond of atoms %d and %d passes through a ring of %d atoms", bond.A+1, bond.B+1, len(ring))
		}
	}
	return nil
}

func (g *graph) bondThrough(ring []int, f *film, x molecule.Geometry) int {
	inRing := make(map[int]bool, len(ring))
	for _, i := range ring {
		inRing[i] = true
	}
	for b, bond := range g.Bonds {
		if len(ring) > tightRing && (g.Atoms[bond.A].Element == hydrogen || g.Atoms[bond.B].Element == hydrogen) {
			continue
		}
		if !inRing[bond.A] && !inRing[bond.B] && f.cutBy(x.At(bond.A), x.At(bond.B)) {
			return b
		}
	}
	return -1
}

// film is a triangulated surface that spans a ring: the ring, shrunken copies of it and a centre.
type film struct {
	triangles [][3][3]float64
	low, high [3]float64 // box
}

// tightRing is the size of the largest ring that has no room for a hydrogen; a hydrogen that points into a larger one is not
// locked there.
const tightRing = 10

const settling = 40 // passes of averaging; more change no verdict on the test set

func newFilm(x molecule.Geometry, ring []int) *film {
	n := len(ring)
	layers := 1 + n/7 // small rings are spanned by a fan
	grid := make([][][3]float64, layers)
	var center [3]float64
	for _, i := range ring {
		p := x.At(i)
		for k := range 3 {
			center[k] += p[k] / float64(n)
		}
	}
	for layer := range grid {
		grid[layer] = make([][3]float64, n)
		shrink := 1 - float64(layer)/float64(layers)
		for i, atom := range ring {
			p := x.At(atom)
			for k := range 3 {
				grid[layer][i][k] = center[k] + shrink*(p[k]-center[k])
			}
		}
	}
	if layers > 1 {
		center = settle(grid, center)
	}
	return triangulate(grid, center)
}

func settle(grid [][][3]float64, center [3]float64) [3]float64 {
	n := len(grid[0])
	for range settling {
		for layer := 1; layer < len(grid); layer++ {
			for i := range n {
				inner := center
				if layer+1 < len(grid) {
					inner = grid[layer+1][i]
				}
				left, right, outer := grid[layer][(i+n-1)%n], grid[layer][(i+1)%n], grid[layer-1][i]
				for k := range 3 {
					grid[layer][i][k] = (left[k] + right[k] + outer[k] + inner[k]) / 4
				}
			}
		}
		innermost := grid[len(grid)-1]
		center = [3]float64{}
		for _, p := range innermost {
			for k := range 3 {
				center[k] += p[k] / float64(n)
			}
		}
	}
	return center
}

func triangulate(grid [][][3]float64, center [3]float64) *film {
	n := len(grid[0])
	f := &film{low: center, high: center}
	for _, p := range grid[0] {
		for k := range 3 {
			f.low[k], f.high[k] = min(f.low[k], p[k]), max(f.high[k], p[k])
		}
	}
	for layer := range grid {
		for i := range n {
			a, b := grid[layer][i], grid[layer][(i+1)%n]
			if layer+1 == len(grid) {
				f.triangles = append(f.triangles, [3][3]float64{a, b, center})
				continue
			}
			c, d := grid[layer+1][i], grid[layer+1][(i+1)%n]
			f.triangles = append(f.triangles, [3][3]float64{a, b, c}, [3][3]float64{b, d, c})
		}
	}
	return f
}

func (f *film) cutBy(p, q [3]float64) bool {
	for k := range 3 {
		if max(p[k], q[k]) < f.low[k] || min(p[k], q[k]) > f.high[k] {
			return false
		}
	}
	for i := range f.triangles {
		if cuts(p, q, &f.triangles[i]) {
			return true
		}
	}
	return false
}

// cuts says whether the segment p–q cuts a triangle. Source: T. Möller, B. Trumbore, J. Graphics Tools 2, 21 (1997).
func cuts(p, q [3]float64, t *[3][3]float64) bool {
	along, e1, e2 := minus(q, p), minus(t[1], t[0]), minus(t[2], t[0])
	h := crossed(along, e2)
	det := dotted(e1, h)
	if det > -1e-12 && det < 1e-12 {
		return false
	}
	s := minus(p, t[0])
	u := dotted(s, h) / det
	if u < 0 || u > 1 {
		return false
	}
	c := crossed(s, e1)
	v := dotted(along, c) / det
	if v < 0 || u+v > 1 {
		return false
	}
	w := dotted(e2, c) / det
	return w >= 0 && w <= 1
}

func minus(a, b [3]float64) [3]float64 { return [3]float64{a[0] - b[0], a[1] - b[1], a[2] - b[2]} }

func dotted(a, b [3]float64) float64 { return a[0]*b[0] + a[1]*b[1] + a[2]*b[2] }

func crossed(a, b [3]float64) [3]float64 {
	return [3]float64{a[1]*b[2] - a[2]*b[1], a[2]*b[0] - a[0]*b[2], a[0]*b[1] - a[1]*b[0]}
}
