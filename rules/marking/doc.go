// Package marking says what is printed on parts: codes, colours, letters, dates.
//
// A print seldom has one meaning. 104 is 100 nF, 100 kΩ or 100 mH; 47K is a resistance, or a capacitance with its tolerance; a date of two
// characters comes back every twenty years. So [Decode] never guesses: it returns every [Meaning] that a known scheme gives the print, the
// likeliest first, each with its scheme, where the scheme is described and how well that is known, and the reason for its place.
//
// # How a print is read
//
// The text is taken apart into pieces (a value, a tolerance letter, a voltage, a dielectric, a date) that stand together as a whole:
// 2A474J is the voltage code 2A, the three-digit code 474 and the letter J. Every way to cover the whole text counts; a text of which a
// piece is left over has no meaning. Colours are read apart, in both directions.
//
// Values are SI. A tolerance is the low and the high value it implies, so that "below 10 pF the letter means picofarads" is settled here
// and nowhere else.
//
// # Where to add something
//
// What a letter or a colour stands for is a row in one of the embedded tables, with source and status. A scheme is a row in schemes.csv
// (its name, what it gives, the kinds of part that carry it, its place in the order, the reason for that place) and a function that
// recognises it. The tables are read once; there is no other state, and the day is handed in.
package marking
