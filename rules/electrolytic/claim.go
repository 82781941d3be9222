package electrolytic

import (
	"fmt"
	"math"
	"regexp"
	"strconv"
	"strings"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// The cases that a part can have.
const (
	caseRadial = "radial"
	caseAxial  = "axial"
	caseCan    = "can"
	caseSnapIn = "snap-in"
	caseScrew  = "screw"
	caseSMD    = "smd"
)

// traitCanSize is diameter by length in millimetres, "10x20".
const traitCanSize = "can-size"

// traitSeries is what is known of the maker's series; seriesSound lifts the suspicion of the electrolyte fault's years.
const traitSeries, seriesSound = "series", "sound series"

// The ranges that a claim must lie in; beyond them a prefix is wrong.
const (
	leastFarad, mostFarad = 1e-9, 10.0
	leastVolts, mostVolts = 1.0, 1000.0
)

// unit is one section of a part with what it claims.
type unit struct {
	section         string
	farad, volts    float64 // nominal capacitance, rated voltage
	low, high       float64 // tolerance as ratios
	toleranceSource screening.Source
}

// cv returns the charge at rated voltage in coulomb.
func (u unit) cv() float64 { return u.farad * u.volts }

// top returns the worst-case capacitance: the top of the tolerance, farad.
func (u unit) top() float64 { return u.farad * (1 + u.high) }

// units lists the sections of a completed claim. The error names what is missing or impossible.
func units(claim screening.Claim) ([]unit, error) {
	sections := claim.Sections()
	all := make([]unit, 0, len(sections))
	for _, s := range sections {
		u := unit{section: s}
		var err error
		if u.farad, err = nominal(claim, screening.Capacitance, s, "2200uF", leastFarad, mostFarad); err != nil {
			return nil, err
		}
		if u.volts, err = nominal(claim, screening.RatedVoltage, s, "35V", leastVolts, mostVolts); err != nil {
			return nil, err
		}
		t, ok := claim.Rating(screening.Tolerance.Name, s)
		if !ok {
			return nil, fmt.Errorf("tolerance: none is claimed; type one such as M or 20%%")
		}
		if u.low, u.high, err = toleranceBounds(t); err != nil {
			return nil, err
		}
		u.toleranceSource = book.SourceOf(&t)
		all = append(all, u)
	}
	return all, nil
}

func nominal(claim screening.Claim, d screening.Definition, section, example string, least, most float64) (float64, error) {
	r, ok := claim.Rating(d.Name, section)
	of := string(d.Name)
	if section != "" {
		of += " of section " + section
	}
	switch {
	case !ok:
		return 0, fmt.Errorf("%s: none is claimed; type it as printed, such as %s", of, example)
	case !r.HasNominal():
		return 0, fmt.Errorf("%s: %s is a range; an electrolytic claims one value such as %s", of, r, example)
	case r.Nominal < least || r.Nominal > most:
		return 0, fmt.Errorf("%s: %s is beyond any electrolytic; it lies between %s and %s", of, r,
			quantity.Format(least, d.Unit, 0), quantity.Format(most, d.Unit, 0))
	}
	return r.Nominal, nil
}

// toleranceBounds returns the ratios below and above nominal; a single value counts both ways.
func toleranceBounds(r screening.Rating) (low, high float64, err error) {
	low, high = r.Low, r.High
	if r.HasNominal() {
		low, high = -math.Abs(r.Nominal), math.Abs(r.Nominal)
	}
	if math.IsNaN(low) || math.IsNaN(high) || low <= -1 || low > 0 || high < 0 || high > 5 || low == high {
		return 0, 0, fmt.Errorf("tolerance: %s does not enclose the nominal value; type a letter such as M, 20%% or -10+50%%", r)
	}
	return low, high, nil
}

// complete adds the tolerance that a part without a printed one has by its age and case.
func complete(claim screening.Claim) (screening.Claim, []screening.Reason, error) {
	var notes []screening.Reason
	if err := checkTechnology(claim); err != nil {
		return claim, nil, err
	}
	if claim.Trait(screening.TraitDated) != "" {
		if _, ok := claim.Year(); !ok {
			return claim, nil, fmt.Errorf("dated: %q is no year such as 1974 or decade such as 197x", claim.Trait(screening.TraitDated))
		}
	}
	if size := claim.Trait(traitCanSize); size != "" {
		if _, _, ok := canSize(size); !ok {
			return claim, nil, fmt.Errorf("can-size: %q is not diameter by length in millimetres such as 10x20", size)
		}
	}
	for _, r := range claim.Ratings {
		if r.Of != screening.Tolerance.Name {
			continue
		}
		if _, _, err := toleranceBounds(r); err != nil {
			return claim, nil, err
		}
	}
	for _, s := range claim.Sections() {
		if _, ok := claim.Rating(screening.Tolerance.Name, s); ok {
			continue
		}
		r := screening.RangeRating(screening.Tolerance, -named("tolerance-modern").value, named("tolerance-modern").value)
		r.Source = named("tolerance-modern").source
		text := "no tolerance given: ±20 % taken, as on radial parts after 1985"
		if !modernRadial(claim) {
			r.Low, r.High, r.Source = named("tolerance-old-low").value, named("tolerance-old-high").value, named("tolerance-old-high").source
			text = "no tolerance given: −10/+50 % taken, as on old axial and can types (from memory, so it rejects nothing)"
		}
		claim = claim.WithRating(r)
		notes = append(notes, screening.Reason{Code: screening.CodeAssumed, Text: text, Of: screening.Tolerance.Name})
	}
	return claim, notes, nil
}

// modernRadial reports whether ±20 % goes without saying: a radial, snap-in or surface-mount part, or one of unstated case, that is not
// dated before 1985. A part with sections is a can.
func modernRadial(claim screening.Claim) bool {
	year, dated := claim.Year()
	if dated && year < oldBefore || len(claim.Sections()) > 1 {
		return false
	}
	switch claim.Trait(screening.TraitCase) {
	case "", caseRadial, caseSnapIn, caseSMD:
		return true
	}
	return false
}

// largeCan reports whether the case is a snap-in or screw-terminal can, which have limit sets of their own.
func largeCan(claim screening.Claim) bool {
	c := claim.Trait(screening.TraitCase)
	return c == caseSnapIn || c == caseScrew
}

var canSizePattern = regexp.MustCompile(`^(\d{1,3}(?:[.,]\d{1,2})?)\s*[x×X*]\s*(\d{1,3}(?:[.,]\d{1,2})?)(?:\s*mm)?$`)

// canSize reads "10x20": diameter and length in millimetres.
func canSize(text string) (diameter, length float64, ok bool) {
	m := canSizePattern.FindStringSubmatch(strings.TrimSpace(text))
	if m == nil {
		return 0, 0, false
	}
	diameter, err1 := strconv.ParseFloat(strings.ReplaceAll(m[1], ",", "."), 64)
	length, err2 := strconv.ParseFloat(strings.ReplaceAll(m[2], ",", "."), 64)
	return diameter, length, err1 == nil && err2 == nil && diameter >= 2 && length >= 2
}

// acceptCanSize takes a bare word as a can size, in its canonical spelling.
func acceptCanSize(word string) (string, bool) {
	d, l, ok := canSize(word)
	if !ok {
		return "", false
	}
	return fmt.Sprintf("%gx%g", d, l), true
}

var yearPattern = regexp.MustCompile(`^(19|20)\d[\dxX]$`)

// acceptYear takes a bare word as the maker's date: four digits from 1900 to 2099, or a decade such as 197x.
func acceptYear(word string) (string, bool) {
	return strings.ToLower(word), yearPattern.MatchString(word)
}

// canPower returns the watts that warm a claimed can by 10 K: P = 10 K·β·S with β = 2.3 mW/(K·cm²)·S^−0.2 and S = (π/4)·D·(D + 4L) in cm².
func canPower(claim screening.Claim) (watts float64, ok bool) {
	d, l, ok := canSize(claim.Trait(traitCanSize))
	if !ok {
		return 0, false
	}
	d, l = d/10, l/10
	s := math.Pi / 4 * d * (d + 4*l)
	return named("can-heat").value * 2.3e-3 * math.Pow(s, -0.2) * s, true
}
