package cli

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"goodbin/inventory"
	"goodbin/screening"
	"goodbin/screening/lot"
	"goodbin/screening/quantity"
	"goodbin/screening/sampling"
)

const (
	// leastAble is the fewest parts of which a capability is printed; with fewer the line on too few parts says so.
	leastAble = 5
	// lotDigits is how many significant digits statistics are printed with.
	lotDigits = 4
)

// lotGroups are the sizes of the groups that people match.
var lotGroups = []int{2, 4}

// count returns how many parts have a verdict.
func (v *lotView) count(verdict screening.Verdict) int {
	n := 0
	for _, p := range v.parts {
		if p.Outcome.Verdict == verdict {
			n++
		}
	}
	return n
}

// labelled are lines that begin with a label of one width.
type labelled [][2]string

func (l *labelled) add(label, format string, args ...any) {
	*l = append(*l, [2]string{fmt.Sprintf("%-9s", label), fmt.Sprintf(format, args...)})
}

func (a *app) printLabelled(rows labelled) error {
	for _, r := range rows {
		if err := a.env.wrapped(r[0], r[1]); err != nil {
			return err
		}
	}
	return nil
}

func (a *app) printLot(v *lotView) error {
	head := fmt.Sprintf("lot %d: %s %s", v.lot.ID, v.book.Label, v.lot.Claim)
	if v.lot.Mixed {
		head = fmt.Sprintf("lot %d: %s, mixed: each claim is looked at for itself", v.lot.ID, v.book.Label)
	}
	if err := a.env.strong(strings.TrimSpace(head)); err != nil {
		return err
	}
	var rows labelled
	rows.add("parts", "%s", countsText(len(v.parts), 0, v.count))
	if n := v.count(screening.NoVerdict); n > 0 {
		rows.add("", "%d not judged yet", n)
	}
	if share, usable, decided, ok := v.yield(); ok {
		rows.add("yield", "%d of %d decided are usable, %s; of the whole bag %s to %s (%g %%, %s, if these were drawn at random)", usable, decided,
			yieldText(share.Fraction), yieldText(share.Low), yieldText(share.High), lotConfidence*100, share.Method)
	} else {
		rows.add("yield", "no part is decided yet")
	}
	if err := a.printLabelled(rows); err != nil {
		return err
	}
	for _, g := range v.groups {
		if err := a.printGroup(v, g); err != nil {
			return err
		}
	}
	rows = nil
	for _, r := range v.rows {
		rows.add("again", "%s: %s", idList(r.ids), r.Why)
	}
	if len(v.groups) == 0 {
		rows.add("readings", "none to look at are kept of this lot")
	}
	rows.add("note", "%s", sampling.NotALot)
	if err := a.env.line(""); err != nil {
		return err
	}
	return a.printLabelled(rows)
}

// groupTitle names a characteristic, its section, its condition and, where the lot does not claim the same, its claim.
func (v *lotView) groupTitle(g *lotGroup) string {
	title := v.book.Definition(g.of).Label
	if g.section != "" {
		title += " of section " + g.section
	}
	if !g.at.IsZero() {
		title += " at " + g.at.String()
	}
	if v.lot.Mixed || g.claim != v.lot.Claim.String() {
		title += " of parts that claim " + g.claim
	}
	return title
}

func (a *app) printGroup(v *lotView, g *lotGroup) error {
	if err := a.env.line(""); err != nil {
		return err
	}
	if err := a.env.strong(v.groupTitle(g)); err != nil {
		return err
	}
	if err := a.printLabelled(groupStatistics(g)); err != nil {
		return err
	}
	if g.readings.Len() > 1 {
		if err := a.printHistogram(g); err != nil {
			return err
		}
	}
	var rows labelled
	for _, o := range g.readings.Outliers(g.limits) {
		where := "outside the limits"
		switch {
		case g.from == nil:
			where = "no limit to hold it against"
		case o.Within:
			where = "within the limits all the same"
		}
		why := o.Why
		if !strings.Contains(why, o.Test) {
			why += " (" + o.Test + ")"
		}
		rows.add("outlier", "%s, %s: %s", g.ids[o.Index], where, why)
	}
	for _, s := range g.suspicions {
		why := s.Why
		if s.Kind != lot.UnitSlip && s.Kind != lot.TwoPopulations {
			why += " (parts are taken as measured in the order of their numbers)"
		}
		if len(s.ids) == 0 {
			rows.add("doubt", "%s", why)
			continue
		}
		rows.add("again", "%s: %s", idList(s.ids), why)
	}
	if few := tooFew(g); few != "" {
		rows.add("too few", "%s", few)
	}
	v.addForecasts(g, &rows)
	return a.printLabelled(rows)
}

// groupStatistics words spread, what was left out, limits and capability.
func groupStatistics(g *lotGroup) labelled {
	var rows labelled
	show := func(x float64) string { return quantity.Format(x, g.unit, lotDigits) }
	s := g.readings.Summary()
	switch s.N {
	case 0:
		rows.add("spread", "no exact reading counts")
	case 1:
		rows.add("spread", "one part: %s", show(s.Median))
	default:
		rows.add("spread", "%s: median %s, robust sigma %s, from %s to %s", counted(s.N), show(s.Median), show(s.RobustSigma), show(s.Min), show(s.Max))
	}
	for _, out := range []struct {
		ids []inventory.ID
		why string
	}{
		{g.barred, "barred"},
		{g.rejected, "rejected"},
		{g.slipped, "a power of ten off, to be measured again"},
		{g.bounded, "without an exact value"},
	} {
		if len(out.ids) > 0 {
			rows.add("left out", "%d %s: %s", len(out.ids), out.why, idList(out.ids))
		}
	}
	if g.from == nil {
		rows.add("limits", "none: %s", g.limitsWhy)
	}
	for _, l := range g.from {
		rows.add("limits", "%s; %s", screening.Allowed(l), l.Source)
	}
	if g.from != nil && s.N >= leastAble {
		rows.add("able", "%s", capabilityText(g))
	}
	return rows
}

func capabilityText(g *lotGroup) string {
	c, err := g.readings.Capability(g.limits)
	if err != nil {
		return strings.TrimPrefix(err.Error(), "capability: ")
	}
	text := fmt.Sprintf("Ppk %.2f, at least %.2f with 95 %%", c.Ppk, c.PpkLow)
	if !math.IsNaN(c.Pp) {
		text += fmt.Sprintf("; Pp %.2f", c.Pp)
	}
	if !math.IsInf(c.RobustPpk, 0) && !math.IsNaN(c.RobustPpk) {
		text += fmt.Sprintf("; without stragglers Ppk %.2f", c.RobustPpk)
	}
	return text + fmt.Sprintf("; %d of %d read outside, %s expected if the lot is normal", c.Outside, g.readings.Len(), expectedText(c.Expected))
}

// expectedText prints a small fraction no finer than a normal tail can be believed.
func expectedText(fraction float64) string {
	const least = 1e-5
	if fraction < least {
		return "less than " + percentText(least)
	}
	return percentText(fraction)
}

// yieldText prints a share in percent with the digits that keep it apart from all.
func yieldText(fraction float64) string {
	digits := 3
	for fraction < 1 && digits < 12 && strconv.FormatFloat(fraction*100, 'g', digits, 64) == "100" {
		digits++
	}
	return strconv.FormatFloat(fraction*100, 'g', digits, 64) + " %"
}

// lotTests are what takes a number of parts, and how many.
var lotTests = []struct {
	n    int
	what string
}{
	{2, "a spread"},
	{4, "outliers"},
	{leastAble, "unit slips and capability"},
	{10, "drift and two populations"},
	{20, "part average testing"},
}

// tooFew says what the parts at hand do not suffice for; "" where they do for everything.
func tooFew(g *lotGroup) string {
	var missing []string
	for _, t := range lotTests {
		if g.readings.Len() < t.n {
			missing = append(missing, fmt.Sprintf("%s from %d", t.what, t.n))
		}
	}
	if missing == nil {
		return ""
	}
	return fmt.Sprintf("%s here; it takes more for %s", counted(g.readings.Len()), strings.Join(missing, ", "))
}

// addForecasts says how many more parts a pair and a quad take.
func (v *lotView) addForecasts(g *lotGroup, rows *labelled) {
	said := ""
	for _, size := range lotGroups {
		name := map[int]string{2: "pair", 4: "four"}[size]
		f, have, err := v.forecast(g, size)
		if err != nil {
			rows.add(name, "within %s: %s", percentText(v.within), strings.TrimPrefix(err.Error(), "group: "))
			break // and the larger ones for the same reason
		}
		if f.Have != nil {
			rows.add(name, "within %s: %s", percentText(v.within), idList(have))
			continue
		}
		rows.add(name, "within %s: measure %s more for an even chance, %s for nine in ten", percentText(v.within), atMost(f.Likely, f.Most), atMost(f.Sure, f.Most))
		said = f.Assumption
	}
	if said == "" {
		return
	}
	if _, known := v.left(); known {
		said += fmt.Sprintf("; %s of the lot are left", v.lot.Count)
	} else {
		said += "; how many are left in the bag is not recorded"
	}
	rows.add("assuming", "%s", said)
}

// atMost prints a forecast's number; above what was looked ahead it is only known to be more.
func atMost(n, most int) string {
	if n > most {
		return "over " + strconv.Itoa(most)
	}
	return strconv.Itoa(n)
}

// idList prints ids, of many the first.
func idList(ids []inventory.ID) string {
	const most = 12
	texts := idTexts(ids)
	if len(texts) > most {
		return strings.Join(texts[:most], " ") + fmt.Sprintf(" and %d more", len(texts)-most)
	}
	return strings.Join(texts, " ")
}
