package parameters

import "slices"

// levels is the number of look-up levels; level 1 is the type itself, level 5 mostly 0, "any".
const levels = 5

func (t *Tables) fallback(atomType, level int) int {
	if level <= 2 {
		return atomType
	}
	return t.atoms[atomType].Fallback[level-3]
}

// Bond returns the listed parameters of a bond.
func (t *Tables) Bond(class, i, j int) (Bond, bool) {
	b, ok := t.bonds[keyOf(class, min(i, j), max(i, j))]
	return b, ok
}

// Angle returns the listed parameters of the angle i–j–k with the least general outer types. A stiffness of 0 says that
// only the reference angle is listed.
func (t *Tables) Angle(class, i, j, k int) (Angle, bool) {
	for level := 1; level <= levels; level++ {
		a, b := t.fallback(i, level), t.fallback(k, level)
		if angle, ok := t.angles[keyOf(class, min(a, b), j, max(a, b))]; ok {
			return angle, true
		}
	}
	return Angle{}, false
}

// StretchBend returns the coupling constants of the angle i–j–k; first belongs to the bond i–j. firstClass and secondClass
// are the classes of the two bonds, angleClass that of the angle. Without a listed row the elements decide by their rows
// of the periodic table; false says that there is no entry for these rows.
func (t *Tables) StretchBend(angleClass, i, j, k, firstClass, secondClass int) (Coupling, bool) {
	reversed := i > k || i == k && firstClass < secondClass
	if reversed {
		i, k, firstClass, secondClass = k, i, secondClass, firstClass
	}
	c, ok := t.couplings[keyOf(stretchBendClass(angleClass, firstClass, secondClass), i, j, k)]
	if !ok {
		first, middle, last := t.period(i), t.period(j), t.period(k)
		if first > last {
			first, last, reversed = last, first, !reversed
		}
		c, ok = t.rowCouplings[keyOf(0, first, middle, last)]
	}
	if reversed {
		c.First, c.Second = c.Second, c.First
	}
	return c, ok
}

// stretchBendClass numbers the combinations of an angle class with the classes of its bonds.
func stretchBendClass(angleClass, firstClass, secondClass int) int {
	switch angleClass {
	case 1:
		return 2 - firstClass
	case 2:
		return 3
	case 3:
		return 5
	case 4:
		return 4
	case 5:
		return 7 - firstClass
	case 6:
		return 8
	case 7:
		return 10 - firstClass
	case 8:
		return 11
	}
	return 0
}

// period returns 0 for hydrogen, 1 for Li to Ne, 2 for Na to Ar, and so on.
func (t *Tables) period(atomType int) int {
	p := 0
	for _, last := range [...]int{2, 10, 18, 36, 54} {
		if int(t.atoms[atomType].Element) > last {
			p++
		}
	}
	return p
}

// OutOfPlane returns the force constant in md·Å/rad² of a centre of type j with three neighbours; 0 if none is listed.
func (t *Tables) OutOfPlane(j int, outer [3]int) float64 {
	for level := 1; level <= levels; level++ {
		var o [3]int
		for n, atomType := range outer {
			o[n] = t.fallback(atomType, level)
		}
		slices.Sort(o[:])
		if stiffness, ok := t.outOfPlanes[keyOf(0, j, o[0], o[1], o[2])]; ok {
			return stiffness
		}
	}
	return 0
}

// Torsion returns the listed barriers of i–j–k–l with the least general outer types.
func (t *Tables) Torsion(class, i, j, k, l int) (Torsion, bool) {
	if j > k || j == k && i > l {
		i, j, k, l = l, k, j, i
	}
	for _, level := range [...][2]int{{1, 1}, {2, 2}, {3, 5}, {5, 3}, {5, 5}} {
		a, b := t.fallback(i, level[0]), t.fallback(l, level[1])
		if j == k && a > b {
			a, b = b, a
		}
		if torsion, ok := t.torsions[keyOf(class, a, j, k, b)]; ok {
			return torsion, true
		}
	}
	return Torsion{}, false
}

// ChargeIncrement returns what the atom of type j gains from its bond to an atom of type i, in e. listed says whether
// the pair of types has a row; otherwise the increments of the single types give the value.
func (t *Tables) ChargeIncrement(class, i, j int) (gain float64, listed bool) {
	if i == j {
		return 0, true
	}
	gain, listed = t.chargeOfBonds[keyOf(class, min(i, j), max(i, j))]
	if !listed {
		return t.atoms[j].Increment - t.atoms[i].Increment, false
	}
	if i > j {
		gain = -gain
	}
	return gain, true
}
