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

// entry returns the place of the second derivative with respect to variables p and q.
func entry(p, q int) int {
	if p < q {
		p, q = q, p
	}
	return p*(p+1)/2 + q
}

// jetVector is a vector of jets.
type jetVector [3]jet

// arm is a vector whose components are the variables 3n, 3n+1 and 3n+2.
type arm struct {
	components [3]float64
	first      int // 3n
}

// armOf returns v as the arm n, 0 to 2.
func armOf(v vector, n int) arm { return arm{[3]float64{v.x, v.y, v.z}, 3 * n} }

// jets returns the arm as a vector of jets.
func (u *arm) jets() jetVector {
	var w jetVector
	for c := range w {
		w[c].value = u.components[c]
		w[c].first[u.first+c] = 1
	}
	return w
}

// dot returns u·v.
func (u *arm) dot(v *arm) jet {
	var a jet
	for c := range 3 {
		p, q := u.first+c, v.first+c
		a.value += u.components[c] * v.components[c]
		a.first[p] += v.components[c]
		a.first[q] += u.components[c]
		a.second[entry(p, q)]++
		if p == q {
			a.second[entry(p, q)]++
		}
	}
	return a
}

// cross returns u×v of two different arms.
func (u *arm) cross(v *arm) jetVector {
	var w jetVector
	for c := range w {
		p, q := (c+1)%3, (c+2)%3
		w[c].value = u.components[p]*v.components[q] - u.components[q]*v.components[p]
		w[c].first[u.first+p], w[c].first[u.first+q] = v.components[q], -v.components[p]
		w[c].first[v.first+q], w[c].first[v.first+p] = u.components[p], -u.components[q]
		w[c].second[entry(u.first+p, v.first+q)] = 1
		w[c].second[entry(u.first+q, v.first+p)] = -1
	}
	return w
}

// dot returns u·v.
func (u *jetVector) dot(v *jetVector) jet {
	var a jet
	for c := range u {
		b, d := &u[c], &v[c]
		a.value += b.value * d.value
		n := 0
		for p := range jetSize {
			bp, dp := b.first[p], d.first[p]
			a.first[p] += b.value*dp + d.value*bp
			for q := range p + 1 {
				a.second[n] += b.value*d.second[n] + d.value*b.second[n] + bp*d.first[q] + dp*b.first[q]
				n++
			}
		}
	}
	return a
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

// addTo adds the second derivatives to the Hessian h of n coordinates. The variables are the vectors from the base atom to
// the others; atoms are given by the offsets of their coordinates.
func (a *jet) addTo(h []float64, n int, base int32, others ...int32) {
	for s, p := range others {
		for t, q := range others {
			for i := range 3 {
				for j := range 3 {
					v := a.second[entry(3*s+i, 3*t+j)]
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
