package tui

import (
	"context"
	"fmt"
	"io"
	"math"
	"path/filepath"
	"strings"
	"testing"
	"time"

	tea "github.com/charmbracelet/bubbletea"
	"github.com/charmbracelet/lipgloss"
	"github.com/muesli/termenv"

	"goodbin/inventory"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// clock is the fake clock of the tests: every call is a second later.
type clock struct{ at time.Time }

func (c *clock) now() time.Time {
	c.at = c.at.Add(time.Second)
	return c.at
}

func newClock() *clock { return &clock{time.Date(2026, 3, 1, 20, 0, 0, 0, time.UTC)} }

var (
	farads = screening.Definition{Name: "capacitance", Symbol: "C", Label: "capacitance", Unit: quantity.Farad}
	ohms   = screening.Definition{Name: "esr", Symbol: "ESR", Label: "series resistance", Unit: quantity.Ohm}
	amps   = screening.Definition{Name: "leakage", Symbol: "IL", Label: "leakage current", Unit: quantity.Ampere}
)

// can is a made-up kind of part with one limit of every sort that the pages show: a band in two grades, a bound, a wanted bound, two looks,
// a gate above 100 V.
func can() *screening.Rulebook {
	house := screening.Source{Document: "figures made up for tests", Status: screening.House}
	soon := func(f screening.Field, s time.Duration) screening.Field { f.Effort = s * time.Second; return f }
	return &screening.Rulebook{
		Kind: "can", Label: "capacitor made up for tests", Tables: "tests 1",
		Claims: []screening.Field{
			{Definition: farads, Required: true, Example: "100uF"},
			{Definition: screening.RatedVoltage, Required: true, Example: "35V"},
			{Definition: screening.Definition{Name: screening.TraitDated, Label: "maker's date"}, Trait: true, AcceptText: func(w string) (string, bool) {
				return w, len(w) == 4 && strings.Trim(w, "0123456789") == ""
			}},
		},
		Bench: []screening.Field{
			soon(screening.Field{Definition: farads, FollowsNominal: true, Help: "on any meter with a capacitance range"}, 2),
			soon(screening.Field{Definition: ohms, Help: "probes shorted once"}, 3),
			soon(screening.Field{Definition: amps, UnderVoltage: true, Help: "through a resistor, after 2 min"}, 120),
			{Definition: screening.Temperature, PerPart: true},
		},
		Look: []screening.Check{
			{Name: "cracked", Words: []string{"cracked"}, Question: "Is it cracked?", Help: "any split in the body", Verdict: screening.Barred, Reason: "it is cracked", Do: "KEEP it apart", Source: house},
			{Name: "leaky", Words: []string{"leaky"}, Question: "Does anything leak out?", Verdict: screening.Reject, Reason: "it leaks", Source: house},
		},
		Limits: canLimits(house),
		Lesser: func(p screening.Part, _ []screening.Finding) []screening.Lesser {
			r, ok := p.Reading("capacitance", "")
			if !ok || r.Value < 60e-6 {
				return nil
			}
			return []screening.Lesser{{Claim: p.Claim.WithRating(screening.NominalRating(farads, r.Value)), Answers: "capacitance", Text: "as measured", Source: house}}
		},
		Cautions: func(p screening.Part, m screening.Moment) []screening.Caution {
			v, _ := p.Claim.Nominal("voltage", "")
			if v < 100 || m == screening.AtVerdict {
				return nil
			}
			return []screening.Caution{{Code: "stored-charge", Level: screening.Danger, Text: "up to 23 J may be stored: 22 kΩ for 39 s takes 450 V to 10 V", Gate: m == screening.AtLook, Source: house}}
		},
		Recipes: func(screening.Part, screening.Limit) []screening.Recipe {
			return []screening.Recipe{{Title: "With a supply and a resistor", Lines: []string{"set the supply to 35 V", "read the volts across 10 kΩ"}, Source: house}}
		},
	}
}

func canLimits(source screening.Source) func(screening.Claim) ([]screening.Limit, error) {
	return func(c screening.Claim) ([]screening.Limit, error) {
		nominal, _ := c.Nominal("capacitance", "")
		volts, _ := c.Nominal("voltage", "")
		if volts > 1000 {
			return nil, fmt.Errorf("voltage: no can is made for %s", quantity.Format(volts, quantity.Volt, 0))
		}
		none := math.Inf(-1)
		return []screening.Limit{
			{On: "capacitance", Unit: quantity.Farad, Criterion: "capacitance", Low: nominal * 0.8, High: nominal * 1.2, InUse: true, Grade: screening.WithinSpec, Source: source},
			{
				On: "capacitance", Unit: quantity.Farad, Criterion: "capacitance", Low: nominal * 0.7, High: nominal * 1.5, InUse: true, Grade: screening.Serviceable, Soft: true, Source: source,
				Formula: func() string { return "0.7 to 1.5 of " + quantity.Format(nominal, quantity.Farad, 0) },
			},
			{On: "esr", Unit: quantity.Ohm, Criterion: "loss", Low: none, High: 2, InUse: true, At: screening.At(screening.Frequency, 120), Source: source},
			{On: "leakage", Unit: quantity.Ampere, Criterion: "leakage", Low: none, High: 100e-6, InUse: true, Need: screening.Wanted, TreatHigh: screening.Reform, At: screening.At(screening.Voltage, volts), Source: source},
		}, nil
	}
}

// testDesk is a model on a real workbook in a temporary folder.
type testDesk struct {
	t *testing.T
	m *model
}

// testTheme has no colour at all.
func testTheme(ascii bool) *theme {
	r := lipgloss.NewRenderer(io.Discard)
	r.SetColorProfile(termenv.Ascii)
	return themeFor(r, ascii)
}

func openWorkbook(t testing.TB, path string) *inventory.Workbook {
	t.Helper()
	wb, err := inventory.Open(path, inventory.Options{Create: true, Now: newClock().now, Tables: map[screening.Kind]string{"can": "tests 1"}})
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { wb.Close() })
	return wb
}

func newTestModel(t testing.TB, wb *inventory.Workbook, ascii bool) *model {
	t.Helper()
	ctx, cancel := context.WithCancel(context.Background())
	t.Cleanup(cancel)
	d := &desk{
		wb: wb, kinds: screening.Kinds{can()}, policy: screening.DefaultPolicy(), now: newClock().now, t: testTheme(ascii), ctx: ctx,
	}
	m := newModel(d, "test workbook", false)
	m.messages.keep = 0
	return m
}

func newTestDesk(t *testing.T, w, h int) *testDesk {
	t.Helper()
	d := &testDesk{t, newTestModel(t, openWorkbook(t, filepath.Join(t.TempDir(), "book")), false)}
	d.run(d.m.Init())
	d.send(tea.WindowSizeMsg{Width: w, Height: h})
	return d
}

// run runs a command and whatever follows from it. Notes stay: the model's are kept until the next one.
func (d *testDesk) run(cmd tea.Cmd) { runAll(d.m, cmd) }

func runAll(m *model, cmd tea.Cmd) {
	if cmd == nil {
		return
	}
	msg := cmd()
	if batch, ok := msg.(tea.BatchMsg); ok {
		for _, c := range batch {
			runAll(m, c)
		}
		return
	}
	if msg != nil {
		runAll(m, m.take(msg))
	}
}

func (d *testDesk) send(msg tea.Msg) { d.run(d.m.take(msg)) }

// press sends keys by their names; a word in quotes is typed letter by letter.
func (d *testDesk) press(keys ...string) {
	for _, k := range keys {
		for _, msg := range keyMsgs(k) {
			d.send(msg)
		}
	}
}

var namedKeys = map[string]tea.KeyType{
	"enter": tea.KeyEnter, "esc": tea.KeyEsc, "tab": tea.KeyTab, "shift+tab": tea.KeyShiftTab, "up": tea.KeyUp, "down": tea.KeyDown,
	"left": tea.KeyLeft, "right": tea.KeyRight, "pgdown": tea.KeyPgDown, "pgup": tea.KeyPgUp, "backspace": tea.KeyBackspace,
	"f1": tea.KeyF1, "f2": tea.KeyF2, "f3": tea.KeyF3, "f4": tea.KeyF4, "f5": tea.KeyF5, "f6": tea.KeyF6, "f7": tea.KeyF7, "f8": tea.KeyF8, "f9": tea.KeyF9,
	"ctrl+z": tea.KeyCtrlZ, "ctrl+y": tea.KeyCtrlY, "ctrl+c": tea.KeyCtrlC, "ctrl+end": tea.KeyCtrlEnd, "ctrl+home": tea.KeyCtrlHome, "ctrl+u": tea.KeyCtrlU,
}

func keyMsgs(k string) []tea.KeyMsg {
	if kt, ok := namedKeys[k]; ok {
		return []tea.KeyMsg{{Type: kt}}
	}
	var msgs []tea.KeyMsg
	for _, r := range k {
		msgs = append(msgs, tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune{r}})
	}
	return msgs
}

// screen is what the window shows.
func (d *testDesk) screen() string { return screenOf(d.m) }

func screenOf(m *model) string {
	lines, _ := m.draw()
	for i := range lines {
		lines[i] = strings.TrimRight(lines[i], " ")
	}
	return strings.Join(lines, "\n") + "\n"
}

func (d *testDesk) mustShow(texts ...string) {
	d.t.Helper()
	for _, text := range texts {
		if !strings.Contains(d.screen(), text) {
			d.t.Fatalf("the screen does not show %q:\n%s", text, d.screen())
		}
	}
}

// answer types each text and Enter.
func (d *testDesk) answer(texts ...string) {
	for _, text := range texts {
		d.press(text, "enter")
	}
}
