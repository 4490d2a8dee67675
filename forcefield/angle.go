package forcefield

import "math"

const (
	cubicBend   = -0.4 // rad⁻¹; the printed −0.007 deg⁻¹ is rounded too far
	smallestSin = 1e-8 // keeps the gradient finite where an angle becomes straight
)

// angle is one bending term at j with its coupling to the bonds i–j and j–k.
type angle struct {
	i, j, k                    int32
	reference                  float64 // rad
	sinReference, cosReference float64
	stiffness                  float64 // kcal/mol/rad²
	first, second              float64 // coupling to the bonds, kcal/mol/Å/rad
	firstLength, secondLength  float64 // reference lengths of the bonds, Å
}

// withReference returns the term with its reference angle in radians.
func (a angle) withReference(reference float64) angle {
	a.reference = reference
	a.sinReference, a.cosReference = math.Sincos(reference)
	return a
}

// angleEnergy returns the sums of the cubic bending terms and of the stretch-bend terms and adds their gradient to grad if
// that is not nil. Source: J. Comput. Chem. 17, 490 (1996), eqs. 3 and 5.
func angleEnergy(angles []angle, x, grad []float64) (bend, stretchBend float64) {
	for n := range angles {
		a := &angles[n]
		center := place(x, a.j)
		u, v := place(x, a.i).minus(center), place(x, a.k).minus(center)
		ru, rv := math.Sqrt(u.dot(u)), math.Sqrt(v.dot(v))
		inverse := 0.0 // stays 0, as does the gradient, where an arm has no length
		if product := ru * rv; product > 0 {
			inverse = 1 / product
		}
		normal := u.cross(v)
		sin, cos := math.Sqrt(normal.dot(normal))*inverse, u.dot(v)*inverse
		// Twice the arc tangent of half the difference is faster and no less exact than the angle itself.
		d := 2 * math.Atan((sin*a.cosReference-cos*a.sinReference)/(1+cos*a.cosReference+sin*a.sinReference))
		pull := a.first*(ru-a.firstLength) + a.second*(rv-a.secondLength)
		bend += a.stiffness / 2 * d * d * (1 + cubicBend*d)
		stretchBend += pull * d
		if grad == nil {
			continue
		}
		slope := (a.stiffness*d*(1+1.5*cubicBend*d) + pull) / max(sin, smallestSin)
		iu, iv := inverse*rv, inverse*ru
		gi := u.combine((slope*cos*iu+a.first*d)*iu, v, -slope*inverse)
		gk := v.combine((slope*cos*iv+a.second*d)*iv, u, -slope*inverse)
		add(grad, a.i, gi)
		add(grad, a.k, gk)
		add(grad, a.j, gi.plus(gk).times(-1))
	}
	return bend, stretchBend
}

// angleHessian adds the second derivatives to h. Where an angle is straight or an arm has no length they do not exist and
// are left out.
func angleHessian(angles []angle, x, h []float64) {
	for n := range angles {
		a := &angles[n]
		center := place(x, a.j)
		u, v := armOf(place(x, a.i).minus(center), 0), armOf(place(x, a.k).minus(center), 1)
		normal := u.cross(&v)
		square := normal.dot(&normal)
		uu, vv := u.dot(&u), v.dot(&v)
		if square.value <= smallestSin*smallestSin*uu.value*vv.value {
			continue
		}
		sin, cos := square.power(0.5), u.dot(&v)
		theta := polarAngle(&sin, &cos)
		d := theta.minus(a.reference)
		bend := d.compose(a.stiffness/2*d.value*d.value*(1+cubicBend*d.value), a.stiffness*d.value*(1+1.5*cubicBend*d.value),
			a.stiffness*(1+3*cubicBend*d.value))
		ru, rv := uu.power(0.5), vv.power(0.5)
		ru, rv = ru.minus(a.firstLength), rv.minus(a.secondLength)
		pull := ru.combine(a.first, &rv, a.second)
		coupled := pull.times(&d)
		energy := bend.combine(1, &coupled, 1)
		energy.addTo(h, len(x), a.j, a.i, a.k)
	}
}

// linearAngle is a bending term at a centre that prefers a straight line.
type linearAngle struct {
	i, j, k   int32
	stiffness float64 // kcal/mol
}

// linearAngleEnergy returns the sum of the terms stiffness·(1 + cos θ) and adds their gradient to grad if that is not nil.
// Source: J. Comput. Chem. 17, 490 (1996), eq. 4.
func linearAngleEnergy(angles []linearAngle, x, grad []float64) float64 {
	total := 0.0
	for n := range angles {
		a := &angles[n]
		center := place(x, a.j)
		u, _, iu := place(x, a.i).minus(center).direction()
		v, _, iv := place(x, a.k).minus(center).direction()
		cos := u.dot(v)
		total += a.stiffness * (1 + cos)
		if grad == nil {
			continue
		}
		gi := v.combine(a.stiffness*iu, u, -a.stiffness*iu*cos)
		gk := u.combine(a.stiffness*iv, v, -a.stiffness*iv*cos)
		add(grad, a.i, gi)
		add(grad, a.k, gk)
		add(grad, a.j, gi.plus(gk).times(-1))
	}
	return total
}

// linearAngleHessian adds the second derivatives to h.
func linearAngleHessian(angles []linearAngle, x, h []float64) {
	for n := range angles {
		a := &angles[n]
		center := place(x, a.j)
		u, v := armOf(place(x, a.i).minus(center), 0), armOf(place(x, a.k).minus(center), 1)
		uu, vv := u.dot(&u), v.dot(&v)
		squares := uu.times(&vv)
		if squares.value == 0 {
			continue
		}
		scale := squares.power(-0.5)
		uv := u.dot(&v)
		cos := uv.times(&scale)
		energy := cos.compose(a.stiffness*cos.value, a.stiffness, 0)
		energy.addTo(h, len(x), a.j, a.i, a.k)
	}
}
