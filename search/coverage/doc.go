// Package coverage estimates from repeated draws how much is still unseen. In: how often each class was drawn. Out: sample coverage
// with an interval, the number of unseen classes with an interval, and the expected growth with further draws.
//
// The formulas assume independent draws from one distribution; what counts as a draw is decided by the caller (search/merge.go).
//
// Sources: I. J. Good, Biometrika 40, 237 (1953); W. W. Esty, Ann. Stat. 11, 905 (1983); A. Chao, Scand. J. Stat. 11, 265 (1984) and
// Biometrics 43, 783 (1987); R. K. Colwell et al., J. Plant Ecol. 5, 3 (2012).
package coverage
