package potentiometer

import (
	"fmt"
	"regexp"
	"slices"
	"strings"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// otherTaper is the taper of a part that reads like none of the named ones.
const otherTaper = "other"

// taperText takes no word beside those listed; that it exists lets taper=B through to complete, which says what the letter may mean.
func taperText(string) (string, bool) { return "", false }

// toleranceLetter takes the letters that no taper is printed with.
func toleranceLetter(word string) (low, high float64, ok bool) {
	if !slices.Contains([]string{"G", "J", "K", "M"}, word) {
		return 0, 0, false
	}
	return book.ToleranceLetter(word)
}

// printed is a value with a taper letter before or after it: "B10K", "500KA".
var printed = regexp.MustCompile(`^(?:([A-Z])(\d+(?:\.\d+)?[KkM]?)|(\d+(?:\.\d+)?[KkM])([A-Z]))$`)

// printedMeanings lists what a taper letter, alone or beside a value, may mean.
func printedMeanings(word string) []string {
	letter, value := word, ""
	if m := printed.FindStringSubmatch(word); m != nil {
		letter, value = m[1]+m[4], strings.ToLower(m[2]+m[3])
		value = strings.ReplaceAll(value, "m", "M")
	}
	var meanings []string
	for _, meaning := range load().letters[letter] {
		if value == "" {
			meanings = append(meanings, meaning)
			continue
		}
		if !strings.Contains(meaning, "tolerance") {
			meanings = append(meanings, strings.Replace(meaning, ": type ", ": type "+ohmsToType(value)+" ", 1))
		}
	}
	return meanings
}

// ohmsToType writes a printed number so that it reads as a resistance: "500" becomes "500R".
func ohmsToType(value string) string {
	if strings.Trim(value, "0123456789") == "" {
		return value + "R"
	}
	return value
}

// complete adds the default tolerance, and refuses what contradicts itself and letters that mean two things.
func complete(c screening.Claim) (screening.Claim, []screening.Reason, error) {
	for _, r := range c.Ratings {
		if r.Of == screening.Resistance.Name && !(r.High > 0) {
			return c, nil, fmt.Errorf("resistance: %s is no track; a potentiometer has ohms above zero, such as 10k", r)
		}
	}
	if name := c.Trait(TraitTaper); name != "" && name != otherTaper {
		if _, ok := taperNamed(name); !ok {
			return c, nil, taperError(name)
		}
	}
	if err := book.CheckSections(c); err != nil {
		return c, nil, err
	}
	tech := technologyOf(c)
	t, claimed := c.Rating(screening.Tolerance.Name, "")
	switch {
	case !claimed:
		t = screening.RangeRating(screening.Tolerance, -tech.tolerance, tech.tolerance)
		t.Source = tech.source
		return c.WithRating(t), []screening.Reason{book.Note(screening.Tolerance.Name, "no tolerance claimed: taken as %s, %s", t, t.Source)}, nil
	case t.Low <= -1 || t.High >= 1 || t.Low > 0 || t.High < 0:
		return c, nil, fmt.Errorf("tolerance: %s is no tolerance of a potentiometer; it is a band such as ±20 %%", t)
	}
	return c, nil, nil
}

func taperError(name string) error {
	if meanings := load().letters[strings.ToUpper(name)]; meanings != nil {
		return fmt.Errorf("taper: %q could mean %s; measure the midpoint and leave the taper out where you cannot tell", name,
			strings.Join(meanings, ", or "))
	}
	return fmt.Errorf("taper: %q is not known; one of linear, log, reverse-log, other", name)
}

// total returns the claimed resistance of a section in ohms: its nominal, or of a claimed range the middle.
func total(c screening.Claim, section string) (float64, bool) {
	r, ok := c.Rating(screening.Resistance.Name, section)
	switch {
	case !ok:
		return 0, false
	case r.HasNominal():
		return r.Nominal, true
	}
	middle := (r.Low + r.High) / 2
	return middle, middle-middle == 0
}

func ohms(x float64) string { return quantity.Format(x, quantity.Ohm, 0) }

func percent(x float64) string { return quantity.Format(x, quantity.Ratio, 2) }
