// Package inventory is the workbook: one bbolt file that holds every lot, every judged part with its readings, places, counts, history and
// the way back (undo). It knows nothing of rulebooks or screens.
//
// # What is durable when
//
// A call that changes the workbook returns after the change is on the disk (one transaction, one fsync); what it returned an error for did
// not happen at all. A killed process loses nothing that was acknowledged. The position (see [Workbook.SetPosition]) is the exception: it
// travels with the next change or with Close.
//
// # Damage
//
// bbolt has checksums on its two head pages only, and trusts the rest: damage can end the process. So every record carries a checksum over
// its key and itself; Open first reads head pages, list of free pages and the bucket meta by plain reads with every offset checked; [Verify]
// follows every page that way before bbolt walks the file, and then compares every record with every index. Run it in a child process with
// a time limit all the same.
//
// # Layout, schema 2
//
// All integers in keys are big-endian, so that keys sort as numbers do. "Sealed" values are a version byte, a CRC-32C (Castagnoli) of what
// follows, and the payload; see codec.go. Top-level buckets:
//
//	meta             format → "goodbin workbook"; schema → uint32; made → sealed time; position → sealed position
//	lot              lot uint32 → sealed lot (CBOR, integer keys)
//	part             lot uint32, number uint32 → sealed part (CBOR, integer keys)
//	row              the part's key → sealed row: what a list of parts shows and filters by, derived from part and lot
//	part_by_value    kind 0x00 characteristic 0x00 origin, float64, the part's key → verdict byte; of parts in stock: every nominal of the
//	                 claim they are held to (origin 'c') and every reading that stands and is exact (origin 'm')
//	house            tables → sealed tables of the user's group (CBOR, integer keys); new in schema 2
//	journal          sequence uint64 → sealed entry: when, what in words, and the records as they were before (CBOR, integer keys)
//	journal_by_part  the part's key (number 0 for the lot itself, lot 0 for the house tables), sequence uint64 → empty
//
// float64 in keys: the bits, all inverted where negative, else the top bit set; −0 is folded to 0 and NaN has no key. Characteristics,
// variables, units, verdicts and every other enumeration are stored by name, in rows and index by its place in a list that is only ever
// appended to (names.go), so that renumbering one in code never breaks a file.
//
// part and lot are the truth; row, part_by_value and journal_by_part are derived and [Workbook.Reindex] rebuilds them.
//
// # Undo
//
// Every action of the person writes one journal entry in the same transaction. [Workbook.Undo] takes the last one back, [Workbook.Redo] does
// it again; both survive a restart. [UndoLevels] entries keep what undo needs; older ones remain as history. A new action forgets what was
// undone. A stretch of a load is one action; a large one is undone but not done again (load the file again). Not undone, because they are not actions on what the person entered: a backup and an export (files outside the workbook), a
// re-judging under new tables (undo would bring the older verdict back as stale), the position, and a repair of the indexes.
package inventory
