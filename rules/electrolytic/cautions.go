package electrolytic

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// cautions: the stored charge at every step; what a test under voltage needs while measuring; what re-forming needs with the verdict.
func cautions(part screening.Part, at screening.Moment) []screening.Caution {
	us, err := units(part.Claim)
	if err != nil {
		return nil // nothing is known of it yet; its claim is asked for first
	}
	// Sections of one can share the negative pole: together they hold the sum.
	var farad, top, volts float64
	for _, u := range us {
		farad, top, volts = farad+u.farad, top+u.top(), math.Max(volts, u.volts)
	}
	all := book.StoredCharge(farad, top, volts)
	switch at {
	case screening.AtMeasure:
		all = append(all, underVoltage(part.Claim, us))
	case screening.AtVerdict:
		if fault, _ := part.Seen(bulged); fault {
			return all
		}
		for _, u := range us {
			if leaks(part, u) && part.Treated < mostTreatments && !(inFaultEra(part.Claim) && readHigh(part, u)) {
				return append(all, reforming(part.Claim, u))
			}
		}
	}
	return all
}

// readHigh reports whether capacitance was read above its tolerance, beyond what the meter may be off.
func readHigh(part screening.Part, u unit) bool {
	return slices.ContainsFunc(part.Readings, func(r screening.Reading) bool {
		return r.Of == screening.Capacitance.Name && r.Section == u.section && r.Sense != quantity.AtMost && surelyAbove(&r, u.top())
	})
}

// leaks reports whether what was read of a section points to re-forming: leakage above a limit in use at a voltage no higher and a time no
// shorter than the limit's, or capacitance above its tolerance.
func leaks(part screening.Part, u unit) bool {
	if readHigh(part, u) {
		return true
	}
	for _, r := range part.Readings {
		if r.Section != u.section || r.Sense == quantity.AtMost {
			continue
		}
		if isLeakage(r.Of) && aboveLimitInUse(part.Claim, u, r) {
			return true
		}
	}
	return false
}

// aboveLimitInUse reports whether a leakage reading fails the set in use: a figure that may not reject counts only where a published one is
// passed too, so that no part is accepted and told to be re-formed.
func aboveLimitInUse(claim screening.Claim, u unit, r screening.Reading) bool {
	volts, ok1 := r.At.Get(screening.Voltage)
	after, ok2 := r.At.Get(screening.After)
	if !ok1 || !ok2 || volts > u.volts*nearlyAtRated[screening.Voltage].High {
		return false
	}
	set := leakageSetFor(claim, u)
	rows := embedded().leakage
	for i := range rows {
		row := &rows[i]
		if row.set != set || !row.covers(u) || after < row.after*nearlyAtRated[screening.After].Low || !surelyAbove(&r, row.amperes(u)) {
			continue
		}
		published, ok := publishedLeakage(claim, u, after)
		if row.source.Status.MayReject() || ok && surelyAbove(&r, published) {
			return true
		}
	}
	return false
}

// charging is what puts a voltage on a part without harm: SI values.
type charging struct {
	supply, ohms, watts float64 // rated voltage, series resistance, its watts when the part is a dead short
	current             float64 // the most that may flow once the part has charged
	seconds             float64 // five time constants at worst-case capacitance
	heat                bool    // the can's heat sets the current
}

// chargingOf computes it: above 75 V at least 100 kΩ and the supply over 1 mA, up to 75 V at least 10 kΩ; and never less than the supply over
// what warms the can by 10 K, where the can's size is known.
func chargingOf(claim screening.Claim, u unit) charging {
	c := charging{supply: u.volts, current: named("reform-current").value}
	c.ohms = named("reform-ohms-low").value
	if u.volts > named("reform-volts").value {
		c.ohms = math.Max(named("reform-ohms-high").value, u.volts/c.current)
	}
	if watts, ok := canPower(claim); ok && watts/u.volts < c.current {
		c.current, c.heat = watts/u.volts, true
		c.ohms = math.Max(c.ohms, u.volts/c.current)
	}
	c.ohms = roundUp(c.ohms)
	c.watts = u.volts * u.volts / c.ohms
	c.seconds = 5 * c.ohms * u.top()
	return c
}

// roundUp rounds up to two significant digits.
func roundUp(x float64) float64 {
	scale := math.Pow(10, math.Floor(math.Log10(x))-1)
	return math.Ceil(x/scale*(1-1e-9)) * scale
}

func (c charging) values() map[string]float64 {
	return map[string]float64{
		"supply": c.supply, "series-resistance": c.ohms, "resistor-power": c.watts, "current": c.current, "charge-time": c.seconds,
	}
}

// resistor words the series resistor: "450 kΩ, 1 W or more (0.45 W if the part is a dead short), rated for 450 V".
func (c charging) resistor() string {
	return fmt.Sprintf("%s, %s W or more (%.2g W if the part is a dead short), rated for %s or several in series",
		quantity.Format(c.ohms, quantity.Ohm, 0), rating(2*c.watts), c.watts, quantity.Format(c.supply, quantity.Volt, 0))
}

// rating rounds watts up to a resistor that is sold.
func rating(watts float64) string {
	for _, w := range []float64{0.25, 0.5, 1, 2, 3, 5, 10} {
		if watts <= w {
			return fmt.Sprintf("%g", w)
		}
	}
	return fmt.Sprintf("%.0f", math.Ceil(watts/5)*5)
}

func levelOf(volts float64) screening.Level {
	if volts > book.TouchVoltage {
		return screening.Danger
	}
	return screening.Notice
}

const highVoltageHelp = " Use an isolated supply, one hand, a shield over the part and eye protection, and somebody near; supplies from the mains " +
	"and high voltage: your local code and licensed practice."

// underVoltage is the caution before and after a leakage reading.
func underVoltage(claim screening.Claim, us []unit) screening.Caution {
	u := us[0]
	for _, x := range us {
		if x.volts > u.volts {
			u = x
		}
	}
	c := chargingOf(claim, u)
	wayRound := "plus to plus (reversed by more than 1 V it can burst)"
	if nonPolar(claim) {
		wayRound = "one way round, then discharged, then the other"
	}
	text := fmt.Sprintf("leakage puts up to %s on the part: %s, through %s. The resistor limits the "+
		"supply, not the charge that is already in the part: it leaves the test charged, so discharge it and read the volts that remain.",
		quantity.Format(c.supply, quantity.Volt, 0), wayRound, c.resistor())
	if u.volts > book.TouchVoltage {
		text += highVoltageHelp
	}
	return screening.Caution{
		Code: "test-under-voltage", Level: levelOf(u.volts), Text: text, Values: c.values(), Gate: u.volts > book.TouchVoltage,
		Source: named("reform-ohms-high").source,
	}
}

// reforming is the caution that goes with the verdict treat.
func reforming(claim screening.Claim, u unit) screening.Caution {
	c := chargingOf(claim, u)
	var b strings.Builder
	if u.section != "" {
		fmt.Fprintf(&b, "section %s: ", u.section)
	}
	fmt.Fprintf(&b, "re-form only a part that is neither bulged nor leaking. %s, %s, through %s; about %s to charge. ",
		quantity.Format(c.supply, quantity.Volt, 0), connect(claim, screening.Leakage.Name), c.resistor(), duration(c.seconds))
	fmt.Fprintf(&b, "Read the volts across the part itself. Once it is charged at most %s may flow",
		quantity.Format(c.current, quantity.Ampere, 2))
	if c.heat {
		fmt.Fprintf(&b, " (%.2g W warms this can by 10 K)", c.current*c.supply)
	}
	b.WriteString("; hold until the current is steady, at least an hour; stop if it warms or the current rises. The resistor limits the supply, " +
		"not the charge already in the part. Then discharge it, ")
	if nonPolar(claim) {
		b.WriteString("do the same with its leads swapped (from memory), discharge it again, ")
	}
	b.WriteString("read the volts that remain, rest it 12 to 48 h without voltage, and take the leakage reading " +
		"that decides.")
	if u.volts > book.TouchVoltage {
		b.WriteString(highVoltageHelp)
	}
	values := c.values()
	values["rest-min"], values["rest-max"] = named("rest-min").value, named("rest-max").value
	return screening.Caution{
		Code: "re-form", Level: levelOf(u.volts), Text: b.String(), Values: values, Gate: u.volts > book.TouchVoltage,
		Source: named("reform-current").source,
	}
}

func duration(seconds float64) string {
	switch {
	case seconds >= 7200:
		return fmt.Sprintf("%.1f h", seconds/3600)
	case seconds >= 120:
		return fmt.Sprintf("%.0f min", math.Ceil(seconds/60))
	}
	return fmt.Sprintf("%.0f s", math.Ceil(seconds))
}

// untested words what the readings leave open beyond the gaps that are listed anyway: leakage read at a lower voltage only, ESR known only at
// another frequency.
func untested(part screening.Part, findings []screening.Finding) []string {
	us, err := units(part.Claim)
	if err != nil {
		return nil
	}
	var lines []string
	for _, u := range us {
		v := viewOf(part, u, findings)
		of := ""
		if u.section != "" {
			of = " of section " + u.section
		}
		if volts, ok := v.leakageOnlyBelow(); ok {
			lines = append(lines, fmt.Sprintf("leakage%s at its rated %s: read only at %s", of, quantity.Format(u.volts, quantity.Volt, 0),
				quantity.Format(volts, quantity.Volt, 0)))
		}
		for _, f := range v.loss {
			if f.Outcome == screening.Pass && f.Converted != nil && f.Limit.Grade == screening.Serviceable {
				lines = append(lines, fmt.Sprintf("ESR%s at 120 Hz: only bounded by a reading at a higher frequency", of))
			}
		}
	}
	return lines
}

// leakageOnlyBelow returns the highest voltage below the rated one at which leakage was read, where no reading answers a leakage that is
// wanted and not needed. What is needed is asked for as the next step.
func (v *view) leakageOnlyBelow() (volts float64, ok bool) {
	for _, f := range v.leakage {
		if f.Outcome != screening.Missing || f.Need != screening.Wanted {
			return 0, false
		}
	}
	lower := lowerVoltages(v.part, v.unit)
	if len(lower) == 0 || len(v.leakage) == 0 {
		return 0, false
	}
	return lower[0], true
}
