package ctfile_test

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"

	"tarn/molecule/ctfile"
	"tarn/molecule/smiles"
)

// sketch is a drawing: atoms with places in the plane, bonds with marks.
type sketch struct {
	symbols []string
	at      [][2]float64
	bonds   [][4]int // atoms from 1, type, stereo mark of V2000
}

func (s sketch) file(version ctfile.Version) string {
	var b strings.Builder
	if version == ctfile.V2000 {
		fmt.Fprintf(&b, "sketch\n\n\n%3d%3d  0  0  0  0            999 V2000\n", len(s.symbols), len(s.bonds))
		for i, symbol := range s.symbols {
			fmt.Fprintf(&b, "%10.4f%10.4f%10.4f %-3s 0  0\n", s.at[i][0], s.at[i][1], 0.0, symbol)
		}
		for _, bond := range s.bonds {
			fmt.Fprintf(&b, "%3d%3d%3d%3d\n", bond[0], bond[1], bond[2], bond[3])
		}
		return b.String() + "M  END\n"
	}
	fmt.Fprintf(&b, "sketch\n\n\n  0  0  0     0  0            999 V3000\nM  V30 BEGIN CTAB\nM  V30 COUNTS %d %d 0 0 0\nM  V30 BEGIN ATOM\n",
		len(s.symbols), len(s.bonds))
	for i, symbol := range s.symbols {
		fmt.Fprintf(&b, "M  V30 %d %s %.4f %.4f 0 0\n", i+1, symbol, s.at[i][0], s.at[i][1])
	}
	b.WriteString("M  V30 END ATOM\nM  V30 BEGIN BOND\n")
	for i, bond := range s.bonds {
		mark := map[int]int{0: 0, 1: 1, 4: 2, 3: 2, 6: 3}[bond[3]]
		fmt.Fprintf(&b, "M  V30 %d %d %d %d CFG=%d\n", i+1, bond[2], bond[0], bond[1], mark)
	}
	return b.String() + "M  V30 END BOND\nM  V30 END CTAB\nM  END\n"
}

// turned rotates a drawing by an angle in radians and scales it.
func (s sketch) turned(angle, factor float64) sketch {
	out := s
	out.at = nil
	for _, p := range s.at {
		out.at = append(out.at, [2]float64{
			factor * (p[0]*math.Cos(angle) - p[1]*math.Sin(angle)), factor * (p[0]*math.Sin(angle) + p[1]*math.Cos(angle)),
		})
	}
	return out
}

// reflected turns a drawing over like a transparency held to a mirror: left and right change, wedges stay.
func (s sketch) reflected() sketch {
	out := s
	out.at = nil
	for _, p := range s.at {
		out.at = append(out.at, [2]float64{-p[0], p[1]})
	}
	return out
}

// crossedWedges makes wedges hashes and hashes wedges.
func (s sketch) crossedWedges() sketch {
	out := s
	out.bonds = nil
	for _, b := range s.bonds {
		b[3] = map[int]int{0: 0, 1: 6, 6: 1, 3: 3, 4: 4}[b[3]]
		out.bonds = append(out.bonds, b)
	}
	return out
}

// drawings are read by hand: the order in which the neighbours turn, the wedge towards the viewer. Rules: IUPAC, Graphical
// representation of stereochemical configuration, Pure Appl. Chem. 78, 1897 (2006).
var drawings = []struct {
	name   string
	sketch sketch
	want   string
	chiral bool
	note   string // part of a note, "" for none
}{
	{
		// F, Br, Cl clockwise for the viewer, H behind: counter-clockwise seen from H.
		"one wedge, hydrogen implied",
		sketch{
			[]string{"C", "F", "Br", "Cl"},
			[][2]float64{{0, 0}, {-0.87, -0.5}, {0, 1}, {0.87, -0.5}},
			[][4]int{{1, 2, 1, 0}, {1, 3, 1, 1}, {1, 4, 1, 0}},
		},
		"[H][C@](F)(Br)Cl", true, "",
	},
	{
		"one hash, hydrogen implied",
		sketch{
			[]string{"C", "F", "Br", "Cl"},
			[][2]float64{{0, 0}, {-0.87, -0.5}, {0, 1}, {0.87, -0.5}},
			[][4]int{{1, 2, 1, 0}, {1, 3, 1, 6}, {1, 4, 1, 0}},
		},
		"[H][C@@](F)(Br)Cl", true, "",
	},
	{
		"plain bonds in a T, wedge between them",
		sketch{
			[]string{"C", "F", "Br", "Cl"},
			[][2]float64{{0, 0}, {-1, 0}, {0, 1}, {1, 0}},
			[][4]int{{1, 2, 1, 0}, {1, 3, 1, 1}, {1, 4, 1, 0}},
		},
		"[H][C@](F)(Br)Cl", true, "",
	},
	{
		"wedge outside of three bonds on one side",
		sketch{
			[]string{"C", "F", "Br", "Cl"},
			[][2]float64{{0, 0}, {-0.9, 0.4}, {0, 1}, {0.9, 0.4}},
			[][4]int{{1, 2, 1, 1}, {1, 3, 1, 0}, {1, 4, 1, 0}},
		},
		"[H][C@](F)(Br)Cl", true, "",
	},
	{
		"wedge in the middle of three bonds on one side",
		sketch{
			[]string{"C", "F", "Br", "Cl"},
			[][2]float64{{0, 0}, {-0.9, 0.4}, {0, 1}, {0.9, 0.4}},
			[][4]int{{1, 2, 1, 0}, {1, 3, 1, 1}, {1, 4, 1, 0}},
		},
		"FC(Br)Cl", false, "can be read either way",
	},
	{
		// F in front and Br behind, both up; Cl in the plane, down left, so H is down right. Seen from there with the front of
		// the page up: F top right, Br bottom right, Cl left.
		"wedge and hash, hydrogen implied",
		sketch{
			[]string{"C", "F", "Br", "Cl"},
			[][2]float64{{0, 0}, {-0.5, 0.87}, {0.5, 0.87}, {-0.9, -0.4}},
			[][4]int{{1, 2, 1, 1}, {1, 3, 1, 6}, {1, 4, 1, 0}},
		},
		"[H][C@@](F)(Br)Cl", true, "",
	},
	{
		// With Cl straight down, H could be on either side of it.
		"wedge and hash, hydrogen implied, third bond between them",
		sketch{
			[]string{"C", "F", "Br", "Cl"},
			[][2]float64{{0, 0}, {-0.5, 0.87}, {0.5, 0.87}, {0, -1}},
			[][4]int{{1, 2, 1, 1}, {1, 3, 1, 6}, {1, 4, 1, 0}},
		},
		"FC(Br)Cl", false, "do not show its configuration",
	},
	{
		"four neighbours, one wedge",
		sketch{
			[]string{"C", "F", "Br", "Cl", "I"},
			[][2]float64{{0, 0}, {1, 1}, {1, -1}, {-1, -1}, {-1, 1}},
			[][4]int{{1, 2, 1, 1}, {1, 3, 1, 0}, {1, 4, 1, 0}, {1, 5, 1, 0}},
		},
		// Seen from F, which is in front: Br, Cl, I clockwise.
		"F[C@@](Br)(Cl)I", true, "",
	},
	{
		"four neighbours, wedge and hash side by side",
		sketch{
			[]string{"C", "F", "Br", "Cl", "I"},
			[][2]float64{{0, 0}, {-0.4, 0.9}, {0.4, 0.9}, {0.9, -0.4}, {-0.9, -0.4}},
			[][4]int{{1, 2, 1, 1}, {1, 3, 1, 6}, {1, 4, 1, 0}, {1, 5, 1, 0}},
		},
		"F[C@@](Br)(Cl)I", true, "",
	},
	{
		"four neighbours, two wedges side by side that cancel",
		sketch{
			[]string{"C", "F", "Br", "Cl", "I"},
			[][2]float64{{0, 0}, {1, 1}, {1, -1}, {-1, -1}, {-1, 1}},
			[][4]int{{1, 2, 1, 1}, {1, 3, 1, 1}, {1, 4, 1, 0}, {1, 5, 1, 0}},
		},
		"FC(Br)(Cl)I", false, "do not show its configuration",
	},
	{
		"wavy bond",
		sketch{
			[]string{"C", "F", "Br", "Cl"},
			[][2]float64{{0, 0}, {-0.87, -0.5}, {0, 1}, {0.87, -0.5}},
			[][4]int{{1, 2, 1, 0}, {1, 3, 1, 4}, {1, 4, 1, 0}},
		},
		"FC(Br)Cl", false, "",
	},
	{
		"wide end of the wedge at the centre",
		sketch{
			[]string{"C", "F", "Br", "Cl"},
			[][2]float64{{0, 0}, {-0.87, -0.5}, {0, 1}, {0.87, -0.5}},
			[][4]int{{1, 2, 1, 0}, {3, 1, 1, 1}, {1, 4, 1, 0}},
		},
		"FC(Br)Cl", false, "which is no stereocentre",
	},
	{
		"sulfoxide, lone pair",
		sketch{
			[]string{"S", "O", "C", "C", "C"},
			[][2]float64{{0, 0}, {0, 1}, {-0.87, -0.5}, {0.87, -0.5}, {1.7, 0}},
			[][4]int{{1, 2, 2, 0}, {1, 3, 1, 0}, {1, 4, 1, 1}, {4, 5, 1, 0}},
		},
		// For the viewer CH3, O, C2H5 turn clockwise, the lone pair lies behind: counter-clockwise seen from it. OpenSMILES
		// takes the neighbours as CH3, lone pair, O, C2H5: one exchange from lone pair, CH3, O, C2H5, hence clockwise.
		"C[S@@](=O)CC", true, "",
	},
	{
		"cis from the drawing",
		sketch{
			[]string{"C", "C", "C", "C"},
			[][2]float64{{0, 0}, {1.3, 0}, {-0.7, 1.2}, {2, 1.2}},
			[][4]int{{1, 2, 2, 0}, {1, 3, 1, 0}, {2, 4, 1, 0}},
		},
		`C/C=C\C`, false, "",
	},
	{
		"trans from the drawing",
		sketch{
			[]string{"C", "C", "C", "C"},
			[][2]float64{{0, 0}, {1.3, 0}, {-0.7, 1.2}, {2, -1.2}},
			[][4]int{{1, 2, 2, 0}, {1, 3, 1, 0}, {2, 4, 1, 0}},
		},
		`C/C=C/C`, false, "",
	},
	{
		"crossed double bond",
		sketch{
			[]string{"C", "C", "C", "C"},
			[][2]float64{{0, 0}, {1.3, 0}, {-0.7, 1.2}, {2, -1.2}},
			[][4]int{{1, 2, 2, 3}, {1, 3, 1, 0}, {2, 4, 1, 0}},
		},
		`CC=CC`, false, "",
	},
	{
		"wavy bond at a double bond",
		sketch{
			[]string{"C", "C", "C", "C"},
			[][2]float64{{0, 0}, {1.3, 0}, {-0.7, 1.2}, {2, -1.2}},
			[][4]int{{1, 2, 2, 0}, {1, 3, 1, 4}, {2, 4, 1, 0}},
		},
		`CC=CC`, false, "",
	},
	{
		"bonds in line at a double bond",
		sketch{
			[]string{"C", "C", "C", "C"},
			[][2]float64{{0, 0}, {1.3, 0}, {-1.5, 0}, {2, -1.2}},
			[][4]int{{1, 2, 2, 0}, {1, 3, 1, 0}, {2, 4, 1, 0}},
		},
		`CC=CC`, false, "lie on a line",
	},
	{
		"allene, one wedge",
		sketch{
			[]string{"C", "C", "C", "C", "C"},
			[][2]float64{{0, 0}, {1.3, 0}, {-1.3, 0}, {2, 1.2}, {-2, 1.2}},
			[][4]int{{1, 2, 2, 0}, {1, 3, 2, 0}, {2, 4, 1, 1}, {3, 5, 1, 0}},
		},
		// Seen along the axis from the left, page-up as up: near CH3 top, near H bottom, far CH3 (in front of the page) right,
		// far H left. From the near CH3: bottom, right, left turn counter-clockwise.
		"CC([H])=[C@]=C(C)[H]", true, "",
	},
}

func TestDrawings(t *testing.T) {
	for _, d := range drawings {
		for _, version := range []ctfile.Version{ctfile.V2000, ctfile.V3000} {
			t.Run(fmt.Sprintf("%s V%d", d.name, version), func(t *testing.T) {
				r := readOne(t, d.sketch.file(version))
				require.Equal(t, canonical(t, d.want), smiles.Canonical(r.Molecule))
				require.Nil(t, r.Geometry)
				if d.note == "" {
					require.Empty(t, r.Notes)
				} else {
					require.Len(t, r.Notes, 1)
					require.Contains(t, r.Notes[0], d.note)
				}
			})
		}
	}
}

// A drawing turned in its plane shows the same molecule; reflected, or with wedges and hashes exchanged, it shows the mirror
// image, and both together the same again.
func TestDrawingsTurned(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		d := rapid.SampledFrom(drawings).Draw(rt, "drawing")
		s := d.sketch.turned(rapid.Float64Range(0, 2*math.Pi).Draw(rt, "angle"), rapid.Float64Range(0.3, 30).Draw(rt, "factor"))
		same := readOne(t, s.file(ctfile.V3000)).Molecule
		require.Equal(rt, canonical(t, d.want), smiles.Canonical(same))
		mirrored := readOne(t, s.reflected().file(ctfile.V3000)).Molecule
		crossed := readOne(t, s.crossedWedges().file(ctfile.V3000)).Molecule
		both := readOne(t, s.reflected().crossedWedges().file(ctfile.V3000)).Molecule
		require.Equal(rt, smiles.Canonical(same.Mirror()), smiles.Canonical(mirrored))
		require.Equal(rt, smiles.Canonical(mirrored), smiles.Canonical(crossed))
		require.Equal(rt, smiles.Canonical(same), smiles.Canonical(both))
		if d.chiral {
			require.NotEqual(rt, smiles.Canonical(same), smiles.Canonical(mirrored))
		}
	})
}

// Each neighbour of a centre may be the one with the wedge, in any order in the file.
func TestWedgeOnAnyBond(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		symbols := []string{"F", "Br", "Cl"}
		order := rapid.Permutation([]int{0, 1, 2}).Draw(rt, "order")
		marked := rapid.IntRange(0, 2).Draw(rt, "marked")
		s := sketch{symbols: []string{"C"}, at: [][2]float64{{0, 0}}}
		for k, i := range order {
			angle := -2 * math.Pi * float64(i) / 3 // clockwise in the order F, Br, Cl
			s.symbols = append(s.symbols, symbols[i])
			s.at = append(s.at, [2]float64{math.Cos(angle), math.Sin(angle)})
			mark := 0
			if i == marked {
				mark = 1
			}
			s.bonds = append(s.bonds, [4]int{1, k + 2, 1, mark})
		}
		require.Equal(rt, canonical(t, "[H][C@](F)(Br)Cl"), smiles.Canonical(readOne(t, s.file(ctfile.V2000)).Molecule))
	})
}

func TestFlatBenzene(t *testing.T) {
	var s sketch
	for i := range 6 {
		angle := float64(i) * math.Pi / 3
		s.symbols = append(s.symbols, "C", "H")
		s.at = append(s.at, [2]float64{1.39 * math.Cos(angle), 1.39 * math.Sin(angle)}, [2]float64{2.47 * math.Cos(angle), 2.47 * math.Sin(angle)})
		s.bonds = append(s.bonds, [4]int{2*i + 1, 2*((i+1)%6) + 1, 4, 0}, [4]int{2*i + 1, 2*i + 2, 1, 0})
	}
	file := strings.Replace(s.file(ctfile.V2000), "sketch\n\n", "benzene\n  Example           3D\n", 1)
	r := readOne(t, file)
	require.Equal(t, canonical(t, "c1ccccc1"), smiles.Canonical(r.Molecule))
	require.Len(t, r.Geometry, 36)
	silent := readOne(t, s.file(ctfile.V2000))
	require.Equal(t, r.Geometry, silent.Geometry, "without the dimension code its bond lengths show that it is a geometry")
	require.Len(t, silent.Notes, 1)
	require.Nil(t, readOne(t, strings.Replace(file, "3D", "2D", 1)).Geometry, "the code 2D makes it a drawing")
	for k := range s.at { // C–C and C–H of one length, as programs draw them
		if k%2 == 1 {
			s.at[k] = [2]float64{2 * s.at[k-1][0], 2 * s.at[k-1][1]}
		}
	}
	require.Nil(t, readOne(t, s.file(ctfile.V2000)).Geometry, "bonds of one length are those of a drawing")
	doubles := 0
	for _, b := range r.Molecule.Bonds {
		if b.Order == 2 {
			doubles++
		}
	}
	require.Equal(t, 3, doubles)
	require.Equal(t, [3]float64{1.39, 0, 0}, r.Geometry.At(0))
}

// Pyrrole drawn with aromatic bonds: with the hydrogen of nitrogen as an atom it is unique, without it nothing fits.
func TestAromaticNitrogen(t *testing.T) {
	var s sketch
	for i, symbol := range []string{"N", "C", "C", "C", "C"} {
		angle := float64(i) * 2 * math.Pi / 5
		s.symbols = append(s.symbols, symbol)
		s.at = append(s.at, [2]float64{math.Cos(angle), math.Sin(angle)})
		s.bonds = append(s.bonds, [4]int{i + 1, (i+1)%5 + 1, 4, 0})
	}
	_, err := ctfile.NewReader(strings.NewReader(s.file(ctfile.V2000))).Read()
	require.ErrorContains(t, err, "write such a hydrogen as an atom")
	s.symbols, s.at, s.bonds = append(s.symbols, "H"), append(s.at, [2]float64{2, 0}), append(s.bonds, [4]int{1, 6, 1, 0})
	require.Equal(t, canonical(t, "c1cc[nH]c1"), smiles.Canonical(readOne(t, s.file(ctfile.V2000)).Molecule))
}
