package jfet

import (
	"math"

	"goodbin/screening"
)

// squareLaw is where the identities of this file come from: ID = IDSS·(1 − VGS/VGS(off))², voltages as magnitudes.
var squareLaw = screening.Source{Document: "textbook square law of the junction FET (Malvino and Bates, worked examples)", Status: screening.Published}

// CutOff returns VGS(off) = 2·IDSS/gm0, volts, as a magnitude: from IDSS in amperes and the transconductance at VGS = 0 in siemens, which is
// one over the resistance from drain to source with the gate tied to the source.
func CutOff(idss, gm0 float64) float64 { return 2 * idss / gm0 }

// ChannelResistance returns 1/gm0 = VGS(off)/(2·IDSS), ohms.
func ChannelResistance(idss, vgsOff float64) float64 { return vgsOff / (2 * idss) }

// ToCutOff brings a gate voltage measured at a drain current, amperes, to the cut-off voltage: VGS/(1 − √(ID/IDSS)). The second value is
// the whole correction, volts.
func ToCutOff(vgs, id, idss float64) (vgsOff, correction float64) {
	vgsOff = vgs / (1 - math.Sqrt(id/idss))
	return vgsOff, vgsOff - vgs
}
