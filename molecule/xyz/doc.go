// Package xyz reads and writes XYZ files and perceives the molecule that a geometry shows.
//
// A [Reader] streams frames: number of atoms, title, one line an atom. [Perceive] finds the bonds from distances (bonds.go),
// then bond orders and formal charges that satisfy every valence and the total charge (states.go lists what an atom may be,
// assign.go finds the best combination), then the stereo. Preferences between drawings are changed in states.go only.
package xyz
