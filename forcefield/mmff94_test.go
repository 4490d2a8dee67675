package forcefield

import (
	"encoding/json"
	"math"
	"runtime"
	"sync"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/forcefield/internal/sketch"
)

// TestEmpiricalRules lists the parameters that the published list of the validation suite marks as made by a rule.
func TestEmpiricalRules(t *testing.T) {
	for name, terms := range map[string]map[string]int{
		"AGLYSL01": {},
		"OHMW1":    {"bond": 1, "charge": 1},
		"ERULE_01": {"angle": 2, "torsion": 1},
		"ERULE_03": {"bond": 1, "charge": 1, "angle": 3, "torsion": 1},
		"ERULE_05": {"angle": 2},
		"ERULE_06": {"bond": 1, "charge": 1, "angle": 1},
		"ERULE_07": {"torsion": 1},
		"ERULE_08": {"angle": 1, "torsion": 1},
		"CEWYIM30": {"angle": 1},
	} {
		f, err := NewMMFF94(publishedCheck(t, name).molecule(t), Options{})
		require.NoError(t, err)
		distinct := map[string]map[string]bool{}
		for _, e := range f.Empirical() {
			require.Len(t, e.Types, len(e.Atoms))
			for n, atom := range e.Atoms {
				require.Equal(t, f.AtomTypes()[atom-1], e.Types[n])
			}
			if distinct[e.Term] == nil {
				distinct[e.Term] = map[string]bool{}
			}
			distinct[e.Term][e.Value] = true
		}
		for term, values := range distinct {
			require.Len(t, values, terms[term], "%s, %s: %v", name, term, values)
		}
		require.Len(t, distinct, len(terms), name)
	}
}

// TestTermsAddUp checks the split and its JSON names.
func TestTermsAddUp(t *testing.T) {
	p := publishedCheck(t, "JALSOE")
	f, err := NewMMFF94(p.molecule(t), Options{})
	require.NoError(t, err)
	terms := f.Terms(p.coordinates)
	require.InDelta(t, p.energy, terms.Sum(), 1e-4)
	text, err := json.Marshal(terms)
	require.NoError(t, err)
	var names map[string]float64
	require.NoError(t, json.Unmarshal(text, &names))
	sum := 0.0
	for _, name := range []string{"bond", "angle", "stretch_bend", "out_of_plane", "torsion", "vdw", "electrostatic"} {
		require.Contains(t, names, name)
		sum += names[name]
	}
	require.Len(t, names, 7)
	require.InDelta(t, p.energy, sum, 1e-4)
}

// TestDielectric recomputes the electrostatic energy of two separate ions, (R + 0.05 Å) apart in the formula of J. Comput.
// Chem. 17, 520 (1996), eq. 14.
func TestDielectric(t *testing.T) {
	ions := sketch.Molecule(t, "Na+ Cl-", "")
	x := []float64{0, 0, 0, 0, 3.95, 0}
	for _, c := range []struct {
		options  Options
		expected float64
	}{
		{Options{}, -332.0716 / 4},
		{Options{Dielectric: 1}, -332.0716 / 4},
		{Options{Dielectric: 80}, -332.0716 / 4 / 80},
		{Options{DistanceDependent: true}, -332.0716 / 16},
		{Options{DistanceDependent: true, Dielectric: 4}, -332.0716 / 64},
	} {
		f, err := NewMMFF94(ions, c.options)
		require.NoError(t, err)
		require.InDelta(t, c.expected, f.Terms(x).Electrostatic, 1e-10)
		require.InDelta(t, f.Terms(x).Sum(), f.Energy(x, make([]float64, 6)), 1e-10)
		require.Equal(t, max(c.options.Dielectric, 1), f.Options().Dielectric)
	}
}

// TestChargesAddUp compares the sum of the partial charges with the charge of the molecule.
func TestChargesAddUp(t *testing.T) {
	for _, p := range publishedChecks(t) {
		m := p.molecule(t)
		f, err := NewMMFF94(m, Options{})
		require.NoError(t, err)
		total := 0.0
		for _, q := range f.PartialCharges() {
			total += q
		}
		require.InDelta(t, m.Charge(), total, 1e-9, p.name)
	}
}

// TestStaticVariantChanges compares MMFF94 with MMFF94s for an amide, where torsions and out-of-plane terms differ, and for
// an alkane, where nothing does.
func TestStaticVariantChanges(t *testing.T) {
	evaluate := func(o Options, residues int) (Terms, []float64) {
		m := alkane(t, 5)
		if residues > 0 {
			m = peptide(t, residues)
		}
		f, err := NewMMFF94(m, o)
		require.NoError(t, err)
		return f.Terms(lattice(f.Atoms())), f.PartialCharges()
	}
	a, charges := evaluate(Options{}, 1)
	b, chargesStatic := evaluate(Options{Static: true}, 1)
	require.Equal(t, charges, chargesStatic)
	require.Greater(t, math.Abs(a.OutOfPlane-b.OutOfPlane), 1e-3)
	require.Greater(t, math.Abs(a.Torsion-b.Torsion), 1e-3)
	a.OutOfPlane, a.Torsion = b.OutOfPlane, b.Torsion
	require.Equal(t, a, b, "the other terms are the same")
	a, _ = evaluate(Options{}, 0)
	b, _ = evaluate(Options{Static: true}, 0)
	require.Equal(t, a, b)
}

// TestReferences reads reference geometry as distance geometry will: listed values of J. Comput. Chem. 17, 490 (1996).
func TestReferences(t *testing.T) {
	f, err := NewMMFF94(sketch.Molecule(t, "CH3 C N", "1-2 2#3"), Options{})
	require.NoError(t, err)
	require.Equal(t, 1.459, f.ReferenceBond(0, 1))
	require.Equal(t, 1.160, f.ReferenceBond(2, 1))
	require.Equal(t, 1.093, f.ReferenceBond(3, 0))
	require.Equal(t, math.Pi, f.ReferenceAngle(0, 1, 2), "a linear centre")
	require.InDelta(t, 108.836*math.Pi/180, f.ReferenceAngle(3, 0, 4), 1e-12)
	require.Equal(t, f.ReferenceAngle(3, 0, 1), f.ReferenceAngle(1, 0, 3))
	require.Zero(t, f.ReferenceBond(0, 2))
	require.Zero(t, f.ReferenceAngle(0, 2, 1))
}

// TestNoAllocation guards the evaluation in a search.
func TestNoAllocation(t *testing.T) {
	f, err := NewMMFF94(peptide(t, 4), Options{})
	require.NoError(t, err)
	lj, err := NewLennardJones(13)
	require.NoError(t, err)
	for _, s := range []surface{f, lj} {
		x, grad, h := lattice(s.Atoms()), make([]float64, 3*s.Atoms()), make([]float64, 9*s.Atoms()*s.Atoms())
		require.Zero(t, testing.AllocsPerRun(10, func() { s.Energy(x, grad) }))
		require.Zero(t, testing.AllocsPerRun(10, func() { s.Energy(x, nil) }))
		require.Zero(t, testing.AllocsPerRun(10, func() { s.Hessian(x, h) }))
	}
}

// TestMemory holds a prepared molecule of 50 atoms to 200 kB.
func TestMemory(t *testing.T) {
	m := peptide(t, 4)
	var before, after runtime.MemStats
	held := make([]*MMFF94, 50)
	runtime.GC()
	runtime.ReadMemStats(&before)
	for i := range held {
		held[i], _ = NewMMFF94(m, Options{})
	}
	runtime.GC()
	runtime.ReadMemStats(&after)
	require.Less(t, (float64(after.HeapAlloc)-float64(before.HeapAlloc))/float64(len(held)), 200e3)
	runtime.KeepAlive(held)
}

// TestConcurrentUse evaluates one force field in several goroutines; run with -race it also shows that nothing is shared.
func TestConcurrentUse(t *testing.T) {
	f, err := NewMMFF94(peptide(t, 2), Options{})
	require.NoError(t, err)
	x := lattice(f.Atoms())
	expected := f.Energy(x, nil)
	results := make([]float64, 8)
	var group sync.WaitGroup
	for i := range results {
		group.Go(func() { results[i] = f.Energy(x, nil) })
	}
	group.Wait()
	for _, e := range results {
		require.Equal(t, expected, e)
	}
}
