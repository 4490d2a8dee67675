// Package notation reads molecules in whatever form a user hands them over: one [Input] of a request, or a file with many records.
//
// It picks the notation (smiles, ctfile, xyz) by what was filled in, by file name, or by content, and leaves the reading to those
// packages. A new notation is added to Input and to the table of formats in source.go.
package notation
