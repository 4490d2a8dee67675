package search

import (
	"math"
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/molecule"
	"tarn/search/moves"
)

// chainOf returns a zigzag of n atoms in general position and the torsions along it.
func chainOf(n int) ([]float64, []moves.Torsion) {
	var x []float64
	for i := range n {
		x = append(x, 1.2*float64(i), 0.9*float64(i%2), 0.3*float64(i%3))
	}
	var torsions []moves.Torsion
	for i := range n - 3 {
		var side []int
		for j := i + 3; j < n; j++ {
			side = append(side, j)
		}
		torsions = append(torsions, moves.Torsion{A: i + 1, B: i + 2, Atoms: side, Ends: [2]int{i, i + 3}})
	}
	return x, torsions
}

func angleOf(x []float64, t *moves.Torsion) float64 {
	return molecule.Geometry(x).Torsion(t.Ends[0], t.A, t.B, t.Ends[1])
}

// threefold is a torsional potential with an anti minimum at π and gauche minima 1.2 above it, kT units of 1.
func threefold(phi float64) float64 { return 1.5*(1+math.Cos(3*phi)) + 0.6*(1+math.Cos(phi)) }

// sampled runs a tuned walk and returns the mean of an observable over it.
func sampled(m *metropolis, steps int, observe func(x []float64) float64) float64 {
	m.tuning = true
	for range 2000 {
		m.move()
	}
	m.tuning = false
	m.stage()
	sum := 0.0
	for range steps {
		m.move()
		sum += observe(m.x)
	}
	return sum / float64(steps)
}

func rotations(torsions []moves.Torsion) []proposal {
	return []proposal{{weight: 1, step: 1, most: math.Pi, propose: func(x []float64, amount float64, rng *rand.Rand) {
		torsions[rng.IntN(len(torsions))].Rotate(x, amount)
	}}}
}

// One torsion: averages of the walk equal those by quadrature of exp(-V/kT) over the angle.
func TestDetailedBalanceOneTorsion(t *testing.T) {
	x, torsions := chainOf(4)
	energy := func(x []float64) float64 { return threefold(angleOf(x, &torsions[0])) }
	for _, kT := range []float64{0.7, 2} {
		m := newMetropolis(energy, x, rotations(torsions), rand.New(rand.NewPCG(11, 12)))
		m.kT = kT
		gauche := sampled(m, 200_000, func(x []float64) float64 {
			if math.Cos(angleOf(x, &torsions[0])) > -0.5 {
				return 1
			}
			return 0
		})
		weight, total := 0.0, 0.0
		const points = 3600
		for k := range points {
			phi := 2 * math.Pi * (float64(k) + 0.5) / points
			b := math.Exp(-threefold(phi) / kT)
			total += b
			if math.Cos(phi) > -0.5 {
				weight += b
			}
		}
		require.InDelta(t, weight/total, gauche, 0.012, "kT %v", kT)
		if acceptance, _, _ := m.stage(); m.proposals[0].step < math.Pi { // with the longest step more may be accepted
			require.InDelta(t, targetAcceptance, acceptance, 0.1)
		}
	}
}

// Two coupled torsions, moved one at a time, together, and with shifts of single atoms rejected by stiffness left out: the mean energy and a
// correlation equal those by quadrature over both angles.
func TestDetailedBalanceTwoTorsions(t *testing.T) {
	x, torsions := chainOf(5)
	v := func(a, b float64) float64 { return threefold(a) + threefold(b) + 0.8*math.Cos(a-b) }
	energy := func(x []float64) float64 { return v(angleOf(x, &torsions[0]), angleOf(x, &torsions[1])) }
	proposals := moleculeProposals(&moves.Set{Torsions: torsions}, 5)
	proposals = proposals[:len(proposals)-1] // the shifts of atoms, which this potential does not hold back
	require.Len(t, proposals, 2)
	const kT = 1.1
	m := newMetropolis(energy, x, proposals, rand.New(rand.NewPCG(3, 1)))
	m.kT = kT
	correlation := sampled(m, 300_000, func(x []float64) float64 {
		return math.Cos(angleOf(x, &torsions[0]) - angleOf(x, &torsions[1]))
	})
	_, mean, deviation := m.stage()
	total, sumC, sumE, sumE2 := 0.0, 0.0, 0.0, 0.0
	const points = 360
	for i := range points {
		for j := range points {
			a, b := 2*math.Pi*float64(i)/points, 2*math.Pi*float64(j)/points
			e := v(a, b)
			w := math.Exp(-e / kT)
			total += w
			sumC += w * math.Cos(a-b)
			sumE += w * e
			sumE2 += w * e * e
		}
	}
	require.InDelta(t, sumC/total, correlation, 0.02)
	require.InDelta(t, sumE/total, mean, 0.02)
	require.InDelta(t, math.Sqrt(sumE2/total-sumE*sumE/total/total), deviation, 0.02)
}

// Shifts of single atoms and of all: equipartition in springs gives kT/2 a coordinate.
func TestDetailedBalanceShifts(t *testing.T) {
	const atoms, kT, stiffness = 3, 0.5, 4.0
	energy := func(x []float64) float64 {
		e := 0.0
		for _, v := range x {
			e += stiffness / 2 * v * v
		}
		return e
	}
	m := newMetropolis(energy, make([]float64, 3*atoms), clusterProposals(atoms), rand.New(rand.NewPCG(2, 9)))
	m.kT = kT
	mean := sampled(m, 2_000_000, energy)
	require.InDelta(t, 3*atoms*kT/2, mean, 0.03)
}

// A ring segment that turns and flaps: the fold of a four-membered ring in a potential of its own is sampled as by quadrature.
func TestDetailedBalanceFlap(t *testing.T) {
	p, err := NewMoleculeProblem(t.Context(), parse(t, "C1CCC1"), "", nil, 1)
	require.NoError(t, err)
	c := &p.moves.Cranks[0]
	fold := func(x []float64) float64 {
		return math.Abs(molecule.Geometry(x).Torsion(c.Atoms[0], c.A, c.B, other(p, c, x)))
	}
	tilt := func(phi float64) float64 { return 2 * math.Cos(phi) }
	energy := func(x []float64) float64 { return tilt(fold(x)) }
	m := newMetropolis(energy, p.Start[0], []proposal{
		{weight: 0.8, step: 1, most: math.Pi, propose: func(x []float64, amount float64, _ *rand.Rand) { c.Rotate(x, amount) }},
		{weight: 0.2, propose: func(x []float64, _ float64, _ *rand.Rand) { c.Flap(x) }},
	}, rand.New(rand.NewPCG(6, 6)))
	m.kT = 1.5
	mean := sampled(m, 100_000, func(x []float64) float64 { return math.Cos(fold(x)) })
	total, sum := 0.0, 0.0
	for k := range 3600 {
		phi := math.Pi * (float64(k) + 0.5) / 3600
		w := math.Exp(-tilt(phi) / m.kT)
		total += w
		sum += w * math.Cos(phi)
	}
	require.InDelta(t, sum/total, mean, 0.015)
}

// other returns the ring atom across the axis from the segment.
func other(p *Problem, c *moves.Crank, _ []float64) int {
	for _, r := range p.Molecule.Rings() {
		for _, i := range r {
			if i != c.A && i != c.B && i != c.Atoms[0] {
				return i
			}
		}
	}
	return -1
}

// A step must not depend on the walk while the walk is sampled.
func TestStepsAreFixedWhileSampling(t *testing.T) {
	x, torsions := chainOf(4)
	m := newMetropolis(func(x []float64) float64 { return 20 * threefold(angleOf(x, &torsions[0])) }, x, rotations(torsions), rand.New(rand.NewPCG(1, 1)))
	m.kT = 1
	before := m.proposals[0].step
	for range 500 {
		m.move()
	}
	require.InDelta(t, before, m.proposals[0].step, 0)
	m.tuning = true
	for range 1000 {
		m.move()
	}
	m.tuning = false
	require.Less(t, m.proposals[0].step, before)
	m.stage()
	for range 2000 {
		m.move()
	}
	acceptance, _, _ := m.stage()
	require.InDelta(t, targetAcceptance, acceptance, 0.1)
}
