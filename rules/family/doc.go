// Package family is the table of part families that are refused whatever they read, and of those that are not refused for their age alone.
//
// Some parts read well until the day they burn, short or poison somebody: germanium transistors whose cans grow whiskers, oil-filled
// capacitors of unknown date, selenium, beryllia, mercury. No reading tells them from sound ones, so they are told by what they are: a type
// number, a trait, a maker's date, or what can be seen on them. Others are refused only where the circuit asks of them what they cannot
// bear (a dipped tantalum bead straight across a rail), and may be used elsewhere. A user's group adds families of its own: what it never
// keeps, and what it always keeps.
//
// [Attach] makes the families part of a rulebook, so that the one judge stops a part before any number counts; [Barred] answers for a
// position in a circuit.
package family
