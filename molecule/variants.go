package molecule

import "slices"

// standardDrawing returns the molecule with customary drawing variants rewritten to one form, so that they are known as
// the same molecule: pentavalent nitrogen becomes charge-separated (nitro, N-oxide, azide, diazo), charge-separated
// sulfur, phosphorus and halogens become hypervalent (sulfoxide, phosphate, perchlorate), isonitriles and carbon monoxide
// carry charges. Atoms, their order and the descriptors stay; the molecule itself is returned if it is in this form.
func (m *Molecule) standardDrawing() *Molecule {
	w := &rewriting{m: m}
	for i, a := range m.Atoms {
		switch {
		case a.Element == 7 && a.Charge == 0:
			w.separatePentavalentNitrogen(i)
			w.chargeIsonitrile(i)
		case a.Element == 7 && a.Charge == 1:
			w.straightenDiazo(i)
		case a.Element == 8 && a.Charge == 0:
			w.chargeMonoxide(i)
		case a.Charge > 0 && hypervalent(a.Element):
			w.neutralizeHypervalent(i)
		}
	}
	if w.atoms == nil {
		return m
	}
	rewritten, _ := New(m.Name, w.atoms, w.bonds, m.Centers, m.DoubleBonds)
	return rewritten
}

// hypervalent tells whether an element is customarily drawn with more bonds rather than with charges.
func hypervalent(e Element) bool {
	switch e {
	case 15, 16, 17, 33, 34, 35, 52, 53:
		return true
	}
	return false
}

// rewriting holds the changed copies; atoms and bonds are nil as long as nothing has changed.
type rewriting struct {
	m     *Molecule
	atoms []Atom
	bonds []Bond
}

func (w *rewriting) atom(i int) Atom {
	if w.atoms != nil {
		return w.atoms[i]
	}
	return w.m.Atoms[i]
}

func (w *rewriting) order(bond int) int {
	if w.bonds != nil {
		return w.bonds[bond].Order
	}
	return w.m.Bonds[bond].Order
}

// shift changes the order of a bond and the charges of its first named and second named atom, if that leaves both with
// possible valences; it tells whether it did.
func (w *rewriting) shift(bond, order, first, firstCharge, second, secondCharge int) bool {
	if !w.possible(first, order, firstCharge) || !w.possible(second, order, secondCharge) {
		return false
	}
	w.change()
	w.bonds[bond].Order += order
	w.atoms[first].Charge += firstCharge
	w.atoms[second].Charge += secondCharge
	return true
}

// change makes the copies that may be changed.
func (w *rewriting) change() {
	if w.atoms == nil {
		w.atoms, w.bonds = slices.Clone(w.m.Atoms), slices.Clone(w.m.Bonds)
	}
}

func (w *rewriting) possible(atom, order, charge int) bool {
	a := w.atom(atom)
	sum := w.sum(atom) + order
	allowed := valences(a.Element, a.Charge+charge)
	return len(allowed) == 0 || sum < allowed[0] || slices.Contains(allowed, sum)
}

func (w *rewriting) sum(atom int) int {
	total := 0
	for _, n := range w.m.neighbors[atom] {
		total += w.order(n.Bond)
	}
	return total
}

func (w *rewriting) terminal(atom int) bool { return len(w.m.neighbors[atom]) == 1 }

func (w *rewriting) separatePentavalentNitrogen(i int) {
	if w.sum(i) != 5 {
		return
	}
	bestBond, bestAtom, bestScore := -1, -1, 0
	for _, n := range w.m.neighbors[i] {
		order := w.order(n.Bond)
		a := w.atom(n.Atom)
		if order < 2 || a.Charge != 0 {
			continue
		}
		score := 0
		switch {
		case a.Element == 8 && w.terminal(n.Atom):
			score = 5
		case order == 3 && a.Element == 7 && w.terminal(n.Atom):
			score = 4
		case a.Element == 16 || a.Element == 34:
			score = 3
		case a.Element == 7:
			score = 2
		case order == 2:
			score = 1
		}
		if score > bestScore {
			bestBond, bestAtom, bestScore = n.Bond, n.Atom, score
		}
	}
	if bestBond >= 0 {
		w.shift(bestBond, -1, i, 1, bestAtom, -1)
	}
}

// chargeIsonitrile turns C–N#C (four bonds) and C–N=C: (carbene) into C–[N+]#[C-].
func (w *rewriting) chargeIsonitrile(i int) {
	if len(w.m.neighbors[i]) != 2 {
		return
	}
	for _, n := range w.m.neighbors[i] {
		c := w.atom(n.Atom)
		order := w.order(n.Bond)
		if c.Element == 6 && c.Charge == 0 && w.terminal(n.Atom) && w.sum(i) == order+1 && (order == 2 || order == 3) &&
			w.shift(n.Bond, 3-order, i, 1, n.Atom, -1) {
			w.atoms[n.Atom].Radical = 0
			return
		}
	}
}

// chargeMonoxide turns [C]=O into [C-]#[O+].
func (w *rewriting) chargeMonoxide(i int) {
	if !w.terminal(i) {
		return
	}
	n := w.m.neighbors[i][0]
	if c := w.atom(n.Atom); c.Element == 6 && c.Charge == 0 && w.terminal(n.Atom) && w.order(n.Bond) == 2 &&
		w.shift(n.Bond, 1, i, 1, n.Atom, -1) {
		w.atoms[n.Atom].Radical = 0
	}
}

// straightenDiazo turns X(-)–N(+)#N into X=N(+)=N(-), for X a carbon or nitrogen.
func (w *rewriting) straightenDiazo(i int) {
	if len(w.m.neighbors[i]) != 2 {
		return
	}
	for k, n := range w.m.neighbors[i] {
		x := w.m.neighbors[i][1-k]
		end, anion := w.atom(n.Atom), w.atom(x.Atom)
		if w.order(n.Bond) == 3 && end.Element == 7 && end.Charge == 0 && w.terminal(n.Atom) &&
			w.order(x.Bond) == 1 && anion.Charge == -1 && (anion.Element == 6 || anion.Element == 7) {
			w.moveBond(n, x)
			return
		}
	}
}

// moveBond moves one bond of a triple bond n to the single bond x at the same atom, with the charge the other way.
func (w *rewriting) moveBond(n, x Neighbor) {
	w.change()
	w.bonds[n.Bond].Order--
	w.bonds[x.Bond].Order++
	w.atoms[n.Atom].Charge--
	w.atoms[x.Atom].Charge++
}

// neutralizeHypervalent turns X(+)–Y(-) into X=Y as long as X is positive, oxygen first.
func (w *rewriting) neutralizeHypervalent(i int) {
	for _, element := range [...]Element{8, 16, 34, 7, 6} {
		for _, n := range w.m.neighbors[i] {
			if y := w.atom(n.Atom); y.Element == element && y.Charge < 0 && w.atom(i).Charge > 0 && w.order(n.Bond) < 3 {
				w.shift(n.Bond, 1, i, -1, n.Atom, 1)
			}
		}
	}
}
