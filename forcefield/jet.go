package forcefield

import "math"

// jetSize is the number of variables of a jet: the components of up to three vectors from a base atom to others.
const jetSize = 9

// jet is a number with its exact first and second derivatives with respect to the variables (second-order forward
// differentiation; A. Griewank and A. Walther, Evaluating Derivatives, 2nd ed., SIAM 2008). Only Hessians use it.
type jet struct {
	value  float64
	first  [jetSize]float64
	second [jetSize * (jetSize + 1) / 2]float64 // lower triangle, row by row
}

// jetVector is a vector of jets.
type jetVector struct{ x, y, z jet }

// variables returns v with its components as the variables of the given arm, 0 to 2.
func variables(v vector, arm int) jetVector {
	w := jetVector{jet{value: v.x}, jet{value: v.y}, jet{value: v.z}}
	w.x.first[3*arm], w.y.first[3*arm+1], w.z.first[3*arm+2] = 1, 1, 1
	return w
}

// function holds the value and the partial derivatives of a function of two numbers.
type function struct{ f, f1, f2, f11, f12, f22 float64 }

// of applies the chain rule to a function of a and b.
func (f function) of(a, b *jet) jet {
	c := jet{value: f.f}
	n := 0
	for p := range jetSize {
		ap, bp := a.first[p], b.first[p]
		c.first[p] = f.f1*ap + f.f2*bp
		wa, wb := f.f11*ap+f.f12*bp, f.f12*ap+f.f22*bp
		for q := range p + 1 {
			c.second[n] = f.f1*a.second[n] + f.f2*b.second[n] + wa*a.first[q] + wb*b.first[q]
			n++
		}
	}
	return c
}

func (a *jet) times(b *jet) jet {
	return function{f: a.value * b.value, f1: b.value, f2: a.value, f12: 1}.of(a, b)
}

// combine returns s·a + t·b.
func (a *jet) combine(s float64, b *jet, t float64) jet {
	return function{f: s*a.value + t*b.value, f1: s, f2: t}.of(a, b)
}

// compose returns a function of a whose value and derivatives are given.
func (a *jet) compose(f, f1, f2 float64) jet {
	return function{f: f, f1: f1, f11: f2}.of(a, a)
}

func (a *jet) minus(c float64) jet {
	b := *a
	b.value -= c
	return b
}

func (a *jet) power(p float64) jet {
	f := math.Pow(a.value, p)
	return a.compose(f, p*f/a.value, p*(p-1)*f/(a.value*a.value))
}

// polarAngle returns the angle whose sine and cosine are proportional to s and c.
func polarAngle(s, c *jet) jet {
	square := s.value*s.value + c.value*c.value
	fs, fc := c.value/square, -s.value/square
	return function{math.Atan2(s.value, c.value), fs, fc, 2 * fs * fc, fc*fc - fs*fs, -2 * fs * fc}.of(s, c)
}

func (u *jetVector) dot(v *jetVector) jet {
	x, y, z := u.x.times(&v.x), u.y.times(&v.y), u.z.times(&v.z)
	x = x.combine(1, &y, 1)
	return x.combine(1, &z, 1)
}

func (u *jetVector) cross(v *jetVector) jetVector {
	return jetVector{minor(&u.y, &u.z, &v.y, &v.z), minor(&u.z, &u.x, &v.z, &v.x), minor(&u.x, &u.y, &v.x, &v.y)}
}

// minor returns a·d − b·c.
func minor(a, b, c, d *jet) jet {
	ad, bc := a.times(d), b.times(c)
	return ad.combine(1, &bc, -1)
}

// addTo adds the second derivatives to the Hessian h of n coordinates. The variables are the vectors from the base atom to
// the others; atoms are given by the offsets of their coordinates.
func (a *jet) addTo(h []float64, n int, base int32, others ...int32) {
	for s, p := range others {
		for t, q := range others {
			for i := range 3 {
				for j := range 3 {
					row, column := 3*s+i, 3*t+j
					if row < column {
						row, column = column, row
					}
					v := a.second[row*(row+1)/2+column]
					pi, qj, bi, bj := int(p)+i, int(q)+j, int(base)+i, int(base)+j
					h[pi*n+qj] += v
					h[pi*n+bj] -= v
					h[bi*n+qj] -= v
					h[bi*n+bj] += v
				}
			}
		}
	}
}
