package molecule

import "math"

// configuration is the value of a binary stereo element: clockwise or cis, counter-clockwise or trans.
type configuration uint8

const (
	unspecified configuration = iota
	counterclockwise
	clockwise
)

func (c configuration) flipped() configuration {
	if c == unspecified {
		return c
	}
	return counterclockwise + clockwise - c
}

func configurationOf(clockwiseOrCis bool) configuration {
	if clockwiseOrCis {
		return clockwise
	}
	return counterclockwise
}

// Neighbours of a stereo element that are no vertices of the graph.
const (
	foldedHydrogen = -1
	emptyPlace     = -2 // lone pair
)

// stereoElement is a tetrahedral centre or, if axial, a double bond or allene with two neighbours at either end. Exchanging
// two neighbours of a centre, or the two at one end of an axial element, flips the configuration.
type stereoElement struct {
	at        [2]int // the centre twice, or the ends
	axial     bool
	neighbors [4]int // vertices, foldedHydrogen or emptyPlace; ends in pairs
	value     configuration
}

// parity returns the configuration seen with the neighbours in ascending rank; it is not decided if two of them tie.
func (e *stereoElement) parity(rank []int) (configuration, bool) {
	var key [4]int
	for i, n := range e.neighbors {
		switch n {
		case foldedHydrogen:
			key[i] = math.MaxInt - 1
		case emptyPlace:
			key[i] = math.MaxInt
		default:
			key[i] = rank[n]
		}
	}
	odd := false
	for i := range key {
		for j := range i {
			if e.axial && j/2 != i/2 {
				continue
			}
			if key[i] == key[j] {
				return unspecified, false
			}
			if key[j] > key[i] {
				odd = !odd
			}
		}
	}
	if odd {
		return e.value.flipped(), true
	}
	return e.value, true
}
