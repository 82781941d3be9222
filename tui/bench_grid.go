package tui

import (
	"slices"
	"strings"

	"github.com/charmbracelet/bubbles/key"
	tea "github.com/charmbracelet/bubbletea"

	"goodbin/inventory"
	"goodbin/screening"
)

// rowClaim is the key of the question what a part of a tin claims; it is the page's own, asked before the walk's.
const rowClaim = "row-claim"

// grid is a lot being measured: a row per part, and the one question that is open.
type grid struct {
	d    *desk
	lot  inventory.Lot
	book *screening.Rulebook

	parts []inventory.Part
	next  uint32 // number of the part that is not kept yet
	cur   int    // the row in hand; len(parts) is the part that is not kept yet
	part  inventory.Part
	walk  *screening.Walk // of the part in hand

	pin    string // key of a question chosen to be answered again; "" is the next one that is open
	again  bool   // the answer joins the readings there are, as a series
	wanted map[inventory.ID]bool

	in      input
	problem error       // why the text as it stands was not taken
	alarm   *alarmState // the text as it stands looks like a slip of a power of ten
	flight  *flight     // the answer on its way to the disk

	// ambient is the temperature stated last in this sitting; the parts that follow take it with their first reading.
	ambient *screening.Reading

	lastPart inventory.ID // the part and question answered last
	lastKey  string
	done     int // the row whose verdict was reached last; -1 while there is none

	columns   []gridColumn
	sectioned bool // some part has sections
	usable    int  // parts of the lot that are accepted or regraded
	rows      table
}

// flight is an answer on its way to the disk.
type flight struct{ text, key string }

// alarmState is the power-of-ten alarm for one text.
type alarmState struct {
	text  string
	alarm screening.Alarm
	read  screening.Reading
}

func (g *grid) saving() bool { return g.flight != nil }

// open shows a lot that was read.
func (g *grid) open(msg lotOpened, book *screening.Rulebook) tea.Cmd {
	same := g.lot.ID == msg.lot.ID
	draft := g.in
	g.lot, g.book, g.parts, g.next = msg.lot, book, msg.parts, msg.next
	g.flight = nil
	if !same {
		g.done, g.rows, g.wanted, g.lastPart, g.lastKey = -1, table{}, map[inventory.ID]bool{}, inventory.ID{}, ""
	}
	g.done = min(g.done, len(g.parts)-1)
	g.findColumns()
	at := len(g.parts)
	if msg.at.Number != 0 {
		if i := slices.IndexFunc(g.parts, func(p inventory.Part) bool { return p.ID == msg.at }); i >= 0 {
			at = i
		}
	}
	switch {
	case msg.column == "" && msg.at.Number == 0:
		g.goOpen(-1)
	case msg.column == "":
		g.take(at)
		if _, open := g.question(); !open {
			g.done = at
			g.goOpen(at)
		}
	default:
		g.take(at)
		if msg.column != stayHere {
			g.pinTo(msg.column)
		}
	}
	if same {
		g.in = draft
	}
	return nil
}

// take brings a row into the hand.
func (g *grid) take(i int) {
	g.cur = max(0, min(i, len(g.parts)))
	if g.cur < len(g.parts) {
		g.part = g.parts[g.cur]
	} else {
		g.part = inventory.Part{ID: inventory.ID{Lot: g.lot.ID}}
	}
	g.walk = g.walkOf(g.part)
	g.pin, g.again = "", false
	g.clear()
}

// clear empties the field.
func (g *grid) clear() { g.in, g.problem, g.alarm = input{}, nil, nil }

// walkOf starts the walk of a part as it is kept.
func (g *grid) walkOf(p inventory.Part) *screening.Walk {
	w := screening.NewWalk(g.book, g.d.policy, inventory.Claimed(p, g.lot))
	for _, q := range w.Questions() {
		if slices.Contains(p.Skipped, q.Key()) {
			w.Skip(q)
		}
	}
	if p.GoOn {
		w.GoOn()
	}
	w.AskWanted(g.wanted[p.ID])
	return w
}

// question is what is asked now; false where nothing is left to ask of the part in hand.
func (g *grid) question() (screening.Question, bool) { return g.questionOf(g.part, g.walk, g.pin) }

func (g *grid) questionOf(p inventory.Part, w *screening.Walk, pin string) (screening.Question, bool) {
	if pin == rowClaim || pin == "" && g.asksRowClaim(p) {
		return screening.Question{Ask: screening.AskClaim, Field: screening.Field{Definition: screening.Definition{Name: rowClaim}}}, true
	}
	if pin != "" {
		for _, q := range w.Questions() {
			if q.Key() == pin {
				return q, true
			}
		}
	}
	q := w.Next()
	if q.Ask == screening.AskNothing || q.Ask == screening.AskClaim && q.Need == screening.Required && slices.Contains(p.Skipped, q.Key()) {
		return q, false
	}
	return q, true
}

// asksRowClaim reports whether a part of a tin must still say what it claims.
func (g *grid) asksRowClaim(p inventory.Part) bool {
	return g.lot.Mixed && p.Header == "" && p.Part.Claim.IsZero() && !slices.Contains(p.Skipped, rowClaim)
}

// keyOf is the key of a question in the page's terms.
func keyOf(q screening.Question) string {
	if q.Ask == screening.AskClaim && q.Field.Name == rowClaim {
		return rowClaim
	}
	return q.Key()
}

// pinTo chooses a question of the part in hand; it does nothing where the walk does not ask it.
func (g *grid) pinTo(key string) bool {
	if key == rowClaim || slices.ContainsFunc(g.walk.Questions(), func(q screening.Question) bool { return q.Key() == key }) {
		g.pin = key
		return true
	}
	return false
}

// openChecks bounds how many rows are looked through for one with a question; a longer lot goes on with a new part.
const openChecks = 2000

// goOpen goes to the first row after one that still has a question: a part begun and not finished, else the part that is not kept yet.
func (g *grid) goOpen(after int) {
	for i := after + 1; i < min(len(g.parts), after+1+openChecks); i++ {
		switch g.parts[i].Outcome.Verdict {
		case screening.Accept, screening.Regrade, screening.Barred, screening.Reject:
			continue
		}
		if _, open := g.questionOf(g.parts[i], g.walkOf(g.parts[i]), ""); open {
			g.take(i)
			return
		}
	}
	g.take(len(g.parts))
}

// barredByClaim reports whether the part in hand is not kept yet and nothing will be asked of it: what it claims bars it.
func (g *grid) barredByClaim() bool {
	j, err := g.walk.Judgement()
	return g.cur == len(g.parts) && err == nil && j.Verdict == screening.Barred
}

// leave ends a special state of the field; false where there is none.
func (g *grid) leave() bool {
	switch {
	case g.alarm != nil || g.problem != nil:
		g.alarm, g.problem = nil, nil
	case g.again:
		g.again, g.pin = false, ""
	case g.pin != "":
		g.pin = ""
		g.clear()
	default:
		return false
	}
	return true
}

func (b *bench) gridKey(msg tea.KeyMsg) tea.Cmd {
	g, k := &b.grid, b.gridKeys
	switch {
	case key.Matches(msg, k.answer.Binding):
		return g.submit()
	case key.Matches(msg, k.recipe.Binding):
		return g.showRecipe()
	case key.Matches(msg, k.findings.Binding):
		return g.showFindings()
	case key.Matches(msg, k.lots.Binding):
		return b.d.listLots()
	case key.Matches(msg, k.newLot.Binding):
		b.startForm(inventory.Lot{})
	case key.Matches(msg, k.claim.Binding):
		g.pinTo(rowClaim)
		g.clear()
		g.in.set(g.claimText())
	case key.Matches(msg, k.up.Binding):
		g.step(-1)
	case key.Matches(msg, k.down.Binding):
		g.step(1)
	case key.Matches(msg, k.first.Binding):
		g.step(-10)
	case key.Matches(msg, k.last.Binding):
		g.step(10)
	case key.Matches(msg, k.next.Binding), key.Matches(msg, k.right.Binding) && len(g.in.text) == 0:
		g.aside(1)
	case key.Matches(msg, k.previous.Binding), key.Matches(msg, k.left.Binding) && len(g.in.text) == 0:
		g.aside(-1)
	default:
		g.typeKey(msg)
	}
	return nil
}

// typeKey takes a key into the field. After an alarm or a refusal the first figure replaces the text, so that the value is simply typed
// again; a letter goes on with it, since what was missing may be the unit.
func (g *grid) typeKey(msg tea.KeyMsg) {
	if (g.alarm != nil || g.problem != nil) && g.startsAnew(msg) {
		g.in = input{}
	}
	if g.in.key(msg) {
		g.alarm, g.problem = nil, nil
	}
}

func (g *grid) startsAnew(msg tea.KeyMsg) bool {
	if msg.Type != tea.KeyRunes || len(msg.Runes) == 0 || g.in.at < len(g.in.text) || strings.Contains(strings.TrimSpace(g.in.String()), " ") {
		return false
	}
	q, _ := g.question()
	return q.Ask == screening.AskLook || strings.ContainsRune("0123456789.,<>+-*/", msg.Runes[0])
}

// step goes to another row, to the same reading there where it was being looked at.
func (g *grid) step(by int) {
	pin := g.pin
	g.take(g.cur + by)
	if pin != "" && g.cur < len(g.parts) {
		g.pinTo(pin)
	}
}

// aside goes to another question of the same part.
func (g *grid) aside(by int) {
	qs := g.walk.Questions()
	if len(qs) == 0 {
		return
	}
	at := -1
	if q, ok := g.question(); ok {
		at = slices.IndexFunc(qs, func(x screening.Question) bool { return x.Key() == q.Key() })
	} else if by < 0 {
		at = len(qs)
	}
	at = max(0, min(at+by, len(qs)-1))
	g.clear()
	g.pin, g.again = qs[at].Key(), false
}

// claimText is what the part in hand claims, as typed.
func (g *grid) claimText() string {
	if g.part.Header != "" {
		return g.part.Header
	}
	return g.lot.Header
}
