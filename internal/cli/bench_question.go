package cli

import (
	"context"
	"errors"
	"fmt"
	"strings"

	"goodbin/screening"
	"goodbin/screening/entry"
	"goodbin/screening/quantity"
)

// question asks one question of the walk until it is answered, skipped, or a command leads elsewhere.
func (l *lines) question(ctx context.Context, q screening.Question) error {
	if err := l.tellLook(q); err != nil {
		return err
	}
	return l.answer(ctx, prompt(q), func(text string) error {
		if text == "" || text == "+" {
			return l.skip(q)
		}
		if q.Ask == screening.AskLook {
			if faults, err := entry.AnswerLook(q, text); err == nil {
				return l.look(faults)
			}
		}
		if err := l.command(ctx, q, text); !errors.Is(err, errAnswer) {
			return err
		}
		switch q.Ask {
		case screening.AskLook:
			_, err := entry.AnswerLook(q, text)
			return refusal(err)
		case screening.AskClaim:
			return l.claim(q, text)
		}
		return l.reading(ctx, q, text)
	})
}

// prompt words a question, with the unit in which a bare number counts.
func prompt(q screening.Question) string {
	switch q.Ask {
	case screening.AskLook:
		return "look: the digits of what you see, 0 for nothing"
	case screening.AskClaim:
		if q.Need != screening.Required {
			return q.Field.Label + ", which matters here, such as " + q.Field.Example + " (empty: not known)"
		}
		return q.Field.Label + " as printed, such as " + q.Field.Example
	}
	text := q.Field.Label
	if q.Section != "" {
		text += " of section " + q.Section
	}
	if !q.At.IsZero() {
		text += " at " + q.At.String()
	}
	if unit := entry.PromptUnit(q); unit != "" {
		text += ", " + unit
	}
	if q.Why != "" && q.Why != "not measured" {
		text += " (" + q.Why + ")"
	}
	return text
}

// tellLook lists what to look for, a line and a digit each, the first time that a kind is looked at; later ? lists it.
func (l *lines) tellLook(q screening.Question) error {
	if q.Ask != screening.AskLook || l.lookTold == l.book.Kind {
		return nil
	}
	l.lookTold = l.book.Kind
	for i, c := range q.Checks {
		if err := l.say("%d %s", i+1, c.Question); err != nil {
			return err
		}
	}
	return nil
}

// skip leaves a question for later. The volts remaining are never skipped: the part would be touched unasked.
func (l *lines) skip(q screening.Question) error {
	switch {
	case q.Ask == screening.AskGate:
		return again("the volts that remain are measured before the part is touched; type 0 where nothing is left")
	case q.Ask == screening.AskClaim && q.Need == screening.Required:
		return again("nothing can be judged without it; n goes to the next part")
	}
	l.walk.Skip(q)
	l.part.Skipped = append(l.part.Skipped, q.Key())
	return l.say("skipped")
}

func (l *lines) look(faults []string) error {
	l.walk.SeeAll(faults)
	if len(faults) == 0 {
		return l.save("looked: nothing seen")
	}
	if err := l.save("seen: " + strings.Join(faults, ", ")); err != nil || l.walk.Stopped() {
		return err
	}
	j, err := l.walk.Judgement()
	if err != nil {
		return nil // what cannot be judged yet is said where the verdict is
	}
	for _, s := range j.Stops { // what holds the verdict is best seen to before the readings
		if s.Verdict != screening.Undecided || s.Do == "" {
			continue
		}
		if err := l.say("%s", s.Do); err != nil {
			return err
		}
	}
	return nil
}

// claim adds one rating or trait that was missing; the part then has a claim of its own.
func (l *lines) claim(q screening.Question, text string) error {
	more, err := entry.AnswerClaim(l.book, q, text)
	if err != nil {
		return refusal(err)
	}
	claim := l.walk.Part().Claim
	for _, r := range more.Ratings {
		claim = claim.WithRating(r)
	}
	for _, t := range more.Traits {
		claim = claim.WithTrait(t.Name, t.Text)
	}
	header := l.part.Header
	if header == "" {
		header = l.lot.Header
	}
	name := string(q.Field.Name)
	if !q.Field.Trait {
		name = "rated:" + name
	}
	l.part.Header = strings.TrimSpace(fmt.Sprintf("%s %s=%s", header, name, text))
	l.walk.SetClaim(claim)
	return l.save(q.Field.Label + " " + clean(text) + " claimed")
}

// claimMore adds words to what the part claims, "izt=5mA"; it then has a claim of its own.
func (l *lines) claimMore(text string) error {
	header := l.part.Header
	if header == "" {
		header = l.lot.Header
	}
	header = strings.TrimSpace(header + " " + text)
	parsed, err := entry.Words(l.book, strings.Fields(header))
	switch {
	case err != nil:
		return refusal(err)
	case len(parsed.Readings)+len(parsed.Look) > 0:
		return again("a claim and a reading are typed one after the other")
	}
	if _, _, err := complete(l.book, parsed.Claim); err != nil {
		return refusal(err)
	}
	l.part.Header = header
	l.walk.SetClaim(parsed.Claim)
	return l.save("claims " + clean(text))
}

// reading takes one reading. One that looks like a slip of a power of ten is asked about before it is kept.
func (l *lines) reading(ctx context.Context, q screening.Question, text string) error {
	r, err := entry.Answer(q, text)
	if err != nil {
		return refusal(err)
	}
	if alarm, slip := screening.PowerOfTen(l.book, l.walk.Part(), r); slip {
		if r, err = l.confirm(ctx, r, alarm); err != nil {
			return err
		}
	}
	if l.repeating {
		r = l.joined(r)
	}
	err = l.walk.Record(r)
	if err != nil && !errors.Is(err, screening.ErrStillLive) {
		return refusal(err)
	}
	if q.Ask == screening.AskReading {
		l.last = q
	}
	said := q.Field.Label + " " + entry.Value(r)
	if saveErr := l.save(said); saveErr != nil {
		return saveErr
	}
	if coarse := entry.Coarse(r); coarse != "" && q.Ask == screening.AskReading {
		if err := l.say("%s is taken %s", said, coarse); err != nil {
			return err
		}
	}
	if err != nil {
		return l.say("DANGER: the part still carries %s. Do not touch it; discharge it again, then measure the volts that remain", entry.Value(r))
	}
	return nil
}

// confirm asks what a reading was meant to be: as typed, the value that lies in the band, or typed again.
func (l *lines) confirm(ctx context.Context, r screening.Reading, alarm screening.Alarm) (screening.Reading, error) {
	meant := quantity.Format(alarm.Suggested, r.Unit, 3)
	text, err := l.ask(ctx, entry.Value(r)+" lies far off what the part claims; is "+meant+" meant? (y: "+meant+", k: keep "+entry.Value(r)+
		" as read, Enter: type it again)")
	if err != nil {
		return r, err
	}
	switch strings.ToLower(text) {
	case "y", "yes":
		factor := alarm.Suggested / r.Value
		r.Value, r.Step = alarm.Suggested, r.Step*factor
		for i := range r.Repeats {
			r.Repeats[i] *= factor
		}
		return r, nil
	case "k", "keep":
		return r, nil
	case "q", "quit":
		return r, errQuit
	}
	return r, again("type it again")
}

// helpFor is the help at a prompt: what can be typed, what is asked, and how to measure it.
func (l *lines) helpFor(q screening.Question) string {
	if q.Ask == screening.AskNothing {
		return linesKeys
	}
	var b strings.Builder
	switch q.Ask {
	case screening.AskLook:
		for i, c := range q.Checks {
			fmt.Fprintf(&b, "%d %s %s\n", i+1, c.Question, c.Help)
		}
	case screening.AskClaim, screening.AskReading, screening.AskGate:
		fmt.Fprintf(&b, "%s: %s", q.Field.Label, q.Field.Help)
	}
	if q.Limit != nil {
		l.writeLimit(&b, *q.Limit)
	}
	b.WriteString("\n" + linesKeys)
	return b.String()
}

// writeLimit says what a limit allows, why, and how to measure it.
func (l *lines) writeLimit(b *strings.Builder, limit screening.Limit) {
	fmt.Fprintf(b, "\nlimit: %s; %s", screening.Allowed(limit), limit.Source)
	if formula := limit.FormulaText(); formula != "" {
		b.WriteString("\n" + formula)
	}
	if l.book.Recipes == nil {
		return
	}
	j, err := l.walk.Judgement()
	if err != nil {
		return
	}
	for _, r := range l.book.Recipes(j.Part, limit) {
		b.WriteString("\n" + r.Title)
		for _, line := range r.Lines {
			b.WriteString("\n  " + line)
		}
		b.WriteString("\n  source: " + r.Source.String())
	}
}
