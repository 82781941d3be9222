package tui

import (
	"errors"
	"fmt"
	"slices"
	"strings"

	tea "github.com/charmbracelet/bubbletea"

	"goodbin/inventory"
	"goodbin/screening"
	"goodbin/screening/entry"
)

// submit takes the text in the field: a command where it is a sign alone, else the answer to the question.
func (g *grid) submit() tea.Cmd {
	text := strings.TrimSpace(g.in.String())
	q, open := g.question()
	switch text {
	case "+":
		return g.skip(q, open)
	case "*":
		if keyOf(q) != rowClaim {
			return g.measureAgain(q)
		}
		if text = g.claimAbove(); text == "" {
			g.problem = errors.New("no part above says what it claims")
			return nil
		}
	case "/":
		return g.goOn()
	case "-":
		g.clear()
		return g.d.goBack(false)
	case "":
		switch {
		case !open && g.barredByClaim():
			return g.save(g.finish(g.part, g.walk), "barred by what it claims", "")
		case !open:
			g.goOpen(g.cur)
		case g.pin != "" && !g.again:
			g.pin = ""
		default:
			g.problem = errors.New("nothing is typed; 0 is an answer, and + skips the question")
		}
		return nil
	}
	p, action, err := g.answered(q, open, text)
	if err != nil {
		g.problem = err
		return nil
	}
	if g.alarm != nil && g.alarm.text == "" {
		g.alarm.text = text
		return nil
	}
	return g.save(p, action, keyOf(q))
}

// save sends a part to the disk. The next question appears when it is there.
func (g *grid) save(p inventory.Part, action, key string) tea.Cmd {
	g.flight = &flight{text: g.in.String(), key: key}
	return g.d.savePart(p, action, "")
}

// answered works out the part with the answer in it, and what the history will say. It changes nothing of the grid but the alarm.
func (g *grid) answered(q screening.Question, open bool, text string) (inventory.Part, string, error) {
	p := g.part
	switch {
	case keyOf(q) == rowClaim:
		return g.withClaim(p, text)
	case strings.Contains(text, "="):
		return g.withWords(p, text)
	case !open:
		return p, "", fmt.Errorf("nothing is left to ask of %s; go to a reading with Left or Right to correct it, / asks what else could be tested",
			g.idText())
	}
	switch q.Ask {
	case screening.AskClaim:
		return g.withMissingClaim(p, q, text)
	case screening.AskLook:
		return g.withLook(p, q, text)
	}
	return g.withReading(p, q, text)
}

// claimAbove is what the nearest part above the one in hand claims, as typed.
func (g *grid) claimAbove() string {
	for i := g.cur - 1; i >= 0; i-- {
		if g.parts[i].Header != "" {
			return g.parts[i].Header
		}
	}
	return ""
}

// withClaim gives the part a claim of its own.
func (g *grid) withClaim(p inventory.Part, text string) (inventory.Part, string, error) {
	parsed, err := entry.Words(g.book, strings.Fields(text))
	if err != nil {
		return p, "", err
	}
	p.Header, p.Part.Claim = text, parsed.Claim
	if parsed.Treated > 0 {
		p.Part.Treated = parsed.Treated
	}
	w := g.walkOf(p)
	if err := g.addParsed(w, parsed); err != nil {
		return p, "", err
	}
	if _, err := w.Judgement(); err != nil {
		return p, "", err
	}
	return g.finish(p, w), "claims " + text, nil
}

// withMissingClaim adds what the claim lacks; the part then has a claim of its own.
func (g *grid) withMissingClaim(p inventory.Part, q screening.Question, text string) (inventory.Part, string, error) {
	if _, err := entry.AnswerClaim(g.book, q, text); err != nil {
		if whole, action, wholeErr := g.withClaim(p, strings.TrimSpace(g.claimText()+" "+text)); wholeErr == nil {
			return whole, action, nil // all that is printed was typed, not only what was asked
		}
		return p, "", err
	}
	name := string(q.Field.Name)
	if !q.Field.Trait {
		name = "rated:" + name
	}
	p, _, err := g.withClaim(p, strings.TrimSpace(g.claimText()+" "+name+"="+strings.ReplaceAll(text, " ", "")))
	return p, q.Field.Label + " " + text + " claimed", err
}

// withWords adds readings and looks that were not asked for: "temperature=24C".
func (g *grid) withWords(p inventory.Part, text string) (inventory.Part, string, error) {
	parsed, err := entry.Words(g.book, strings.Fields(text))
	if err != nil {
		return p, "", err
	}
	if !parsed.Claim.IsZero() { // "izt=5mA": it joins what the part claims
		return g.withClaim(p, strings.TrimSpace(g.claimText()+" "+text))
	}
	if parsed.Treated > 0 {
		p.Part.Treated = parsed.Treated
	}
	w := g.walkOf(p)
	if err := g.addParsed(w, parsed); err != nil {
		return p, "", err
	}
	return g.finish(p, w), text, nil
}

func (g *grid) addParsed(w *screening.Walk, parsed entry.Parsed) error {
	for _, o := range parsed.Look {
		w.See(o.Check, o.Fault)
	}
	questions := w.Questions()
	for _, r := range parsed.Readings {
		if err := w.Record(entry.Asked(r, questions)); err != nil && !errors.Is(err, screening.ErrStillLive) {
			return err
		}
	}
	return nil
}

// withLook answers the look: the digits of what is seen.
func (g *grid) withLook(p inventory.Part, q screening.Question, text string) (inventory.Part, string, error) {
	faults, err := entry.AnswerLook(q, text)
	if err != nil {
		return p, "", err
	}
	w := g.walkOf(p)
	w.SeeAll(faults)
	if len(faults) == 0 {
		return g.finish(p, w), "looked: nothing seen", nil
	}
	return g.finish(p, w), "seen: " + strings.Join(faults, ", "), nil
}

// withReading reads a value. A question answered before is corrected in place; a repeat joins the series.
func (g *grid) withReading(p inventory.Part, q screening.Question, text string) (inventory.Part, string, error) {
	w := g.walkOf(p)
	sp := w.Part()
	before := slices.IndexFunc(sp.Readings, func(r screening.Reading) bool { return r.Of == q.Field.Name && r.Section == q.Section })
	for i := range sp.Readings {
		if sp.Readings[i].Of == q.Field.Name && sp.Readings[i].Section == q.Section {
			before = i
		}
	}
	if g.again && before >= 0 {
		text = joinSeries(sp.Readings[before].Typed, text)
	}
	r, err := entry.Answer(q, text)
	if err != nil {
		return p, "", err
	}
	if !g.again && g.alarm == nil {
		if a, slip := screening.PowerOfTen(g.book, sp, r); slip {
			g.alarm = &alarmState{alarm: a, read: r}
			return p, "", nil
		}
	}
	action := q.Field.Label + " " + entry.Value(r)
	if _, stated := sp.Ambient(); g.ambient != nil && !stated && q.Ask == screening.AskReading {
		_ = w.Record(*g.ambient) // a kind that has no use for a temperature refuses it
	}
	if before >= 0 && q.Ask == screening.AskReading && (g.again || g.pin != "") {
		sp.Readings = slices.Clone(sp.Readings)
		sp.Readings[before] = r
		p.Part = sp
		return g.finish(p, g.walkOf(p)), action, nil
	}
	if err := w.Record(r); err != nil && !errors.Is(err, screening.ErrStillLive) {
		return p, "", err
	}
	return g.finish(p, w), action, nil
}

// joinSeries puts another value behind those typed before, with the condition of the last.
func joinSeries(before, text string) string {
	values, at, _ := strings.Cut(before, "@")
	more, condition, has := strings.Cut(text, "@")
	if has {
		at = condition
	}
	joined := strings.TrimSpace(values) + " " + strings.TrimSpace(more)
	if at != "" {
		joined += "@" + at
	}
	return joined
}

// finish takes the part from its walk and sums up what the judge says of it.
func (g *grid) finish(p inventory.Part, w *screening.Walk) inventory.Part {
	claim := w.Part().Claim
	p.Part = w.Part()
	if p.Header == "" && !g.lot.Mixed {
		p.Part.Claim = screening.Claim{} // the lot's
	}
	if j, err := w.Judgement(); err == nil {
		p.Outcome = inventory.Summarise(j, claim.String(), g.d.now())
	}
	return p
}

// saved goes on once an answer is on the disk.
func (g *grid) saved(msg partSaved) tea.Cmd {
	if g.flight == nil || msg.part.ID.Lot != g.lot.ID {
		return nil
	}
	sent := g.flight
	g.flight = nil
	if g.cur == len(g.parts) {
		g.parts = append(g.parts, msg.part)
	} else {
		if g.parts[g.cur].Outcome.Verdict.Usable() {
			g.usable--
		}
		g.parts[g.cur] = msg.part
	}
	if msg.part.Outcome.Verdict.Usable() {
		g.usable++
	}
	g.next, g.lastPart, g.lastKey = msg.next, msg.part.ID, sent.key
	if at, stated := msg.part.Part.Ambient(); stated {
		g.ambient = &at
	}
	g.take(g.cur)
	g.heldColumns(&msg.part)
	g.askedColumns(g.walk)
	if q, open := g.question(); open {
		if sent.key == q.Key() && q.Ask == screening.AskGate {
			g.d.messages.fail("DANGER: " + remaining(&msg.part) + " remain. Hands off: discharge, measure again")
		}
		return nil
	}
	g.done = g.cur
	j, err := g.walk.Judgement()
	g.goOpen(g.cur)
	if err == nil && g.d.ring != nil {
		return g.d.ring(Bells(j.Verdict))
	}
	return nil
}

// remaining is the voltage that was found on a part last.
func remaining(p *inventory.Part) string {
	r, _ := p.Part.Reading(screening.RemainingVoltage.Name, "")
	return entry.Value(r)
}

// notSaved gives the text back: nothing of it was kept.
func (g *grid) notSaved(err error) {
	if g.flight == nil {
		return
	}
	text := g.flight.text
	g.flight = nil
	g.in.set(text)
	g.problem = err
}

// skip leaves a question for later. The volts remaining are never skipped: the part would be touched unasked.
func (g *grid) skip(q screening.Question, open bool) tea.Cmd {
	switch {
	case !open:
		g.problem = errors.New("nothing is asked that could be skipped")
		return nil
	case q.Ask == screening.AskGate:
		g.problem = errors.New("the volts that remain are asked before the part is touched and cannot be skipped; measure, and type 0 where nothing is left")
		return nil
	}
	key := keyOf(q)
	if q.Ask == screening.AskClaim && key != rowClaim && q.Need == screening.Required {
		g.problem = errors.New("nothing can be judged without it: type it, or lay the part aside and type what the next one claims")
		return nil
	}
	g.clear()
	if !slices.Contains(g.part.Skipped, key) {
		g.part.Skipped = append(slices.Clone(g.part.Skipped), key)
	}
	p, walk := g.part, g.walkOf(g.part)
	g.pin = ""
	if _, more := g.questionOf(p, walk, ""); more || p.ID.Number == 0 && len(p.Part.Look)+len(p.Part.Readings) == 0 {
		g.walk = walk
		return nil
	}
	return g.save(g.finish(p, walk), "skipped "+key, key)
}

// measureAgain asks once more for the reading in focus, or for the one answered last: the values become a series.
func (g *grid) measureAgain(q screening.Question) tea.Cmd {
	g.clear()
	key := g.lastKey
	if g.pin != "" && q.Answered {
		key = g.pin
	} else if i := slices.IndexFunc(g.parts, func(p inventory.Part) bool { return p.ID == g.lastPart }); i >= 0 {
		g.take(i)
	}
	if !g.pinTo(key) || !g.measured(key) {
		g.pin = ""
		g.problem = errors.New("no reading was taken yet that could be repeated")
		return nil
	}
	g.again = true
	return nil
}

// measured reports whether the part in hand holds a reading of a question.
func (g *grid) measured(key string) bool {
	return slices.ContainsFunc(g.walk.Questions(), func(q screening.Question) bool {
		return q.Key() == key && q.Ask == screening.AskReading
	}) && slices.ContainsFunc(g.part.Part.Readings, func(r screening.Reading) bool { return string(r.Of)+"/"+r.Section == key })
}

// goOn continues with a part that is finished: past a stop, with skipped questions, then with what is wanted and not required. On a part
// that is not begun it goes back to the one finished last.
func (g *grid) goOn() tea.Cmd {
	g.clear()
	if g.fresh() && g.done >= 0 {
		g.take(g.done)
	}
	was := g.walk
	g.part.Skipped = nil
	if was.Stopped() {
		g.part.GoOn = true
	} else if g.part.ID.Number != 0 {
		g.wanted[g.part.ID] = true
	}
	g.walk, g.pin = g.walkOf(g.part), ""
	if g.part.ID.Number == 0 {
		g.walk.AskWanted(true)
	}
	switch _, open := g.question(); {
	case !open:
		return g.d.messages.say("nothing more could be tested on " + g.idText())
	case g.fresh():
		return g.d.messages.say("of " + g.idText() + " what is only wanted will be asked as well")
	}
	return nil
}

// fresh reports whether nothing was answered for the part in hand.
func (g *grid) fresh() bool {
	return g.cur == len(g.parts) && len(g.part.Part.Look)+len(g.part.Part.Readings) == 0 && g.part.Header == ""
}

// idText is the id of the part in hand; of a part not kept yet the one that it will get.
func (g *grid) idText() string {
	id := g.part.ID
	if id.Number == 0 {
		id.Number = g.next
	}
	return id.String()
}
