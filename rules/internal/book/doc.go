// Package book holds what the rulebooks share: the stop that is in every one of them, the reader for their embedded tables, tolerance
// letters, the warning for stored charge, and the small pieces of claims and recipes that are the same whatever the part.
package book
