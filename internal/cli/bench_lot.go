package cli

import (
	"context"
	"errors"
	"fmt"
	"strconv"
	"strings"

	"goodbin/inventory"
	"goodbin/screening"
	"goodbin/screening/entry"
	"goodbin/tui"
)

// benchPage is the name of the bench in the workbook's position, which both faces share.
const benchPage = "bench"

// run goes on where the person was, then from lot to lot until they quit.
func (l *lines) run(ctx context.Context) error {
	if err := l.say("goodbin, line by line; ? says more of what is asked, h lists the commands, q leaves"); err != nil {
		return err
	}
	resumed, err := l.resume()
	if err != nil {
		return err
	}
	for {
		if !resumed {
			if err := l.newLot(ctx); err != nil {
				return err
			}
		}
		resumed = false
		if err := l.parts(ctx); !errors.Is(err, errLot) {
			return err
		}
	}
}

// resume opens the lot and part at which the person was; it reports false where there is none.
func (l *lines) resume() (bool, error) {
	at := l.w.Position()
	if at.Lot == 0 {
		return false, nil
	}
	lot, err := l.w.Lot(at.Lot)
	if errors.Is(err, inventory.ErrNotFound) {
		return false, nil
	}
	if err != nil {
		return false, err
	}
	book, ok := l.books.Find(lot.Kind)
	if !ok {
		return false, nil
	}
	l.lot, l.book = lot, book
	l.part = inventory.Part{ID: inventory.ID{Lot: lot.ID}}
	if !at.Part.IsLot() && at.Part.Lot == lot.ID {
		part, err := l.w.GetPart(at.Part)
		if err != nil && !errors.Is(err, inventory.ErrNotFound) {
			return false, err
		}
		if err == nil {
			l.part = part
		}
	}
	return true, l.say("going on with lot %d: %s %s; l begins another lot", lot.ID, lot.Kind, lotTitle(lot))
}

func lotTitle(lot inventory.Lot) string {
	if lot.Mixed || lot.Claim.IsZero() {
		return "mixed"
	}
	return lot.Claim.String()
}

// newLot asks for the header of a lot, once, and keeps it.
func (l *lines) newLot(ctx context.Context) error {
	lot := inventory.Lot{}
	decoded, err := l.askKind(ctx)
	if err != nil {
		return err
	}
	lot.Kind = l.book.Kind
	if err := l.askHeader(ctx, &lot, decoded); err != nil {
		return err
	}
	for _, more := range []struct {
		prompt string
		to     *string
	}{{"where they will lie, such as shelf B (empty: not said)", &lot.Place}, {"where they come from, such as bequest (empty: not said)", &lot.Source}} {
		err := l.answer(ctx, more.prompt, func(text string) error {
			if done, err := l.common(text, linesHelp); done || err != nil {
				return err
			}
			*more.to = clean(text)
			return nil
		})
		if err != nil {
			return err
		}
	}
	if lot, err = l.w.AddLot(lot); err != nil {
		return err
	}
	l.lot, l.part = lot, inventory.Part{ID: inventory.ID{Lot: lot.ID}}
	return l.say("lot %d: %s %s", lot.ID, lot.Kind, lotTitle(lot))
}

// askKind asks what the parts are: a kind, or what is printed on them, of whose meanings one is then picked by its number. It returns the
// words that a marking claims, "" where a kind was named.
func (l *lines) askKind(ctx context.Context) (decoded string, err error) {
	var offered []tui.Meaning
	kinds := "the kinds are " + strings.Join(l.kindNames(), ", ")
	err = l.answer(ctx, "kind, or what is printed on them (? lists the kinds)", func(text string) error {
		if done, err := l.common(text, kinds+"\n"+linesHelp); done || err != nil {
			return err
		}
		if n, err := strconv.Atoi(text); err == nil && n >= 1 && n <= len(offered) {
			m := offered[n-1]
			l.book, _ = l.books.Find(m.Kind)
			decoded = m.Header
			return l.say("%s: %s", m.Kind, m.Text)
		}
		if text == "" {
			return again("a kind, what is printed on them, or unknown where nobody can tell; ? lists the kinds")
		}
		book, err := l.book1(text)
		if err == nil {
			l.book = book
			return nil
		}
		if meanings := l.meanings(text); len(meanings) > 0 {
			offered = meanings
			return l.offer(meanings)
		}
		return refusal(err)
	})
	return decoded, err
}

// offer lists the meanings of a marking by number.
func (l *lines) offer(meanings []tui.Meaning) error {
	var b strings.Builder
	b.WriteString("as a marking it can mean:")
	for i, m := range meanings {
		fmt.Fprintf(&b, "\n  %d %s  %s  (%s)", i+1, m.Kind, m.Text, m.Source)
	}
	b.WriteString("\ntype its number, or a kind")
	return l.sayLines(b.String())
}

// book1 finds a kind by its name or its beginning, where only one begins so.
func (l *lines) book1(name string) (*screening.Rulebook, error) {
	name = strings.ToLower(name)
	var found *screening.Rulebook
	for _, b := range l.books {
		switch {
		case string(b.Kind) == name:
			return b, nil
		case name != "" && strings.HasPrefix(string(b.Kind), name) && found == nil:
			found = b
		case name != "" && strings.HasPrefix(string(b.Kind), name):
			return nil, fmt.Errorf("%q is the beginning of %s and of %s", name, found.Kind, b.Kind)
		}
	}
	if found != nil {
		return found, nil
	}
	return nil, entry.UnknownKind(l.books, name)
}

// askHeader asks what is printed on every part of the lot; nothing makes it a mixed one, whose parts are asked each.
// decoded is what their marking claims already; more may follow.
func (l *lines) askHeader(ctx context.Context, lot *inventory.Lot, decoded string) error {
	prompt := "what is printed on them, such as " + l.book.ExampleClaim() + " (empty: they differ)"
	if decoded != "" {
		prompt = "they claim " + decoded + "; what else is printed on them (empty: nothing)"
	}
	return l.answer(ctx, prompt, func(text string) error {
		if done, err := l.common(text, claimHelp(l.book)+"\n"+linesKeys); done || err != nil {
			return err
		}
		text = strings.TrimSpace(decoded + " " + text)
		if text == "" {
			lot.Mixed = true
			return nil
		}
		parsed, err := l.claimWords(text)
		if err != nil {
			return err
		}
		lot.Header, lot.Claim, l.treat = text, parsed.Claim, parsed.Treated
		return nil
	})
}

// claimWords reads the words of a claim and says how they were taken.
func (l *lines) claimWords(text string) (entry.Parsed, error) {
	parsed, err := entry.Words(l.book, strings.Fields(text))
	switch {
	case err != nil:
		return parsed, refusal(err)
	case len(parsed.Readings) > 0 || len(parsed.Look) > 0:
		return parsed, again("here goes what is printed; readings are asked for later")
	}
	if _, _, err := complete(l.book, parsed.Claim); err != nil {
		return parsed, refusal(err)
	}
	for _, line := range parsed.Echo {
		if err := l.say("  %s", line); err != nil {
			return parsed, err
		}
	}
	return parsed, nil
}

// claimHelp lists what the kind's claims look like.
func claimHelp(book *screening.Rulebook) string {
	var b strings.Builder
	b.WriteString(book.Label + " claims:")
	for _, f := range book.Claims {
		b.WriteString("\n  " + string(f.Name))
		if f.Example != "" {
			b.WriteString(", such as " + f.Example)
		}
		if f.Help != "" {
			b.WriteString(": " + f.Help)
		}
	}
	return b.String()
}

// common takes the commands that every prompt has. done reports that the prompt is to be asked again.
func (l *lines) common(text, help string) (done bool, err error) {
	switch strings.ToLower(text) {
	case "q", "quit":
		return true, errQuit
	case "?":
		return true, l.sayLines(help)
	case "h", "help":
		return true, l.sayLines(linesHelp)
	}
	return false, nil
}

// sayLines says a text of several lines; the prompt is then asked again.
func (l *lines) sayLines(text string) error {
	for line := range strings.Lines(text) {
		if err := l.say("%s", strings.TrimRight(line, "\n")); err != nil {
			return err
		}
	}
	return retry{}
}
