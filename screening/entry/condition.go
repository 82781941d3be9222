package entry

import (
	"strings"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Condition reads what stands after the "@" of a reading or rating of a characteristic: values that follow their units ("120Hz", "35V,2min"),
// or named ones ("ic=10mA,vce=1V"). It has no decimal comma.
func Condition(d screening.Definition, text string) (screening.Condition, error) {
	var c screening.Condition
	for piece := range strings.SplitSeq(text, ",") {
		piece = strings.TrimSpace(piece)
		if piece == "" {
			return screening.Condition{}, problem(string(d.Name), "the condition %s has an empty place", shown("@"+text))
		}
		v, x, err := conditionPiece(d, piece)
		if err != nil {
			return screening.Condition{}, err
		}
		if c.Has(v) {
			return screening.Condition{}, problem(string(d.Name), "the condition %s states the %s twice", shown("@"+text), v)
		}
		c = c.With(v, x)
	}
	return c, nil
}

func conditionPiece(d screening.Definition, piece string) (screening.Variable, float64, error) {
	name, value, named := strings.Cut(piece, "=")
	if !named {
		return bareCondition(d, piece)
	}
	name = strings.ToLower(strings.TrimSpace(name))
	v, ok := screening.VariableNamed(name)
	if !ok {
		var names []string
		for _, v := range screening.Variables() {
			names = append(names, v.String())
		}
		err := problem(string(d.Name), "%s is no condition", shown(name))
		if near := Nearest(name, names); near != nil {
			return 0, 0, err.hint("did you mean %s?", orList(near))
		}
		return 0, 0, err.hint("the conditions are %s", orList(names))
	}
	x, err := plain(value, v.Unit())
	if err != nil {
		return 0, 0, problem(string(d.Name), "condition %s=%s: %s", v, clean(value), err)
	}
	return v, x, nil
}

// bareCondition finds the variable that a value without a name stands for by its unit.
func bareCondition(d screening.Definition, piece string) (screening.Variable, float64, error) {
	if carriesNoUnit(piece) {
		return 0, 0, unitlessCondition(d, piece)
	}
	for _, c := range []struct {
		unit quantity.Unit
		v    screening.Variable
	}{
		{quantity.Hertz, screening.Frequency},
		{quantity.Volt, orElse(d.AtVolts, screening.Voltage)},
		{quantity.Ampere, orElse(d.AtAmperes, screening.Current)},
		{quantity.Second, screening.After},
		{quantity.Celsius, screening.PartTemperature},
	} {
		x, err := plain(piece, c.unit)
		switch {
		case err != nil:
			continue
		case d.NamedOnly && (c.unit == quantity.Volt || c.unit == quantity.Ampere):
			return 0, 0, problem(string(d.Name), "condition %s: there is more than one voltage and current here; name it", shown(piece)).
				hint("write it as ic=10mA or ib=1mA, vce=5V, vgs=10V")
		}
		return c.v, x, nil
	}
	return 0, 0, problem(string(d.Name), "the condition %s is not understood", shown(piece)).
		hint("conditions are volts, amperes, hertz, degrees C, and a time such as 2min")
}

// carriesNoUnit reports whether a condition is a number with at most a prefix after it.
func carriesNoUnit(piece string) bool {
	rest := strings.TrimLeft(piece, "0123456789.+-")
	return rest == "" || rest != piece && strings.Contains(" m u µ n p k K M G ", " "+strings.TrimSpace(rest)+" ")
}

// unitlessCondition refuses a bare number, and says what a lone m may mean.
func unitlessCondition(d screening.Definition, piece string) error {
	if digits, ok := strings.CutSuffix(piece, "m"); ok && strings.Trim(digits, "0123456789.") == "" {
		return &Error{
			Of: string(d.Name), Problem: "condition " + shown(piece) + " could mean",
			Meanings: []string{digits + " milli of something: write " + digits + "mA or " + digits + "mV", digits + " minutes: write " + digits + "min"},
		}
	}
	e := problem(string(d.Name), "condition %s has no unit", shown(piece))
	if d.Name == screening.ESR.Name || d.Name == screening.TanDelta.Name || d.Name == screening.Capacitance.Name {
		return e.hint("for a frequency write %sHz", piece)
	}
	return e.hint("write it such as 35V, 120Hz, 2min; conditions have no decimal comma")
}

func orElse(v, otherwise screening.Variable) screening.Variable {
	if v == screening.NoVariable {
		return otherwise
	}
	return v
}
