// Package quantity reads the numbers that people type at a bench and prints the numbers that people read.
//
// A [Value] is one number in the coherent SI unit of its [Unit], with its [Sense] (exactly, at least, at most) and the step of its last
// typed digit. Between the bench and this package stand prefixes, letter-and-digit values, old print and the decimal comma:
//
//	2200u   2,2m   4k7   R47   2n2   .003 MFD   80 mmf   6V3   <0.1uA   >400V   OL
//
// What can be read in two ways is refused with both meanings, never guessed: "1,000", "47K" on a capacitor, "4 MF". `m` is always milli
// and `M` mega, `K` is kilo and never kelvin, `2min` is two minutes and `2m` two milliseconds.
//
// [Parse] and [Short] are inverses. Parsing allocates nothing unless it fails.
package quantity
