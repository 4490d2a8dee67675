package smiles

import (
	"cmp"
	"fmt"
	"slices"
	"strings"

	"tarn/molecule"
)

// Write returns an isomeric SMILES that begins at the first atom and visits atoms in their order, small branches first.
// Ordinary hydrogens are implied, aromatic rings written in lower case. Reading it gives the same molecule.
func Write(m *molecule.Molecule) string {
	w := newWriter(m)
	w.markDoubleBonds()
	w.layOut()
	var parts []string
	for _, root := range w.roots {
		w.text.Reset()
		w.writeAtom(root, -1)
		parts = append(parts, w.text.String())
	}
	return strings.Join(parts, ".")
}

// writer lays out a spanning tree first, so that the order of neighbours, on which stereo marks depend, is known before
// the first character is written.
type writer struct {
	m             *molecule.Molecule
	folded        []bool // hydrogens that are not written as atoms
	hydrogens     []int  // folded hydrogens of each atom
	aromaticAtoms []bool
	aromaticBonds []bool
	centers       map[int]molecule.Center
	directions    map[int]bool // bond → its second atom lies above its first; nil entry: no mark

	roots    []int
	parents  []int   // atom before in the tree, -1 for roots
	children [][]int // in the order of writing
	closures [][]int // partners over ring closures, in the order of writing
	position []int   // place of each atom in the text
	numbers  map[[2]int]int
	inUse    []bool // ring numbers

	text strings.Builder
}

func newWriter(m *molecule.Molecule) *writer {
	n := len(m.Atoms)
	w := &writer{
		m: m, folded: make([]bool, n), hydrogens: make([]int, n), centers: map[int]molecule.Center{},
		numbers: map[[2]int]int{},
	}
	w.aromaticAtoms, w.aromaticBonds = m.Aromaticity()
	for _, c := range m.Centers {
		w.centers[c.Atom] = c
	}
	for i := range m.Atoms {
		if m.OrdinaryHydrogen(i) {
			w.folded[i] = true
			w.hydrogens[m.Neighbors(i)[0].Atom]++
		}
	}
	return w
}

// unfold makes a hydrogen an atom of its own in the text.
func (w *writer) unfold(hydrogen int) {
	if w.folded[hydrogen] {
		w.folded[hydrogen] = false
		w.hydrogens[w.m.Neighbors(hydrogen)[0].Atom]--
	}
}

// layOut chooses the tree, the order of children and the ring closures.
func (w *writer) layOut() {
	n := len(w.m.Atoms)
	w.parents, w.children, w.closures = make([]int, n), make([][]int, n), make([][]int, n)
	w.position = make([]int, n)
	seen := make([]bool, n)
	size := make([]int, n)
	for start := range n {
		if seen[start] || w.folded[start] {
			continue
		}
		w.roots = append(w.roots, start)
		for _, i := range slices.Backward(w.depthFirst(start, seen)) {
			size[i]++
			if w.parents[i] >= 0 {
				size[w.parents[i]] += size[i]
			}
		}
	}
	next := 0
	for _, children := range w.children {
		slices.SortStableFunc(children, func(a, b int) int { return cmp.Compare(size[a], size[b]) })
	}
	for _, root := range w.roots {
		for stack := []int{root}; len(stack) > 0; {
			i := stack[len(stack)-1]
			stack = stack[:len(stack)-1]
			w.position[i] = next
			next++
			for _, child := range slices.Backward(w.children[i]) {
				stack = append(stack, child)
			}
		}
	}
	for i := range w.closures {
		for _, neighbor := range w.m.Neighbors(i) {
			j := neighbor.Atom
			if !w.folded[i] && !w.folded[j] && w.parents[i] != j && w.parents[j] != i {
				w.closures[i] = append(w.closures[i], j)
			}
		}
		slices.SortFunc(w.closures[i], func(a, b int) int { return cmp.Compare(w.position[a], w.position[b]) })
	}
}

// depthFirst builds the tree of one connected part and returns its atoms, parents before children.
func (w *writer) depthFirst(root int, seen []bool) []int {
	type frame struct {
		atom  int
		onto  []int
		taken int
	}
	onto := func(atom int) []int {
		var list []int
		for _, n := range w.m.Neighbors(atom) {
			if !w.folded[n.Atom] {
				list = append(list, n.Atom)
			}
		}
		slices.Sort(list)
		return list
	}
	w.parents[root] = -1
	seen[root] = true
	visited := []int{root}
	stack := []frame{{atom: root, onto: onto(root)}}
	for len(stack) > 0 {
		top := &stack[len(stack)-1]
		if top.taken == len(top.onto) {
			stack = stack[:len(stack)-1]
			continue
		}
		next := top.onto[top.taken]
		top.taken++
		if seen[next] {
			continue
		}
		seen[next] = true
		w.parents[next] = top.atom
		w.children[top.atom] = append(w.children[top.atom], next)
		visited = append(visited, next)
		stack = append(stack, frame{atom: next, onto: onto(next)})
	}
	return visited
}

// writeAtom writes an atom and all that hangs on it; the last child goes on without a branch, so that the depth of the
// recursion is the depth of nested branches.
func (w *writer) writeAtom(atom, from int) {
	for {
		if from >= 0 {
			w.text.WriteString(w.bondSymbol(from, atom))
		}
		w.text.WriteString(w.atomText(atom))
		for _, partner := range w.closures[atom] {
			w.writeClosure(atom, partner)
		}
		children := w.children[atom]
		if len(children) == 0 {
			return
		}
		for _, child := range children[:len(children)-1] {
			w.text.WriteByte('(')
			w.writeAtom(child, atom)
			w.text.WriteByte(')')
		}
		from, atom = atom, children[len(children)-1]
	}
}

func (w *writer) writeClosure(atom, partner int) {
	pair := [2]int{min(atom, partner), max(atom, partner)}
	number, open := w.numbers[pair]
	if open {
		delete(w.numbers, pair)
		w.inUse[number] = false
	} else {
		for number = 1; number < len(w.inUse) && w.inUse[number]; number++ {
		}
		for len(w.inUse) <= number {
			w.inUse = append(w.inUse, false)
		}
		w.inUse[number] = true
		w.numbers[pair] = number
		w.text.WriteString(w.bondSymbol(atom, partner))
	}
	if number > 9 {
		fmt.Fprintf(&w.text, "%%%02d", number)
	} else {
		fmt.Fprintf(&w.text, "%d", number)
	}
}

// bondSymbol returns the symbol between two atoms as seen from the first.
func (w *writer) bondSymbol(from, to int) string {
	i := w.m.BondBetween(from, to)
	bond := w.m.Bonds[i]
	if up, marked := w.directions[i]; marked {
		if up == (bond.A == from) {
			return "/"
		}
		return `\`
	}
	switch {
	case w.aromaticBonds[i]:
		return ""
	case bond.Order == 2:
		return "="
	case bond.Order == 3:
		return "#"
	case bond.Order == 4:
		return "$"
	case w.aromaticAtoms[from] && w.aromaticAtoms[to]:
		return "-"
	}
	return ""
}
