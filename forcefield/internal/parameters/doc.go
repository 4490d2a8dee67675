// Package parameters holds the published tables of MMFF94 and MMFF94s, their look-up with step-down to more general
// types, and the empirical rules for what no table lists.
//
// The tables are data files in tables/, each headed by its published source and the meaning and unit of its columns. All
// keys are numeric atom types; a key that reads the same backwards is stored once. Correct a number in the data file, a
// look-up order in lookup.go, a rule in the file of its term (rule_bond.go, rule_angle.go, rule_torsion.go).
package parameters
