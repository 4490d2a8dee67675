// Package ctfile reads and writes molfiles and SD files, versions V2000 and V3000, as the published CTfile description
// ("CTfile Formats", BIOVIA) lays them down.
//
// A [Reader] streams records and hands out complete molecules: hydrogens added, aromatic bonds (type 4) placed, stereo read
// from coordinates, wedges or parities. [WriteMolfile] and [WriteRecord] write them. What the two versions have in common is
// a table (table.go); version2000.go and version3000.go fill it, build.go turns it into a molecule, drawing.go,
// axis.go and parity.go read its stereo. A new property line is added in the file of its version.
package ctfile
