// Package endtoend runs the real program as people do: in a real terminal, through a pipe, and killed between two readings. It holds tests
// only.
package endtoend
