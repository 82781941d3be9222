package marking

import "testing"

// Decoding a marking takes a few microseconds; at most 20 are wanted.
func BenchmarkDecode(b *testing.B) {
	for _, text := range []string{
		"4K7J", "104", "2A474J", "X7R 104K 50V", "1002", "47K", "brown black red gold", "yellow violet black red brown", "9408", "no such print",
	} {
		b.Run(text, func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				if _, err := Decode(text, Options{Now: now}); err != nil && text != "no such print" {
					b.Fatal(err)
				}
			}
		})
	}
}
