package capacitor

import (
	"time"

	"goodbin/screening"
)

// Fits that the kinds share. A frequency counts within a fifth: 100 Hz for 120 Hz, 10 kHz for 10 kHz.
var (
	// AnyFrequency is for a capacitance that hardly depends on frequency, as that of film, mica and class 1 ceramic between 50 Hz and 1 MHz.
	AnyFrequency = screening.Fit{screening.Frequency: screening.Any}
	// NearFrequency is for loss, which depends on it.
	NearFrequency = screening.Fit{screening.Frequency: {Low: 0.8, High: 1.25}}
	// atVolts is for insulation: about the voltage, about a minute, whatever the room.
	atVolts = screening.Fit{
		screening.Voltage: {Low: 0.95, High: 1.05}, screening.After: {Low: 0.9, High: 1.1}, screening.PartTemperature: screening.Any,
	}
)

// OhmsRangeVolts is what is taken as the voltage of an insulation reading that states none: an ohms range puts a volt or less on the part
// (from memory), and a reading at so low a voltage can show a leak but no insulation.
const OhmsRangeVolts = 1.0

// minute is the time after which insulation is read, s.
const minute = 60.0

// CapacitanceReading is the bench field of capacitance.
func CapacitanceReading(example, help string, fit screening.Fit) screening.Field {
	return screening.Field{
		Definition: screening.Capacitance, Example: example, FollowsNominal: true, Effort: 10 * time.Second, Help: help, Fit: fit,
		Band: screening.Span{Low: 0, High: 1},
	}
}

// TanDeltaReading is the bench field of the dissipation factor.
func TanDeltaReading(example string) screening.Field {
	return screening.Field{
		Definition: screening.TanDelta, Example: example, Effort: 15 * time.Second, Fit: NearFrequency, Band: screening.Span{Low: 0, High: 1000},
		Help: "D on most meters, with the frequency that the meter shows; a Q reading is 1/D",
	}
}

// ESRReading is the bench field of ESR, which [Derive] turns into tan δ.
func ESRReading(example string) screening.Field {
	return screening.Field{
		Definition: screening.ESR, Example: example, Effort: 15 * time.Second, Fit: NearFrequency, Band: screening.Span{Low: 0, High: 1e9},
		Help: "instead of tan δ, with its frequency; touch the probes together first",
	}
}

// InsulationReading is the bench field of insulation resistance.
func InsulationReading(example string) screening.Field {
	return screening.Field{
		Definition: screening.InsulationResistance, Example: example, Effort: 4 * time.Minute, UnderVoltage: true, Fit: atVolts,
		Default: screening.At(screening.Voltage, OhmsRangeVolts).With(screening.After, minute), Band: screening.Span{Low: 0, High: 1e16},
		Help: "at its voltage, 1 min after it was applied; without a voltage it is taken as an ohms range's, which can show a leak only",
	}
}

// LeakageReading is the bench field of leakage current, which [Derive] turns into insulation resistance.
func LeakageReading(example string) screening.Field {
	return screening.Field{
		Definition: screening.Leakage, Example: example, Effort: 3 * time.Minute, UnderVoltage: true, Fit: atVolts,
		Default: screening.At(screening.After, minute), Band: screening.Span{Low: 0, High: 10},
		Help: "the current at a stated voltage, 1 min after it was applied",
	}
}

// TimeConstantReading is the bench field of self-discharge, which [Derive] turns into insulation resistance.
func TimeConstantReading(example string) screening.Field {
	return screening.Field{
		Definition: screening.TimeConstant, Example: example, Effort: 10 * time.Minute, UnderVoltage: true, Fit: atVolts,
		Default: screening.At(screening.After, minute), Band: screening.Span{Low: 0, High: 1e9},
		Help: "seconds of self-discharge to 37 %: t/ln(U0/U1), at the voltage it was charged to",
	}
}

// Rest is the bench fields of the whole set: its temperature and the volts that remain.
func Rest() []screening.Field {
	return []screening.Field{
		{
			Definition: screening.Temperature, PerPart: true, Example: "temperature=24C", Effort: 5 * time.Second,
			Help: "of the part; room temperature is assumed where none is given", Band: screening.Span{Low: -60, High: 150},
		},
		{
			Definition: screening.RemainingVoltage, PerPart: true, Example: "remaining-voltage=0.2V", Effort: 5 * time.Second,
			Help: "across the terminals, after discharging, before anything touches it", Band: screening.Span{Low: -20e3, High: 20e3},
		},
	}
}
