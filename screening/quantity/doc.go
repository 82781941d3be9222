// Package quantity reads the numbers that people type at a bench and prints the numbers that people read.
//
// Inside the program a number is a float64 in SI units. At its edges a number is a text with a prefix and a unit, and at a bench there is
// more than one way to write it: a letter may stand for the decimal sign, an old label says MFD, a meter shows OL. This package is that
// edge, and nothing else in the program knows about prefixes.
//
// A [Value] is one number in the coherent SI unit of its [Unit], with what the text said beside the number: its [Sense] (exactly, at least,
// at most) and the step of its last typed digit, which says how fine the reading was. These are read:
//
//	2200u   2,2m   4k7   R47   2n2   .003 MFD   80 mmf   6V3   <0.1uA   >400V   ..5   5..   OL
//
// What can be read in two ways is refused with both meanings, never guessed: "1,000" (0,061 is not, since zero begins no thousands), "47K"
// on a capacitor, "4 MF", the range "1..2M". Letters keep their case: m is always milli and M mega, K is kilo as k is and never kelvin,
// 2min is two minutes and 2m two milliseconds. Only words of print that carry their prefix in them (MFD, MMF, UF, PF, MEG) are read in
// any case. Whether a value makes sense for a part is not asked here.
//
// Every refusal is an [*Error]: one sentence with the text, what is wrong with it and what would be right, safe to put on a screen.
//
// [Short] prints what [Parse] reads back. [Value.String] echoes a value with the digits that were typed. Parsing allocates nothing unless
// it fails; printing allocates its string.
package quantity
