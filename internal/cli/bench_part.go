package cli

import (
	"context"
	"errors"
	"slices"
	"strings"

	"goodbin/inventory"
	"goodbin/screening"
	"goodbin/screening/entry"
	"goodbin/screening/quantity"
)

// parts goes from part to part of the lot until the person quits or begins another lot.
func (l *lines) parts(ctx context.Context) error {
	for {
		switch err := l.onePart(ctx); {
		case errors.Is(err, errGoTo):
		case errors.Is(err, errNext):
			l.part = inventory.Part{ID: inventory.ID{Lot: l.lot.ID}}
		default:
			return err
		}
		l.stand()
	}
}

// stand remembers where the person is.
func (l *lines) stand() {
	l.w.SetPosition(inventory.Position{Page: benchPage, Lot: l.lot.ID, Part: l.part.ID})
}

// onePart asks everything of one part, tells the verdict, and waits for what to do next. It ends with an error: errNext for the next part.
func (l *lines) onePart(ctx context.Context) error {
	l.warn, l.last = map[string]bool{}, screening.Question{}
	if err := l.beginPart(ctx); err != nil {
		return err
	}
	for {
		q := l.walk.Next()
		if q.Ask == screening.AskNothing {
			if err := l.tellVerdict(); err != nil {
				return err
			}
			if err := l.afterVerdict(ctx); err != nil {
				return err
			}
			continue
		}
		if err := l.tellCautions(q); err != nil {
			return err
		}
		if err := l.question(ctx, q); err != nil {
			return err
		}
	}
}

// beginPart names the part, asks the claim of a part in a mixed lot, and starts the walk.
func (l *lines) beginPart(ctx context.Context) error {
	if err := l.say("part %s", l.name()); err != nil {
		return err
	}
	if l.lot.Mixed && l.part.Header == "" {
		err := l.answer(ctx, "what is printed on it, such as "+l.book.ExampleClaim(), func(text string) error {
			if done, err := l.common(text, claimHelp(l.book)+"\n"+linesKeys); done || err != nil {
				return err
			}
			switch strings.ToLower(text) {
			case "l", "lot":
				return errLot
			}
			parsed, err := l.claimWords(text)
			if err != nil {
				return err
			}
			l.part.Header, l.part.Part.Claim, l.part.Part.Treated = text, parsed.Claim, parsed.Treated
			return nil
		})
		if err != nil {
			return err
		}
	} else if l.part.ID.IsLot() {
		l.part.Part.Treated = l.treat
	}
	l.startWalk()
	return nil
}

// startWalk makes the walk of the part as it is kept.
func (l *lines) startWalk() {
	l.walk = screening.NewWalk(l.book, l.policy, inventory.Claimed(l.part, l.lot))
	if l.part.GoOn {
		l.walk.GoOn()
	}
	for _, q := range l.walk.Questions() {
		if slices.Contains(l.part.Skipped, q.Key()) {
			l.walk.Skip(q)
		}
	}
}

// name is the part's id, or the one that it will get.
func (l *lines) name() string {
	id := l.part.ID
	if id.IsLot() {
		if n, err := l.w.NextNumber(l.lot.ID); err == nil {
			id.Number = n
		}
	}
	return id.String()
}

// save keeps the part as the walk has it. It returns when the part is on the disk.
func (l *lines) save(action string) error {
	p := l.part
	p.Part = l.walk.Part()
	claim := p.Part.Claim
	if p.Header == "" && !l.lot.Mixed {
		p.Part.Claim = screening.Claim{}
	}
	if j, err := l.walk.Judgement(); err == nil {
		p.Outcome = inventory.Summarise(j, claim.String(), l.env.Now())
	}
	l.stand()
	saved, err := l.w.SavePart(p, action)
	if err != nil {
		return err
	}
	l.part = saved
	l.saved++
	l.stand()
	return l.say("saved %s %s", saved.ID, action)
}

// tellCautions says each caution once a part, before the step it is about.
func (l *lines) tellCautions(q screening.Question) error {
	cautions := q.Cautions
	if q.Ask == screening.AskReading && q.Field.UnderVoltage && l.book.Cautions != nil {
		if j, err := l.walk.Judgement(); err == nil {
			cautions = append(slices.Clip(cautions), l.book.Cautions(j.Part, screening.AtMeasure)...)
		}
	}
	for _, c := range cautions {
		if l.warn[c.Text] {
			continue
		}
		l.warn[c.Text] = true
		if err := l.env.printCaution(c); err != nil {
			return err
		}
	}
	return nil
}

// tellVerdict says the verdict, why, and what next.
func (l *lines) tellVerdict() error {
	j, err := l.walk.Judgement()
	if err != nil {
		return l.say("cannot be judged yet: %s", err)
	}
	l.ring(j.Verdict)
	if err := l.say("%s: %s", l.name(), verdictLine(j)); err != nil {
		return err
	}
	if err := l.printWhy(j, l.book); err != nil {
		return err
	}
	return l.tellCautions(screening.Question{Cautions: j.Cautions})
}

// afterVerdict waits for what to do with a part of which nothing more is asked.
func (l *lines) afterVerdict(ctx context.Context) error {
	prompt := "next part: Enter (b back, r repeat, w ask what is wanted too, l another lot, q quit)"
	if j, err := l.walk.Judgement(); err == nil && j.Verdict == screening.Treat {
		prompt = "next part: Enter (once it is treated: treated=1, then the readings anew, NAME=VALUE; b back, w ask what is wanted too, q quit)"
	}
	if l.walk.Stopped() {
		prompt = "next part: Enter (g go on with this one, b back, r repeat, l another lot, q quit)"
	}
	return l.answer(ctx, prompt, func(text string) error {
		if text == "" {
			if err := l.keepBarred(); err != nil {
				return err
			}
			return errNext
		}
		return l.command(ctx, screening.Question{}, text)
	})
}

// keepBarred keeps a part that its claim bars, of which nothing was asked.
func (l *lines) keepBarred() error {
	j, err := l.walk.Judgement()
	if !l.part.ID.IsLot() || err != nil || j.Verdict != screening.Barred {
		return nil
	}
	return l.save("barred by what it claims")
}

// command takes a command or, where it is none, words that were not asked for.
func (l *lines) command(ctx context.Context, q screening.Question, text string) error {
	if done, err := l.common(text, l.helpFor(q)); done || err != nil {
		return err
	}
	switch strings.ToLower(text) {
	case "n", "next":
		return errNext
	case "l", "lot":
		return errLot
	case "b", "back", "-":
		return l.back()
	case "r", "repeat", "*":
		return l.repeat(ctx)
	case "w", "wanted":
		l.walk.AskWanted(true)
		return nil
	case "g", "go", "go on":
		l.goOn()
		return nil
	case "/":
		if l.walk.Stopped() {
			l.goOn()
		} else {
			l.walk.Unskip()
			l.walk.AskWanted(true)
		}
		return nil
	}
	if id, err := inventory.ParseID(text); err == nil && strings.Contains(text, "-") {
		return l.goTo(id)
	}
	if strings.Contains(text, "=") {
		return l.unasked(text)
	}
	if q.Ask == screening.AskNothing {
		return again("nothing is asked; Enter goes to the next part, ? is help")
	}
	return errAnswer
}

func (l *lines) goOn() {
	l.part.Skipped, l.part.GoOn = nil, true
	l.walk.GoOn()
	l.walk.Unskip()
}

// goTo brings another part of the lot into the hand.
func (l *lines) goTo(id inventory.ID) error {
	if id.Lot != l.lot.ID {
		return again("%s lies in another lot; this is lot %d", id, l.lot.ID)
	}
	part, err := l.w.GetPart(id)
	if errors.Is(err, inventory.ErrNotFound) {
		return again("there is no part %s yet", id)
	}
	if err != nil {
		return err
	}
	l.part = part
	return errGoTo
}

// errAnswer says that a text is no command.
var errAnswer = errors.New("an answer")

// back takes the last answer back.
func (l *lines) back() error {
	before := l.walk.Part()
	if !l.walk.Retract() {
		return again("nothing of this part is left to take back")
	}
	what := "a look"
	if n := len(before.Readings); n > 0 {
		r := before.Readings[n-1]
		what = l.book.Definition(r.Of).Label + " " + entry.Value(r)
	}
	l.part.Skipped = nil
	return l.save("took back " + what)
}

// repeat asks for the reading answered last again; the values become one series, which supersedes what was read before.
func (l *lines) repeat(ctx context.Context) error {
	if l.last.Ask != screening.AskReading {
		return again("no reading was taken yet that could be repeated")
	}
	l.repeating = true
	defer func() { l.repeating = false }()
	return l.question(ctx, l.last)
}

// joined makes one series of a reading and the one it repeats. A bound cannot be averaged: then the new reading alone stands.
func (l *lines) joined(r screening.Reading) screening.Reading {
	before, ok := l.walk.Part().Reading(r.Of, r.Section)
	if !ok || before.Sense != quantity.Exactly || r.Sense != quantity.Exactly || before.At != r.At {
		return r
	}
	var all []screening.Reading
	for _, x := range []screening.Reading{before, r} {
		values := x.Repeats
		if len(values) == 0 {
			values = []float64{x.Value}
		}
		for _, v := range values {
			one := x
			one.Value, one.Repeats = v, nil
			all = append(all, one)
		}
	}
	series := screening.Series(all...)
	series.Typed = before.Typed + " " + r.Typed
	return series
}

// unasked adds readings and looks that were not asked for.
func (l *lines) unasked(text string) error {
	parsed, err := entry.Words(l.book, strings.Fields(text))
	if err != nil {
		return refusal(err)
	}
	if !parsed.Claim.IsZero() {
		return l.claimMore(text)
	}
	if parsed.Treated > 0 {
		l.part.Part = l.walk.Part()
		l.part.Part.Treated = parsed.Treated
		l.startWalk()
	}
	for _, o := range parsed.Look {
		l.walk.See(o.Check, o.Fault)
	}
	questions := l.walk.Questions()
	for _, r := range parsed.Readings {
		if err := l.walk.Record(entry.Asked(r, questions)); err != nil && !errors.Is(err, screening.ErrStillLive) {
			return refusal(err)
		}
	}
	return l.save(clean(text))
}
