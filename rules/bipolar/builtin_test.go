package bipolar

import "goodbin/rules/types"

// builtin is the rulebook's functions with the table that the program brings along.
var builtin = rulebook{types.Builtin()}
