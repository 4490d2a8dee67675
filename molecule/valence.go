package molecule

import "fmt"

// group returns the number of valence electrons of a neutral main-group element, or 0 for the others, whose valence is
// not judged.
func (e Element) group() int {
	switch {
	case e == 1:
		return 1
	case e == 2:
		return 8
	case e >= 3 && e <= 10:
		return int(e) - 2
	case e >= 11 && e <= 18:
		return int(e) - 10
	}
	for _, start := range [...]Element{31, 49, 81} { // Ga, In, Tl begin the p block of their period
		if e >= start && e < start+6 {
			return int(e-start) + 3
		}
	}
	return 0
}

// valences returns the sums of bond orders that an element in a charge state may have, smallest first: with v valence
// electrons 8-v by the octet rule and, from the third period on, every second number up to v (S: 2, 4, 6). Neutral
// nitrogen adds 5, the customary drawing of N=O and N≡N without charges. Nil means that any sum is accepted (metals).
// Source: OpenSMILES 3.1.5 for the neutral organic subset; the isoelectronic rule for charges is common practice.
func valences(e Element, charge int) []int {
	group := e.group()
	if group == 0 || e == 3 || e == 11 { // the alkali metals also take part in salts drawn covalently
		return nil
	}
	v := group - charge
	switch {
	case e == 1:
		return []int{max(0, min(v, 2-v))}
	case e == 2 || e == 10:
		return []int{0}
	case v <= 0:
		return []int{0}
	case v >= 8 && e < 10:
		return []int{0}
	case v <= 4:
		return []int{v}
	case e == 7 && charge == 0:
		return []int{3, 5}
	case e < 10:
		return []int{8 - v}
	}
	var sums []int
	for sum := max(8-v, v%2); sum <= v; sum += 2 {
		sums = append(sums, sum)
	}
	return sums
}

// filled tells whether implied hydrogens are added to an element at all, and only up to its lowest valence (halogens) or
// to the next higher one (N, P, S). Source: OpenSMILES 3.1.5.
func filled(e Element) (fills, onlyLowest bool) {
	switch e {
	case 5, 6, 7, 8, 14, 15, 16, 32, 33, 34, 52:
		return true, false
	case 9, 17, 35, 53, 85:
		return true, true
	}
	return false, false
}

// impliedHydrogens returns how many hydrogens fill the valence of an atom whose bonds and unpaired electrons add up to sum.
func impliedHydrogens(a Atom, sum int) int {
	fills, onlyLowest := filled(a.Element)
	if !fills {
		return 0
	}
	for _, v := range valences(a.Element, a.Charge) {
		if v >= sum {
			return v - sum
		}
		if onlyLowest {
			break
		}
	}
	return 0
}

// ImpliedHydrogens returns how many hydrogens a neutral atom written without brackets has in SMILES when its bond orders
// add up to sum.
func ImpliedHydrogens(e Element, sum int) int { return impliedHydrogens(Atom{Element: e}, sum) }

// missingElectrons returns the number of unpaired electrons that stated hydrogens leave on a light non-metal ([CH3]: 1).
func missingElectrons(a Atom, sum int) int {
	switch a.Element {
	case 6, 7, 8, 9, 14, 15, 16, 17, 34, 35, 53:
		if v := valences(a.Element, a.Charge); sum < v[0] {
			return v[0] - sum
		}
	}
	return 0
}

// bonding is what a valence check needs to know of one atom.
type bonding struct {
	sum       int // bond orders
	neighbors int
	triple    bool
	carbyne   bool // triple bond to a carbon without other bonds
}

// valenceFault returns what is wrong with the bonds of an atom and what could be done, or "".
func valenceFault(a Atom, b bonding) (reason, remedy string) {
	allowed := valences(a.Element, a.Charge)
	if allowed == nil {
		return "", ""
	}
	total := b.sum + a.Radical
	if a.Element == 7 && a.Charge == 0 {
		if total == 4 && b.carbyne && b.neighbors == 2 {
			return "", "" // isonitrile drawn without charges
		}
		if total == 5 && (b.neighbors > 4 || b.triple && b.neighbors > 2) {
			return "neutral nitrogen has 5 bonds", "write the charge: [N+]"
		}
	}
	for _, v := range allowed {
		if total == v {
			return "", ""
		}
	}
	if total < allowed[0] {
		return "", "" // an open shell or a carbene, stated as such
	}
	name := "neutral " + elementName(a.Element)
	if a.Charge != 0 {
		name = fmt.Sprintf("%s with charge %+d", elementName(a.Element), a.Charge)
	}
	reason = fmt.Sprintf("%s has bonds that add up to %d, but can have %s", name, total, alternatives(allowed))
	for _, charge := range [...]int{a.Charge + 1, a.Charge - 1} {
		for _, v := range valences(a.Element, charge) {
			if v == total && charge >= -1 && charge <= 1 {
				return reason, fmt.Sprintf("a charge of %+d would allow it", charge)
			}
		}
	}
	return reason, "remove a bond or a hydrogen"
}

func elementName(e Element) string {
	switch e {
	case 1:
		return "hydrogen"
	case 5:
		return "boron"
	case 6:
		return "carbon"
	case 7:
		return "nitrogen"
	case 8:
		return "oxygen"
	case 9:
		return "fluorine"
	case 14:
		return "silicon"
	case 15:
		return "phosphorus"
	case 16:
		return "sulfur"
	case 17:
		return "chlorine"
	case 35:
		return "bromine"
	case 53:
		return "iodine"
	}
	return e.String()
}

func alternatives(numbers []int) string {
	text := fmt.Sprint(numbers[0])
	for i, n := range numbers[1:] {
		if i == len(numbers)-2 {
			text += " or "
		} else {
			text += ", "
		}
		text += fmt.Sprint(n)
	}
	return text
}
