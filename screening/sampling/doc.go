// Package sampling says how many parts of a lot to test and how many bad ones refuse it.
//
// Three ways, from the trade's own books: the single plans of MIL-STD-105E (the same tables as ISO 2859-1 and Z1.4), looked up by code
// letter and AQL; acceptance on zero, where the smallest sample is computed for this very lot (hypergeometric); and Wald's sequential
// test, which says after each part: go on, accept, or stop. How good a plan is, its operating characteristic says: the chance that a lot
// with so many bad parts is accepted.
//
// A sample speaks for the parts it was drawn from at random, and for no others; see [NotALot].
//
// Tables stand in embedded CSV files with source and status. Fractions bad are 0 to 1; an AQL is in percent, as the tables head it.
package sampling

// NotALot is what a person must know before sampling anything salvaged.
const NotALot = "a lot for sampling is parts of one maker, one type and one history, and the sample is drawn from it at random; a donated box is not a lot: " +
	"sort it by maker, type and origin, or test every part"
