package typing

import (
	"fmt"
	"math"
)

// formalCharges spreads the formal charges over the atoms that share them.
func (t *typer) formalCharges() []float64 {
	q := make([]float64, t.atoms())
	for i, s := range t.symbols {
		switch s {
		case "NR+", "N+=C", "N+=N", "NPD+", "N5A+", "N5B+", "N5+", "O+", "O=+":
			q[i] = 1
		case "NR%":
			if t.has(i, 3, 7) {
				q[i] = 1
			}
		case "OM", "OM2", "NM", "SM":
			q[i] = -1
		default:
			if t.degree(i) == 0 {
				q[i] = float64(t.charge[i])
			}
		}
		t.shareCation(i, q)
		t.shareTerminals(i, q)
	}
	for r := range t.rings.rings {
		t.shareAnion(&t.rings.rings[r], q)
	}
	return q
}

// shareCation gives equal parts of +1 to the nitrogens of an amidinium or guanidinium carbon.
func (t *typer) shareCation(carbon int, q []float64) {
	donors := t.cationDonors(carbon)
	if len(donors) == 0 {
		return
	}
	cation := t.bonded(carbon, 2, 7)
	part := 1 / float64(len(donors)+1)
	q[cation] += part
	for _, d := range donors {
		q[d] += part
	}
}

// shareTerminals gives equal parts of the charge of a group such as carboxylate or phosphate to its terminal atoms.
func (t *typer) shareTerminals(center int, q []float64) {
	var ends []int
	total := t.charge[center]
	for _, n := range t.neighbors(center) {
		switch s := t.symbols[n.Atom]; {
		case s == "NSO":
			total += t.charge[n.Atom]
		case t.degree(n.Atom) == 1 && sharesGroupCharge[s]:
			total += t.charge[n.Atom]
			ends = append(ends, n.Atom)
		}
	}
	if total > 0 {
		return // no terminal atom carries a positive charge; checkCharges refuses the molecule
	}
	for _, i := range ends {
		q[i] = float64(total) / float64(len(ends))
	}
}

// sharesGroupCharge holds the symbols of types 32 and 72, other than that of the thiolate.
var sharesGroupCharge = map[string]bool{
	"O2CM": true, "OXN": true, "O2N": true, "O2NO": true, "O3N": true, "O-S": true, "O2S": true, "O3S": true, "O4S": true,
	"OSMS": true, "OP": true, "O2P": true, "O3P": true, "O4P": true, "O4CL": true, "S-P": true, "S2CM": true, "SSMO": true,
}

// shareAnion gives equal parts of −1 to the anionic nitrogens of an aromatic five-ring.
func (t *typer) shareAnion(ring *aromaticRing, q []float64) {
	if ring.donor < 0 || !t.isAnion(ring) {
		return
	}
	var members []int
	for _, i := range ring.atoms {
		if t.symbols[i] == "N5M" {
			members = append(members, i)
		}
	}
	for _, i := range members {
		q[i] -= 1 / float64(len(members))
	}
}

// checkCharges compares the shared charges with the drawing: a difference means that the types do not describe it.
func (t *typer) checkCharges(q []float64) error {
	total, drawn, worst := 0.0, 0, 0
	for i, c := range t.charge {
		total += q[i]
		drawn += c
		if math.Abs(q[i]-float64(c)) > math.Abs(q[worst]-float64(t.charge[worst])) {
			worst = i
		}
	}
	if math.Abs(total-float64(drawn)) > 1e-6 {
		return &Error{worst, fmt.Sprintf("MMFF94 has no type that carries its formal charge (type %s; the types of the "+
			"molecule add up to charge %+.3g, the drawing to %+d)", t.symbols[worst], total, drawn)}
	}
	return nil
}
