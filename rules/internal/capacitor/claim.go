package capacitor

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

// TraitTolerancePF is the tolerance of a small capacitor in picofarads, as printed: "±0.25 pF". [Complete] turns it into the tolerance.
const TraitTolerancePF = "tolerance-pf"

// picofaradsBelow is the nominal below which tolerance letters stand for picofarads.
const picofaradsBelow = 10e-12

var (
	inPicofarads = screening.Source{
		Document: "IEC 60062 tolerance letters as printed in component lists", Clause: "picofarads below 10 pF", Status: screening.Published,
	}
	// inPicofaradsRecalled is for G, whose meaning below 10 pF no list read prints.
	inPicofaradsRecalled = screening.Source{
		Document: "IEC 60062 tolerance letters", Clause: "G below 10 pF is ±2 pF", Status: screening.FromMemory,
	}
)

// picofaradLetters are what the letters stand for below 10 pF, farad.
var picofaradLetters = map[string]float64{"B": 0.1e-12, "C": 0.25e-12, "D": 0.5e-12, "F": 1e-12, "G": 2e-12}

// CapacitanceClaim is the printed capacitance.
func CapacitanceClaim(example string) screening.Field {
	return screening.Field{
		Definition: screening.Capacitance, Required: true, Example: example, Ambiguous: book.KiloOrTolerance,
		Help: "as printed, with its unit: 100nF, 4n7, 22pF; number codes such as 104 are read by \"marking\"",
	}
}

// VoltageClaim is the printed DC working voltage.
func VoltageClaim(example string, required bool) screening.Field {
	return screening.Field{
		Definition: screening.RatedVoltage, Required: required, Example: example,
		Help: "the DC working voltage as printed; leave it out where none is",
	}
}

// ToleranceClaim is the printed tolerance by letter or percents, asymmetric ones included.
func ToleranceClaim(example string) screening.Field {
	return screening.Field{
		Definition: screening.Tolerance, Example: example, AcceptRange: book.CapacitorToleranceLetter, Ambiguous: book.ToleranceMeanings,
		Help: "letter (J ±5 %, K ±10 %, M ±20 %, Z −20/+80 %; below 10 pF B C D F are picofarads) or percents such as +80-20%",
	}
}

// PicofaradClaim is a tolerance that is printed in picofarads.
func PicofaradClaim() screening.Field {
	return screening.Field{
		Definition: book.Trait(TraitTolerancePF, "tolerance in picofarads"), Trait: true, Example: "±0.5pF", AcceptText: acceptPicofarads,
		Help: "of a small part that prints it so, with its sign: ±0.25pF",
	}
}

// DatedClaim is the maker's year or decade.
func DatedClaim(help string) screening.Field {
	f := book.DatedField()
	f.Help = help
	return f
}

var picofaradPattern = regexp.MustCompile(`^(?:±|\+-|\+/-)\s*(\d{1,3}(?:[.,]\d{1,2})?)\s*[pP][fF]?$`)

// acceptPicofarads takes "±0.25pF" or "+-0.25p", and returns "±0.25 pF".
func acceptPicofarads(word string) (string, bool) {
	x, ok := picofarads(word)
	if !ok {
		return "", false
	}
	return "±" + quantity.Format(x, quantity.Farad, 0), true
}

func picofarads(text string) (farad float64, ok bool) {
	m := picofaradPattern.FindStringSubmatch(strings.TrimSpace(text))
	if m == nil {
		return 0, false
	}
	x, err := strconv.ParseFloat(strings.ReplaceAll(m[1], ",", "."), 64)
	return x * 1e-12, err == nil && x > 0
}

// Default is the tolerance that a part has which prints none.
type Default struct {
	Low, High float64 // ratios
	Source    screening.Source
}

// Complete checks dates, ranges and tolerances of a claim, reads tolerances in picofarads, and adds the default where none is printed. It is
// idempotent.
func Complete(claim screening.Claim, span Span, d Default) (screening.Claim, []screening.Reason, error) {
	if text := claim.Trait(screening.TraitDated); text != "" {
		if _, ok := claim.Year(); !ok {
			return claim, nil, fmt.Errorf("dated: %q is no year such as 1974 or decade such as 197x", text)
		}
	}
	for _, s := range claim.Sections() {
		if _, claimed := claim.Rating(screening.Capacitance.Name, s); !claimed {
			continue
		}
		if _, err := nominal(claim, screening.Capacitance, s, span.Kind, span.Least, span.Most); err != nil {
			return claim, nil, err
		}
	}
	claim, err := completePicofarads(claim)
	if err != nil {
		return claim, nil, err
	}
	var notes []screening.Reason
	for _, s := range claim.Sections() {
		t, ok := claim.Rating(screening.Tolerance.Name, s)
		if !ok {
			t = screening.RangeRating(screening.Tolerance, d.Low, d.High)
			t.Source = d.Source
			claim = claim.WithRating(t)
			notes = append(notes, screening.Reason{
				Code: screening.CodeAssumed, Of: screening.Tolerance.Name,
				Text: fmt.Sprintf("no tolerance given: %s taken (%s)", Percents(d.Low, d.High), d.Source.Status),
			})
		}
		if _, _, err := toleranceBounds(t); err != nil {
			return claim, nil, err
		}
	}
	return claim, notes, nil
}

// completePicofarads sets the tolerance of a part without sections that states it in picofarads: printed so, or by a letter below 10 pF.
func completePicofarads(claim screening.Claim) (screening.Claim, error) {
	nominal, ok := claim.Nominal(screening.Capacitance.Name, "")
	if !ok || len(claim.Sections()) > 1 {
		return claim, nil
	}
	t, claimed := claim.Rating(screening.Tolerance.Name, "")
	source, farad := inPicofarads, 0.0
	switch text := claim.Trait(TraitTolerancePF); {
	case text != "" && claimed && t.Typed != "":
		return claim, fmt.Errorf("tolerance-pf: %s and a tolerance of %s are both claimed; keep the one that is printed", quantity.Quote(text), t)
	case text != "":
		var read bool
		if farad, read = picofarads(text); !read {
			return claim, fmt.Errorf("tolerance-pf: %s is no tolerance in picofarads such as ±0.25pF", quantity.Quote(text))
		}
		t = screening.RangeRating(screening.Tolerance, 0, 0)
		source = screening.Source{Document: "claimed for the part", Clause: TraitTolerancePF, Status: screening.Published}
	case claimed && nominal < picofaradsBelow && picofaradLetters[t.Typed] > 0:
		farad = picofaradLetters[t.Typed]
		if t.Typed == "G" {
			source = inPicofaradsRecalled
		}
	default:
		return claim, nil
	}
	if farad >= nominal {
		return claim, fmt.Errorf("tolerance: ±%s of %s leaves nothing; read the marking again", quantity.Format(farad, quantity.Farad, 0), Farads(nominal))
	}
	t.Nominal, t.Low, t.High, t.Source = math.NaN(), -farad/nominal, farad/nominal, source
	return claim.WithRating(t), nil
}
