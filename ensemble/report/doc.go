// Package report writes ranked minima: as the JSON document of the command line and the API, as SDF, XYZ and CSV, and as a table for
// a terminal. In: minima of a search or a library. Out: the one layout of each format. A new column or field is added in document.go
// and in the writers that show it.
package report
