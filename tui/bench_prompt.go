package tui

import (
	"fmt"
	"strconv"
	"strings"

	"goodbin/screening"
	"goodbin/screening/entry"
	"goodbin/screening/quantity"
)

// promptHeight is how many lines the prompt takes at least, so that what stands below it does not jump about.
const promptHeight = 4

// drawPrompt writes the question, the field, what was understood, and the cautions of this step. It returns the place of the cursor.
func (g *grid) drawPrompt(w, most int) ([]string, spot) {
	t := g.d.t
	q, open := g.question()
	lines := g.questionLines(q, open, w)
	field, at := g.fieldLine(q, open, w)
	at.y = len(lines)
	lines = append(lines, field)
	lines = append(lines, g.underField(q, open, w, most-len(lines))...)
	warnings := t.cautionLines(g.cautions(q, open), " ", w)
	if room := max(0, most-len(lines)); len(warnings) > room {
		warnings = warnings[:room]
		if room > 0 {
			warnings[room-1] = t.danger.paint(fit(" "+t.g.more+" the rest of this warning: F6", w, t.g.more))
		}
	}
	lines = append(lines, warnings...)
	for len(lines) < promptHeight {
		lines = append(lines, "")
	}
	return lines, at
}

// cautionLines words cautions in full, the gravest first.
func (t *theme) cautionLines(cautions []screening.Caution, indent string, w int) []string {
	var lines []string
	for _, level := range []screening.Level{screening.Danger, screening.Notice} {
		for _, c := range cautions {
			if c.Level != level {
				continue
			}
			for _, l := range wrapHang(indent+strings.ToUpper(level.String())+" ", t.clean(c.Text), w-1, 0, "") {
				if level == screening.Danger {
					lines = append(lines, t.danger.paint(fit(l, w, t.g.more)))
				} else {
					lines = append(lines, t.note.paint(fit(l, w, t.g.more)))
				}
			}
		}
	}
	return lines
}

// questionLines words the question.
func (g *grid) questionLines(q screening.Question, open bool, w int) []string {
	t := g.d.t
	head := " " + g.idText() + "  "
	text, right := g.questionText(q, open)
	right = t.clean(right)
	var lines []string
	for i, l := range wrapHang(head, t.clean(text), w-width(right)-2, 3, t.g.more) {
		if i == 0 {
			lines = append(lines, between(t.strong.paint(l), t.faint.paint(right)+" ", w, t.g.more))
		} else {
			lines = append(lines, t.strong.paint(l))
		}
	}
	return lines
}

// questionText is the question in words, and what stands at the right of it.
func (g *grid) questionText(q screening.Question, open bool) (text, right string) {
	if !open {
		v, _ := g.walk.Judgement()
		if v.Verdict == screening.Treat {
			return "waits: treat it, type treated=1 (2 after the second time), then measure again: Left and Right go to the readings", ""
		}
		if g.barredByClaim() {
			return "is barred by what it claims. Enter keeps it so and goes on", ""
		}
		return "is done: " + v.Verdict.String() + ". Enter goes on, Left and Right correct, / asks for more", ""
	}
	switch {
	case g.flight != nil:
		return "saving", ""
	case keyOf(q) == rowClaim:
		return "what does it claim?", ""
	}
	switch q.Ask {
	case screening.AskClaim:
		if q.Need != screening.Required {
			return "what is its " + q.Field.Label + "? + leaves it open", "it matters here"
		}
		return "the claim lacks the " + q.Field.Label, ""
	case screening.AskGate:
		if len(g.part.Part.Look)+len(g.part.Part.Readings) == 0 {
			return "volts across it now, before it is touched?", "first of all"
		}
		return "volts that remain across it now, before it is touched?", "before going on"
	case screening.AskLook:
		return "look: the digits of what you see, 0 for nothing", ""
	}
	text = q.Field.Label
	if q.Section != "" {
		text += " of section " + q.Section
	}
	if !q.At.IsZero() {
		text += " at " + q.At.String()
	}
	switch {
	case g.again:
		return text + ", once more", "a series"
	case q.Answered:
		return text, "correcting"
	}
	done, all := g.progress()
	return text, q.Need.String() + ", " + strconv.Itoa(done+1) + " of " + strconv.Itoa(all)
}

// progress counts the readings that are answered, and those that are asked.
func (g *grid) progress() (done, all int) {
	for _, q := range g.walk.Questions() {
		if q.Ask == screening.AskReading {
			all++
			if q.Answered {
				done++
			}
		}
	}
	return min(done, max(0, all-1)), all
}

// fieldLine draws the field with its unit, and what the text in it is understood as.
func (g *grid) fieldLine(q screening.Question, open bool, w int) (string, spot) {
	t := g.d.t
	const left = 3
	unit := g.unit(q, open)
	long := q.Ask == screening.AskClaim || strings.Contains(g.in.String(), "=")
	fieldW := 22
	if long || w < 70 {
		fieldW = max(10, min(w-left-width(unit)-3, 60))
	}
	if !long {
		fieldW = min(fieldW, 26)
	}
	text, cursor := g.in.draw(t, fieldW)
	line := " " + t.g.marker + " " + t.field.paint(text) + " " + unit
	used := left + fieldW + 1 + width(unit)
	if room := w - used - 4; room > 8 && keyOf(q) != rowClaim && g.problem == nil && g.alarm == nil {
		line += "   " + t.note.paint(fit(g.echo(q, open), room, t.g.more))
	}
	return line, spot{x: left + cursor}
}

// unit is what a bare number counts in.
func (g *grid) unit(q screening.Question, open bool) string {
	if !open {
		return ""
	}
	switch q.Ask {
	case screening.AskReading:
		return g.d.t.clean(entry.PromptUnit(q))
	case screening.AskGate:
		return "V"
	}
	return ""
}

// commandEcho says what a sign alone would do.
var commandEcho = map[string]string{
	"+": "Enter skips this question",
	"*": "Enter measures the last one again",
	"/": "Enter asks for more of this part",
	"-": "Enter takes the last answer back",
}

// echo is what the text in the field would do.
func (g *grid) echo(q screening.Question, open bool) string {
	t := g.d.t
	text := strings.TrimSpace(g.in.String())
	switch does, isCommand := commandEcho[text]; {
	case text == "":
		return ""
	case text == "*" && keyOf(q) == rowClaim:
		return t.clean("Enter: the same as above, " + g.claimAbove())
	case isCommand:
		return does
	}
	if q.Ask == screening.AskClaim && keyOf(q) != rowClaim {
		c, err := entry.AnswerClaim(g.book, q, text)
		if err != nil {
			return ""
		}
		return t.clean("= " + c.String())
	}
	if strings.Contains(text, "=") || q.Ask == screening.AskClaim {
		parsed, err := entry.Words(g.book, strings.Fields(text))
		if err != nil || len(parsed.Echo) == 0 {
			return ""
		}
		return t.clean(strings.Join(parsed.Echo, "; "))
	}
	if !open {
		return ""
	}
	if q.Ask == screening.AskLook {
		return t.clean(lookEcho(q, text))
	}
	if r, err := entry.Answer(q, text); err == nil {
		echo := "= " + entry.Value(r)
		if !r.At.IsZero() && r.At != q.At {
			echo += " at " + r.At.String()
		}
		if coarse := entry.Coarse(r); coarse != "" {
			echo += ", " + coarse
		}
		return t.clean(echo)
	}
	return ""
}

// underField is the line under the field: what was wrong, the alarm, or how it is measured.
func (g *grid) underField(q screening.Question, open bool, w, room int) []string {
	t := g.d.t
	paintAll := func(k ink, text string, limit int) []string {
		lines := wrapHang("   ", t.clean(text), w-1, limit, t.g.more)
		for i := range lines {
			lines[i] = k.paint(lines[i])
		}
		return lines
	}
	switch {
	case g.problem != nil:
		return paintAll(t.error, errorText(g.problem), 3)
	case g.alarm != nil:
		return paintAll(t.error, alarmText(q, g.alarm), 3)
	case !open:
		return nil
	case keyOf(q) == rowClaim:
		return append(g.understood(w), paintAll(t.faint, g.claimHelp(), 2)...)
	case q.Ask == screening.AskLook:
		return t.lookChoice(q.Checks, w, room)
	case q.Ask == screening.AskClaim:
		return paintAll(t.faint, claimFieldHelp(q.Field), 2)
	case q.Ask == screening.AskGate:
		return paintAll(t.faint, fmt.Sprintf("at most %d V may remain; measure again after discharging", screening.SafeVoltage), 2)
	case q.Why != "" && q.Why != "not measured":
		how := q.Field.Ask // what to do says more than what it is, where there is room for one of them
		if how == "" {
			how = q.Field.Help
		}
		return paintAll(t.label, q.Why+"; "+how, 2)
	}
	return paintAll(t.faint, q.Field.Help, 2)
}

// understood are the lines under a claim that is being typed: what each word is taken for.
func (g *grid) understood(w int) []string {
	text := strings.TrimSpace(g.in.String())
	echo := ""
	if parsed, err := entry.Words(g.book, strings.Fields(text)); err == nil && text != "" {
		echo = "= " + parsed.Claim.String()
	} else if _, isCommand := commandEcho[text]; isCommand {
		q, _ := g.question()
		echo = g.echo(q, true)
	}
	lines := wrapHang("   ", g.d.t.clean(echo), w-1, 2, g.d.t.g.more)
	for i := range lines {
		lines[i] = g.d.t.note.paint(lines[i])
	}
	return lines
}

// claimFieldHelp says what goes into the field of one thing that the claim lacks.
func claimFieldHelp(f screening.Field) string {
	if f.Help == "" {
		return "such as " + f.Example
	}
	return f.Help + "; such as " + f.Example
}

// claimHelp says what goes into the field of a claim.
func (g *grid) claimHelp() string {
	help := "as printed, such as " + g.book.ExampleClaim()
	if g.pin == rowClaim {
		return help + "; the readings stay"
	}
	if above := g.claimAbove(); above != "" {
		help += "; * as above"
	}
	return help + "; + nothing printed"
}

// alarmText asks whether a reading that looks like a slip is meant.
func alarmText(q screening.Question, a *alarmState) string {
	unit := q.Field.Unit
	return fmt.Sprintf("%s would be far out of %s to %s; was %s meant? Enter keeps %s, or type it again",
		entry.Value(a.read), quantity.Format(a.alarm.Low, unit, 3), quantity.Format(a.alarm.High, unit, 3),
		quantity.Format(a.alarm.Suggested, unit, 3), entry.Value(a.read))
}

// cautions are the warnings of this step: before the part is touched, and around a test under voltage.
func (g *grid) cautions(q screening.Question, open bool) []screening.Caution {
	if !open {
		return nil
	}
	switch q.Ask {
	case screening.AskGate:
		return q.Cautions
	case screening.AskReading:
		if len(q.Cautions) > 0 {
			return q.Cautions
		}
		if q.Field.UnderVoltage && g.book.Cautions != nil {
			j, err := g.walk.Judgement()
			if err != nil {
				return nil
			}
			return untold(g.book.Cautions(j.Part, screening.AtMeasure), toldAtGate(g.walk))
		}
	}
	return nil
}
