package cli

import (
	"errors"
	"slices"

	"goodbin/inventory"
	"goodbin/rules"
	"goodbin/rules/family"
	"goodbin/rules/types"
)

// needNoHouse are the commands that judge nothing and show no verdict.
var needNoHouse = []string{"version", "sampling", "meters", verifyChild, "completion", "bash", "zsh", "fish", "powershell", "no-help"}

// leaveWorkbook are the commands that do not open the workbook themselves: what is wrong with it is said only here.
var leaveWorkbook = []string{"judge", "limits", "marking", "list", "show"}

// loadHouse takes the workbook's own tables into the rulebooks. It takes no lock and never waits: the pages may have the workbook open. Without
// a workbook, or where it cannot be read, the built-in tables count alone; the second is said.
func (a *app) loadHouse(command string) {
	if a.demo || slices.Contains(needNoHouse, command) {
		return
	}
	path, err := a.workbookPath()
	if err != nil {
		return // a command that needs the workbook says so
	}
	h, err := inventory.ReadHouse(path)
	switch {
	case errors.Is(err, inventory.ErrNotFound) || err == nil && h.IsZero():
	case err == nil:
		a.useHouse(h)
	case errors.Is(err, inventory.ErrCorrupt) || errors.Is(err, inventory.ErrBusy) || slices.Contains(leaveWorkbook, command):
		a.env.note("goodbin: only the built-in tables count, those of your own cannot be read: %v", err)
	}
}

// useHouse makes the rulebooks of the built-in tables and these.
func (a *app) useHouse(h inventory.House) {
	house := rules.House{Types: houseRows(h)}
	a.house, a.types = h, types.Builtin().With(house.Types)
	if h.Families != "" {
		var err error
		house.Families, err = family.ReadHouse("your group's list of families", h.Families, rules.With(house))
		if err != nil {
			a.env.note("goodbin: your group's list of families is left out: %v", err)
		}
	}
	a.books = a.kinds(house)
}

// houseRows are the rows of a type table that a workbook keeps.
func houseRows(h inventory.House) []types.Row {
	rows := make([]types.Row, len(h.Types))
	for i, t := range h.Types {
		rows[i] = types.HouseRow(t.Kind, t.Claim, t.Alias, t.Note, t.Source)
	}
	return rows
}
