package marking

import (
	"strings"
	"testing"
	"time"

	"goodbin/screening"
)

// FuzzDecode reads whatever a keyboard or a file can hold.
func FuzzDecode(f *testing.F) {
	for _, tt := range valueCases {
		f.Add(tt.text, "")
	}
	for _, text := range []string{
		"MKP 0,47 63-", "X2 0.1 275V~", "104KX7R 50V 9408", "П33", "+80-20%", "±5%", "4k7 -10/+50%", "235-6742", "-", "/", "4Ω7", "1,000.5", "%", "Ω", "~",
	} {
		f.Add(text, "ceramic")
	}
	f.Fuzz(func(t *testing.T, text, kind string) {
		sound(t, text, Options{Now: now, Kind: screening.Kind(kind)})
	})
}

// FuzzColours reads any row of colours, from either end.
func FuzzColours(f *testing.F) {
	f.Add([]byte{1, 0, 2, 10})
	f.Add([]byte{1, 0, 0, 10, 1, 2})
	f.Add([]byte{13, 12, 11})
	f.Fuzz(func(t *testing.T, bands []byte) {
		names := make([]string, 0, maxBands)
		for _, b := range bands[:min(len(bands), maxBands+1)] {
			all := loadColours().colours
			names = append(names, all[int(b)%len(all)].name)
		}
		sound(t, strings.Join(names, " "), Options{Now: now})
	})
}

// FuzzDateCodes reads short tokens on any day.
func FuzzDateCodes(f *testing.F) {
	f.Add("1208", int64(1772366400))
	f.Add("C5", int64(0))
	f.Add("235-6742", int64(4e9))
	f.Add("7A", int64(-1e9))
	f.Fuzz(func(t *testing.T, text string, seconds int64) {
		if seconds > 1e11 || seconds < -1e11 {
			return
		}
		sound(t, text, Options{Now: time.Unix(seconds, 0).UTC()})
	})
}

// FuzzLetterAndDigits puts digits, a letter and more digits together as letter-and-digit values, codes and tolerances are.
func FuzzLetterAndDigits(f *testing.F) {
	f.Add(uint16(4), byte('K'), uint16(7), byte('J'))
	f.Add(uint16(909), byte('0'), uint16(0), byte('B'))
	f.Add(uint16(2), byte('A'), uint16(474), byte('J'))
	f.Fuzz(func(t *testing.T, left uint16, letter byte, right uint16, tolerance byte) {
		var b strings.Builder
		for _, n := range []uint16{left, right} {
			if n%7 != 0 {
				b.WriteString(strings.TrimLeft(string(rune('0'+n%10))+string(rune('0'+n/10%10))+string(rune('0'+n/100%10)), "0"))
			}
			if b.Len() < 5 {
				b.WriteByte(letter&0x7f | 0x20&letter)
			}
		}
		b.WriteByte('A' + tolerance%26)
		sound(t, b.String(), Options{Now: now})
	})
}

// FuzzCeramicCodes reads three characters as temperature codes are written.
func FuzzCeramicCodes(f *testing.F) {
	f.Add("X", byte(7), "R")
	f.Add("P", byte(3), "K")
	f.Fuzz(func(t *testing.T, first string, digit byte, last string) {
		sound(t, first+string(rune('0'+digit%10))+last, Options{Now: now})
	})
}
