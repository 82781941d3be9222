// Package book holds what the rulebooks share: the stop that is in every one of them, the reader for their embedded tables, tolerance
// letters, and the warning for stored charge.
package book
