// Package tui is goodbin's full-screen interface: the Bench page, where parts are measured and judged, and the Stock page, where they are
// found again. It is built on Bubble Tea; nothing outside this package knows that.
//
// # How it is put together
//
// One root model (root.go) holds the window's size, the page in front, the overlays and the message line, and hands every message to
// exactly one of them. A page is a plain struct with an update and a draw method; it draws itself as lines of text that are exactly as
// wide as it was told, so that pages and panes are put together by joining lines. Pages hold no rules and no arithmetic of the trade:
// which question comes next is [goodbin/screening.Walk]'s, what a typed text means is package entry's, what is kept is the workbook's.
//
// The workbook is touched only by commands (store.go), never while a message is handled or a frame is drawn. A reading is on disk before
// the next prompt appears; keys that arrive meanwhile wait and are not lost.
//
// # What may reach the screen
//
// Every text that was typed or comes from a file passes through theme.clean before it is drawn: control characters, terminal escapes and
// characters that reorder or hide text become visible stand-ins. In ASCII mode the same function spells every sign in ASCII.
package tui
