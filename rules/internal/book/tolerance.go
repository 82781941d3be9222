package book

import (
	_ "embed"
	"fmt"
	"strings"
	"sync"

	"goodbin/screening"
)

//go:embed tolerance.csv
var toleranceCSV string

type toleranceLetter struct {
	capacitorOnly bool
	known         bool
	low, high     float64
	meanings      []string
	source        screening.Source
}

func readToleranceLetters(text string) (map[string]toleranceLetter, error) {
	t := ReadTable("tolerance.csv", text)
	letters := make(map[string]toleranceLetter, len(t.Rows()))
	for _, row := range t.Rows() {
		l := toleranceLetter{capacitorOnly: row.Required("for") == "capacitor", source: row.Source()}
		if row.Has("meanings") {
			l.meanings = strings.Split(row.Text("meanings"), "|")
		} else {
			l.known, l.low, l.high = true, row.Number("low"), row.Number("high")
			if l.low >= l.high {
				row.Errorf("high", "is not above low")
			}
		}
		letter := row.Required("letter")
		if _, twice := letters[letter]; twice {
			row.Errorf("letter", "%q stands twice", letter)
		}
		letters[letter] = l
	}
	return letters, t.Err()
}

var toleranceLetters = sync.OnceValue(func() map[string]toleranceLetter {
	letters, err := readToleranceLetters(toleranceCSV)
	if err != nil {
		panic("embedded table: " + err.Error())
	}
	return letters
})

// ToleranceLetter returns the bounds, as ratios, that a capital letter of IEC 60062 stands for on any part: B C D F G J K M. Letters that
// printed lists disagree on are not accepted: see [ToleranceMeanings].
func ToleranceLetter(letter string) (low, high float64, ok bool) {
	l, found := toleranceLetters()[letter]
	if !found || !l.known || l.capacitorOnly {
		return 0, 0, false
	}
	return l.low, l.high, true
}

// CapacitorToleranceLetter is [ToleranceLetter] with the asymmetric letters that capacitors carry besides: Q S T Z.
func CapacitorToleranceLetter(letter string) (low, high float64, ok bool) {
	l, found := toleranceLetters()[letter]
	if !found || !l.known {
		return 0, 0, false
	}
	return l.low, l.high, true
}

// ToleranceSource returns where the meaning of an accepted letter comes from.
func ToleranceSource(letter string) screening.Source { return toleranceLetters()[letter].source }

// ToleranceMeanings returns the meanings of a capital letter that printed lists disagree on, nil for every other word. It serves as
// [screening.Field.Ambiguous] of a tolerance.
func ToleranceMeanings(word string) []string {
	if l, ok := toleranceLetters()[word]; ok && !l.known {
		return l.meanings
	}
	return nil
}

// KiloOrTolerance returns the two meanings of a bare number followed by a capital K on a capacitor ("47K": a tolerance letter, or kilo),
// nil for every other word. It serves as [screening.Field.Ambiguous] of a capacitance.
func KiloOrTolerance(word string) []string {
	digits, ok := strings.CutSuffix(word, "K")
	if !ok || digits == "" || strings.Trim(digits, "0123456789.,") != "" {
		return nil
	}
	return []string{
		fmt.Sprintf("%s pF with tolerance letter K (±10 %%): type \"%spF K\"", digits, digits),
		fmt.Sprintf("%s thousand pF (old print): type \"%snF\"", digits, digits),
	}
}
