package search_test

import (
	"bufio"
	"context"
	"errors"
	"fmt"
	"math"
	"os"
	"slices"
	"strconv"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/molecule"
	"tarn/molecule/smiles"
	"tarn/search"
)

// comparison is one row of testdata/conformers.tsv.
type comparison struct {
	code, name         string
	smilesA, smilesB   string
	patternA, patternB string
	kcal               float64
}

func comparisons(t *testing.T) []comparison {
	t.Helper()
	f, err := os.Open("testdata/conformers.tsv")
	require.NoError(t, err)
	defer f.Close()
	var rows []comparison
	for lines := bufio.NewScanner(f); lines.Scan(); {
		if strings.HasPrefix(lines.Text(), "#") || strings.HasPrefix(lines.Text(), "code") {
			continue
		}
		c := strings.Split(lines.Text(), "\t")
		require.Len(t, c, 7)
		kcal, err := strconv.ParseFloat(c[6], 64)
		require.NoError(t, err)
		rows = append(rows, comparison{c[0], c[1], c[2], c[3], c[4], c[5], kcal})
	}
	require.Len(t, rows, 90)
	return rows
}

// quickComparisons are checked in every run of the tests, the rest by make verify.
var quickComparisons = []string{
	"RA08b-RA08a", "CO05b-CO05a", "CJ01a-CJ01b", "OR03b-OR03a", "RA04b-RA04a", "AM02a-AM02b", "CA01b-CA01a", "CE02a-CE02b", "CJ02a-CJ02b",
	"HL04a-HL04b", "HL05b-HL05a", "HL10a-HL10b", "OH02a-OH02b", "OR01b-OR01a", "RA12a-RA12b", "SR02b-SR02a", "RE08b-RE08a",
}

// From SMILES alone, both conformers of a published comparison are found and their energies differ as published, within 0.02 kcal/mol.
// Source: the papers named in testdata/conformers.tsv.
func TestPublishedConformers(t *testing.T) {
	cache := map[string]*library{}
	for _, c := range comparisons(t) {
		if slices.Contains(quickComparisons, c.code) {
			t.Run(c.code+" "+c.name, func(t *testing.T) {
				compare(t, c, cache, search.Settings{Seed: 1, WindowKcal: 10, MaxQuenches: 120})
			})
		}
	}
}

func TestVerifyPublishedConformers(t *testing.T) {
	verifyOnly(t)
	cache := map[string]*library{}
	fmt.Println("| comparison | molecule | published | found | difference |")
	fmt.Println("| --- | --- | --- | --- | --- |")
	for _, c := range comparisons(t) {
		t.Run(c.code+" "+c.name, func(t *testing.T) {
			found := compare(t, c, cache, search.Settings{Seed: 1, WindowKcal: 10})
			fmt.Printf("| %s | %s | %.2f | %.3f | %+.3f |\n", c.code, c.name, c.kcal, found, found-c.kcal)
		})
	}
}

// library is what a search of one molecule found.
type library struct {
	problem *search.Problem
	minima  []search.Minimum
	images  [][]int
}

func compare(t *testing.T, c comparison, cache map[string]*library, s search.Settings) float64 {
	t.Helper()
	a := searched(t, c.smilesA, cache, s).lowest(t, c.patternA)
	b := searched(t, c.smilesB, cache, s).lowest(t, c.patternB)
	require.InDelta(t, c.kcal, a-b, 0.02+0.005, "published to two decimals")
	return a - b
}

func searched(t *testing.T, text string, cache map[string]*library, s search.Settings) *library {
	t.Helper()
	if cache[text] == nil {
		m, err := smiles.Parse(text)
		require.NoError(t, err)
		p, err := search.NewMoleculeProblem(context.Background(), m, "mmff94", nil, 1)
		var open *search.UnspecifiedError
		if errors.As(err, &open) { // enantiomers have the same energies
			p, err = search.NewMoleculeProblem(context.Background(), open.Isomers[0], "mmff94", nil, 1)
		}
		require.NoError(t, err)
		r, err := search.Run(context.Background(), p, s, nil, search.Hooks{})
		require.NoError(t, err)
		cache[text] = &library{p, r.Minima, automorphisms(p.Molecule)}
	}
	return cache[text]
}

// lowest returns the energy of the lowest minimum that shows a pattern.
func (l *library) lowest(t *testing.T, pattern string) float64 {
	t.Helper()
	for i := range l.minima {
		if l.shows(l.minima[i].X, pattern) {
			return l.minima[i].Energy
		}
	}
	require.Fail(t, "no minimum shows "+pattern, "of %d", len(l.minima))
	return math.NaN()
}

// near is how far a torsion may be from the label, which is rounded to degrees.
const near = 6.0

func (l *library) shows(x molecule.Geometry, pattern string) bool {
	signs := []float64{1}
	if l.problem.Symmetry.MirrorIsSame() {
		signs = append(signs, -1)
	}
	for _, sign := range signs {
		if ring, ok := strings.CutPrefix(pattern, "ring:"); ok {
			if l.showsRing(x, ring, sign) {
				return true
			}
			continue
		}
		for _, image := range l.images {
			all := true
			for label := range strings.SplitSeq(pattern, ";") {
				all = all && l.showsTorsion(x, label, sign, image)
			}
			if all {
				return true
			}
		}
	}
	return false
}

func (l *library) showsRing(x molecule.Geometry, ring string, sign float64) bool {
	want := strings.Split(ring, ",")
	atoms := l.problem.Molecule.Rings()[0]
	n := len(atoms)
	for shift := range n {
		for _, step := range []int{1, n - 1} {
			all := true
			for k := range n {
				at := func(j int) int { return atoms[(shift+step*(k+j))%n] }
				value, _ := strconv.ParseFloat(want[k], 64)
				all = all && turnsBy(x.Torsion(at(0), at(1), at(2), at(3)), sign*value, 12)
			}
			if all {
				return true
			}
		}
	}
	return false
}

func turnsBy(radians, degrees, tolerance float64) bool {
	return math.Abs(math.Remainder(radians*180/math.Pi-degrees, 360)) <= tolerance
}

func (l *library) showsTorsion(x molecule.Geometry, label string, sign float64, image []int) bool {
	names, value, _ := strings.Cut(label, "=")
	size, unsigned := strings.CutPrefix(value, "|")
	degrees, _ := strconv.ParseFloat(size, 64)
	var places [4][][3]float64
	for k, name := range strings.Split(names, "-") {
		places[k] = l.places(x, name, image)
	}
	for _, first := range places[0] {
		for _, last := range places[3] {
			g := slices.Concat(first[:], places[1][0][:], places[2][0][:], last[:])
			angle := molecule.Geometry(g).Torsion(0, 1, 2, 3)
			if turnsBy(angle, sign*degrees, near) || unsigned && turnsBy(angle, -sign*degrees, near) {
				return true
			}
		}
	}
	return false
}

// places returns where the atom of a label may be: one place, those of the hydrogens on an atom, or that of a lone pair.
func (l *library) places(x molecule.Geometry, name string, image []int) [][3]float64 {
	number, _ := strconv.Atoi(strings.TrimLeft(name, "HL"))
	atom := image[number-1]
	var list [][3]float64
	switch name[0] {
	case 'H':
		for _, n := range l.problem.Molecule.Neighbors(atom) {
			if l.problem.Molecule.Atoms[n.Atom].Element == 1 {
				list = append(list, x.At(n.Atom))
			}
		}
	case 'L':
		here := x.At(atom)
		place := here
		for _, n := range l.problem.Molecule.Neighbors(atom) {
			there := x.At(n.Atom)
			for c := range 3 {
				place[c] -= (there[c] - here[c]) / x.Distance(atom, n.Atom)
			}
		}
		list = append(list, place)
	default:
		list = append(list, x.At(atom))
	}
	return list
}

// automorphisms lists the permutations of the heavy atoms that keep the graph; explicit hydrogens that a label may name stay in place.
func automorphisms(m *molecule.Molecule) [][]int {
	classes := m.SymmetryClasses()
	var images [][]int
	image := make([]int, len(m.Atoms))
	used := make([]bool, len(m.Atoms))
	var extend func(i int)
	extend = func(i int) {
		for i < len(m.Atoms) && m.Atoms[i].Element == 1 {
			image[i] = i
			i++
		}
		if i == len(m.Atoms) {
			images = append(images, slices.Clone(image))
			return
		}
	candidates:
		for j := range m.Atoms {
			if used[j] || classes[i] != classes[j] {
				continue
			}
			for k := range i {
				if m.Atoms[k].Element != 1 && (m.BondBetween(i, k) >= 0) != (m.BondBetween(j, image[k]) >= 0) {
					continue candidates
				}
			}
			image[i], used[j] = j, true
			extend(i + 1)
			used[j] = false
		}
	}
	extend(0)
	return images
}
