package cli

import (
	"io"
	"time"

	"goodbin/screening"
)

// Env is what the program runs in; tests give their own.
type Env struct {
	In      io.Reader
	Out     io.Writer
	Err     io.Writer
	Now     func() time.Time
	Getenv  func(string) string
	DemoBox []byte                // the CSV of the invented box
	Kinds   []*screening.Rulebook // kinds beyond the program's own; every face takes them from their fields alone

	InTerminal, OutTerminal, ErrTerminal bool
	Width, Height                        int    // of the terminal in cells; 0 where unknown
	Executable                           string // path of this program, which verify starts again as its child

	ascii bool // spell every sign in ASCII
	plain bool // no colour and no bold
}

// settle takes over what flags and environment say of the output.
func (e *Env) settle(ascii bool) {
	e.ascii = ascii || e.OutTerminal && !e.unicodeLocale()
	e.plain = !e.OutTerminal || e.Getenv("NO_COLOR") != "" || e.dumb()
}

// dumb reports whether the terminal can only print lines.
func (e *Env) dumb() bool { return e.Getenv("TERM") == "dumb" }

// unicodeLocale reports whether the locale's encoding is UTF-8; where no locale is set at all it is taken to be.
func (e *Env) unicodeLocale() bool {
	for _, name := range []string{"LC_ALL", "LC_CTYPE", "LANG"} {
		if v := e.Getenv(name); v != "" {
			return containsFold(v, "utf-8") || containsFold(v, "utf8")
		}
	}
	return true
}
