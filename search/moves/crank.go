package moves

import "math"

// Crank is a segment of a ring that hangs on two ring atoms, A and B, alone: it can turn about the axis through them without any bond
// changing its length. Only angles at A and B change; what else hangs on A and B is turned along so that the arrangement there
// stays as it is.
type Crank struct {
	A, B    int
	Atoms   []int // the segment with all that hangs on it
	Size    int   // ring atoms of the segment between A and B
	inner   [2]int
	outer   [2]int   // the ring neighbours of A and B inside and outside the segment
	pendant [2][]int // what else hangs on A and B
}

// Rotate turns the segment by an angle in radians.
func (c *Crank) Rotate(x []float64, angle float64) {
	axis, ok := at(x, c.B).minus(at(x, c.A)).unit()
	if !ok {
		return
	}
	ends := [2]int{c.A, c.B}
	var before [2]frame
	var has [2]bool
	for k, end := range ends {
		before[k], has[k] = frameOf(at(x, c.inner[k]).minus(at(x, end)), at(x, c.outer[k]).minus(at(x, end)))
	}
	r := aboutAxis(axis, angle)
	r.turn(x, c.Atoms, at(x, c.A))
	for k, end := range ends {
		after, ok := frameOf(at(x, c.inner[k]).minus(at(x, end)), at(x, c.outer[k]).minus(at(x, end)))
		if ok && has[k] {
			r := before[k].carry(after)
			r.turn(x, c.pendant[k], at(x, end))
		}
	}
}

// Flap turns the segment to the other side of the mean plane of the ring: done twice, it does nothing.
func (c *Crank) Flap(x []float64) { c.Rotate(x, -2*c.fold(x)) }

// fold returns the angle in radians between the segment and the continuation of the rest of the ring, 0 if the ring is flat there.
func (c *Crank) fold(x []float64) float64 {
	a := at(x, c.A)
	axis, ok := at(x, c.B).minus(a).unit()
	if !ok {
		return 0
	}
	off := func(i, j int) vector {
		v := at(x, i).plus(at(x, j)).times(0.5).minus(a)
		return v.minus(axis.times(axis.dot(v)))
	}
	inside, outside := off(c.inner[0], c.inner[1]), off(c.outer[0], c.outer[1]).times(-1)
	return math.Atan2(axis.dot(outside.cross(inside)), outside.dot(inside))
}
