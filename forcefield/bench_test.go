package forcefield

import (
	"fmt"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/molecule"
)

// graphBuilder makes molecules for benchmarks and tests bond by bond.
type graphBuilder struct {
	atoms []molecule.Atom
	bonds []molecule.Bond
}

// add adds an atom, bonded to the given one unless that is negative, and returns its index.
func (b *graphBuilder) add(e molecule.Element, to, order int) int {
	b.atoms = append(b.atoms, molecule.Atom{Element: e})
	i := len(b.atoms) - 1
	if to >= 0 {
		b.bonds = append(b.bonds, molecule.Bond{A: to, B: i, Order: order})
	}
	return i
}

func (b *graphBuilder) hydrogens(n, on int) {
	for range n {
		b.add(1, on, 1)
	}
}

func (b *graphBuilder) molecule(t testing.TB) *molecule.Molecule {
	m, err := molecule.New("", b.atoms, b.bonds, nil, nil)
	require.NoError(t, err)
	return m
}

// peptide is acetyl-(Ala)n-N-methylamide, 12 + 10n atoms.
func peptide(t testing.TB, residues int) *molecule.Molecule {
	b := &graphBuilder{}
	carbonyl := func(on int) int {
		c := b.add(6, on, 1)
		b.add(8, c, 2)
		return c
	}
	start := b.add(6, -1, 0)
	b.hydrogens(3, start)
	end := carbonyl(start)
	for range residues {
		n := b.add(7, end, 1)
		b.hydrogens(1, n)
		alpha := b.add(6, n, 1)
		b.hydrogens(1, alpha)
		b.hydrogens(3, b.add(6, alpha, 1))
		end = carbonyl(alpha)
	}
	n := b.add(7, end, 1)
	b.hydrogens(1, n)
	b.hydrogens(3, b.add(6, n, 1))
	return b.molecule(t)
}

// alkane is CnH2n+2, unbranched.
func alkane(t testing.TB, carbons int) *molecule.Molecule {
	b := &graphBuilder{}
	end := -1
	for n := range carbons {
		c := b.add(6, end, 1)
		switch {
		case carbons == 1:
			b.hydrogens(4, c)
		case n == 0 || n == carbons-1:
			b.hydrogens(3, c)
		default:
			b.hydrogens(2, c)
		}
		end = c
	}
	return b.molecule(t)
}

// lattice places n atoms on a cubic lattice, slightly sheared so that no three are in line. The time of an evaluation does
// not depend on where the atoms are.
func lattice(n int) []float64 {
	x := make([]float64, 0, 3*n)
	for i := range n {
		a, b, c := float64(i%6), float64(i/6%6), float64(i/36)
		x = append(x, 1.6*a+0.1*b*b+0.05*c, 1.6*b+0.07*c*c+0.03*a*a, 1.6*c+0.11*a*a)
	}
	return x
}

func benchmarkEvaluation(b *testing.B, evaluate func(f *MMFF94, x, grad []float64)) {
	var molecules []*molecule.Molecule
	for _, carbons := range []int{8, 16, 33, 66} {
		molecules = append(molecules, alkane(b, carbons))
	}
	for _, residues := range []int{1, 4, 9, 19} {
		molecules = append(molecules, peptide(b, residues))
	}
	for n, m := range molecules {
		family := [...]string{"alkane", "peptide"}[n/4]
		b.Run(fmt.Sprintf("%s/%datoms", family, len(m.Atoms)), func(b *testing.B) {
			f, err := NewMMFF94(m, Options{})
			require.NoError(b, err)
			x, grad := lattice(f.Atoms()), make([]float64, 3*f.Atoms())
			for b.Loop() {
				evaluate(f, x, grad)
			}
			perEvaluation := float64(b.Elapsed().Nanoseconds()) / float64(b.N)
			b.ReportMetric(perEvaluation/1000, "µs/eval")
			b.ReportMetric(perEvaluation/float64(len(f.nonbonded.pairs)), "ns/pair")
		})
	}
}

// BenchmarkEnergyGradient times all terms with the gradient; ns/pair is the whole time over the non-bonded pairs.
func BenchmarkEnergyGradient(b *testing.B) {
	benchmarkEvaluation(b, func(f *MMFF94, x, grad []float64) { f.Energy(x, grad) })
}

// BenchmarkEnergy times all terms without the gradient.
func BenchmarkEnergy(b *testing.B) {
	benchmarkEvaluation(b, func(f *MMFF94, x, grad []float64) { f.Energy(x, nil) })
}

// BenchmarkEnergyNonbonded times the non-bonded pairs alone, with the gradient.
func BenchmarkEnergyNonbonded(b *testing.B) {
	benchmarkEvaluation(b, func(f *MMFF94, x, grad []float64) {
		clear(grad)
		f.nonbonded.energyGradient(x, grad)
	})
}

// BenchmarkHessian times the exact second derivatives of all terms.
func BenchmarkHessian(b *testing.B) {
	m := peptide(b, 4)
	f, err := NewMMFF94(m, Options{})
	require.NoError(b, err)
	x := lattice(f.Atoms())
	h := make([]float64, len(x)*len(x))
	for b.Loop() {
		f.Hessian(x, h)
	}
}

// BenchmarkPrepare times typing and the assembly of the terms.
func BenchmarkPrepare(b *testing.B) {
	m := peptide(b, 4)
	for b.Loop() {
		_, err := NewMMFF94(m, Options{})
		require.NoError(b, err)
	}
}

// BenchmarkEnergyLennardJones times a cluster of 38 atoms with the gradient.
func BenchmarkEnergyLennardJones(b *testing.B) {
	f, err := NewLennardJones(38)
	require.NoError(b, err)
	x, grad := lattice(38), make([]float64, 3*38)
	for b.Loop() {
		f.Energy(x, grad)
	}
	b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/(38*37/2), "ns/pair")
}
