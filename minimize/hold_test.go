package minimize

import (
	"context"
	"math"
	"testing"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"
)

func TestTorsionGradient(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		x := rapid.SliceOfN(rapid.Float64Range(-2, 2), 12, 12).Draw(t, "x")
		atoms := [4]int{2, 0, 3, 1}
		at := func(k int) vector { return vector(x[3*atoms[k] : 3*atoms[k]+3]) }
		for k := range 2 { // arms well away from the axis
			axis, arm := at(2).minus(at(1)), at(3*k).minus(at(1+k))
			normal := axis.cross(arm)
			if normal.dot(normal) < 0.3 || axis.dot(axis) < 0.3 {
				t.Skip("collinear")
			}
		}
		slopes := torsionGradient(x, atoms)
		for k := range slopes {
			i := 3*atoms[k/3] + k%3
			at := x[i]
			x[i] = at + 1e-5
			forward := torsionAngle(x, atoms)
			x[i] = at - 1e-5
			backward := torsionAngle(x, atoms)
			x[i] = at
			require.InDelta(t, math.Remainder(forward-backward, 2*math.Pi)/2e-5, slopes[k], 1e-6)
		}
	})
}

// exactly gives a field a Hessian of its own, so that the path with exact second derivatives is taken.
type exactly struct{ Field }

func (e exactly) Hessian(x, h []float64) { copy(h, HessianAt(e.Field, x)) }

// Bonds and angles of the chain do not depend on its torsion, so the energy at a held torsion is the torsional potential, on minima,
// slopes and barriers alike.
func TestDriveFollowsTorsionalPotential(t *testing.T) {
	potential := cosineTwist(4, 3)
	var angles []float64
	for k := range 25 {
		angles = append(angles, float64(15*k-180)*degree)
	}
	for name, f := range map[string]Field{"differences": chain(potential), "exact": exactly{chain(potential)}} {
		results, err := Drive(context.Background(), f, chainGeometry(math.Pi), [4]int{0, 1, 2, 3}, angles, Settings{})
		require.NoError(t, err, name)
		require.Len(t, results, len(angles))
		for i, r := range results {
			want, _ := potential(angles[i])
			require.InDelta(t, want, r.Energy, 1e-8, "%s at %.0f°", name, angles[i]/degree)
			require.InDelta(t, 0, math.Remainder(torsionAngle(r.X, [4]int{0, 1, 2, 3})-angles[i], 2*math.Pi), holdTolerance)
			require.LessOrEqual(t, r.GradientRMS, 2e-6)
			require.Positive(t, r.Evaluations)
			require.Positive(t, r.LowestEigenvalue)
		}
	}
}

// A held torsion may be any four atoms, the ends of a bond or not, and is turned the shorter way round.
func TestHoldTurnsTheShorterWay(t *testing.T) {
	f := chain(cosineTwist(4, 3))
	r, err := Hold(context.Background(), f, chainGeometry(170*degree), Torsion{[4]int{3, 2, 1, 0}, -170 * degree}, Settings{})
	require.NoError(t, err)
	require.InDelta(t, -170*degree, torsionAngle(r.X, [4]int{0, 1, 2, 3}), holdTolerance)
	require.Less(t, r.Evaluations, 1500)
}

func TestHoldRefuses(t *testing.T) {
	f, x := chain(nil), chainGeometry(1)
	for message, torsion := range map[string]Torsion{
		"atom 5, but there are 4": {[4]int{0, 1, 2, 4}, 0},
		"atom 0, but there are 4": {[4]int{-1, 1, 2, 3}, 0},
		"atom 2 twice":            {[4]int{0, 1, 2, 1}, 0},
		"angle of NaN":            {[4]int{0, 1, 2, 3}, math.NaN()},
	} {
		_, err := Hold(context.Background(), f, x, torsion, Settings{})
		require.ErrorContains(t, err, message)
	}
	_, err := Hold(context.Background(), f, x[:9], Torsion{[4]int{0, 1, 2, 3}, 0}, Settings{})
	require.ErrorIs(t, err, ErrLength)
	canceled, cancel := context.WithCancel(context.Background())
	cancel()
	results, err := Drive(canceled, f, x, [4]int{0, 1, 2, 3}, []float64{1}, Settings{})
	require.ErrorIs(t, err, context.Canceled)
	require.Empty(t, results)
}
