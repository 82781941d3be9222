package bipolar

import (
	"fmt"
	"math"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Two readings belong together when their collector voltages agree within 20 % and their temperatures within 2 K (house: leakage moves by
// 15 % in 2 K). A net gain whose expanded uncertainty (k = 2) passes 20 % is not given.
const (
	sameVCE         = 0.20
	sameTemperature = 2.0
	widestNet       = 0.20
)

// NetGain returns the gain of what the base controls, (IC − ICEO)/IB with IB = IC/hFE, that is hFE·(1 − ICEO/IC), and its standard
// uncertainty by linear propagation (JCGM 100, 5.1.2) from those of hFE and ICEO; IC is taken as set. Currents in amperes.
func NetGain(hfe, uHFE, ic, iceo, uICEO float64) (net, u float64) {
	share := iceo / ic
	return hfe * (1 - share), math.Hypot((1-share)*uHFE, hfe/ic*uICEO)
}

// derive computes the net gain of every gain reading that has a leakage reading at the same temperature and the same VCE or a higher one, or
// says why not.
func derive(part screening.Part) ([]screening.Reading, []screening.Reason) {
	germanium := part.Claim.Trait(screening.TraitMaterial) == germanium
	var derived []screening.Reading
	var why []screening.Reason
	for _, gain := range part.Readings {
		if gain.Of != HFE.Name {
			continue
		}
		net, reason := netOf(part, gain)
		switch {
		case reason == "":
			derived = append(derived, net)
		case germanium:
			why = append(why, book.Note(HFENet.Name, "no net gain: %s", reason))
		}
	}
	return derived, why
}

// netOf returns the net gain of one gain reading; reason says why there is none.
func netOf(part screening.Part, gain screening.Reading) (net screening.Reading, reason string) {
	ic, ok := collectorCurrent(gain)
	if !ok {
		return net, "the collector current of the gain is not stated: hfe@ic=0.5mA,vce=6V=…"
	}
	if gain.Sense != quantity.Exactly {
		return net, "the gain reading only bounds"
	}
	leak, ok := leakageBeside(part, gain)
	if !ok {
		v, _ := gain.At.Get(screening.VCE)
		return net, "it needs iceo at the same temperature and the same VCE or more, " + quantity.Format(v, quantity.Volt, 0)
	}
	iceo, u := leak.Value, leak.U
	switch leak.Sense {
	case quantity.AtLeast:
		return net, "the leakage reading only bounds from below"
	case quantity.AtMost: // somewhere between nothing and the bound
		iceo, u = leak.Value/2, math.Hypot(leak.Value/2/math.Sqrt(3), leak.U)
	}
	value, uNet := NetGain(gain.Value, gain.U, ic, iceo, u)
	if value <= 0 {
		return net, "the leakage is all of the collector current: the base controls nothing"
	}
	if 2*uNet/value > widestNet {
		return net, fmt.Sprintf("its uncertainty is ±%.0f %%, more than %.0f %%: take the gain at a higher collector current",
			200*uNet/value, 100*widestNet)
	}
	net = gain
	net.Of, net.Unit, net.Value, net.U = HFENet.Name, HFENet.Unit, value, uNet
	net.Repeats, net.Step, net.Typed = nil, stepOf(uNet), ""
	net.From = []screening.Input{{Of: gain.Of, U: gain.U, Sensitivity: 1 - iceo/ic}, {Of: leak.Of, U: u, Sensitivity: -gain.Value / ic}}
	net.Assumed = gain.Assumed || leak.Assumed
	net.Rule = fmt.Sprintf("(%s − %s) over a base current of %s", quantity.Format(ic, quantity.Ampere, 3),
		quantity.Format(iceo, quantity.Ampere, 3), quantity.Format(ic/gain.Value, quantity.Ampere, 3))
	if leak.Sense == quantity.AtMost {
		net.Rule += fmt.Sprintf("; the leakage lies between 0 and %s", quantity.Format(leak.Value, quantity.Ampere, 3))
	}
	return net, ""
}

// stepOf is the last digit worth printing of a value with this standard uncertainty: the power of ten at or below it.
func stepOf(u float64) float64 {
	if !(u > 0) {
		return 0
	}
	return math.Pow10(int(math.Floor(math.Log10(u))))
}

// collectorCurrent returns the collector current at which a gain was read: stated, or its base current times the gain.
func collectorCurrent(gain screening.Reading) (float64, bool) {
	if ic, ok := gain.At.Get(screening.IC); ok {
		return ic, ic > 0
	}
	ib, ok := gain.At.Get(screening.IB)
	return ib * gain.Value, ok && ib > 0 && gain.Value > 0
}

// leakageBeside finds the last ICEO reading taken at the VCE and the temperature of a gain reading. A voltage that the gain reading only
// assumes, or a temperature that one of them does not state, is taken as the other's. Where there is none, one taken at a higher VCE bounds
// it from above: at a lower voltage a junction leaks no more.
func leakageBeside(part screening.Part, gain screening.Reading) (screening.Reading, bool) {
	var bound screening.Reading
	found := false
	for i := len(part.Readings) - 1; i >= 0; i-- {
		leak := part.Readings[i]
		if leak.Of != ICEO.Name || !sameWarmth(gain, leak) {
			continue
		}
		v1, ok1 := gain.At.Get(screening.VCE)
		v2, ok2 := leak.At.Get(screening.VCE)
		switch {
		case !ok1 || !ok2 || gain.AssumedAt.Has(screening.VCE) || math.Abs(v1-v2) <= sameVCE*math.Max(v1, v2):
			return leak, true
		case v2 > v1 && leak.Sense != quantity.AtLeast && (!found || leak.Value < bound.Value):
			bound, found = leak, true
			bound.Sense = quantity.AtMost
		}
	}
	return bound, found
}

func sameWarmth(gain, leak screening.Reading) bool {
	t1, ok1 := gain.At.Get(screening.PartTemperature)
	t2, ok2 := leak.At.Get(screening.PartTemperature)
	return !ok1 || !ok2 || math.Abs(t1-t2) <= sameTemperature
}
