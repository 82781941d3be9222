package tui

import (
	"strconv"
	"strings"

	"goodbin/screening"
	"goodbin/screening/entry"
)

// lookChoice lists what to look for with its digit keys: in full, a line each, where there is room; else the names side by side.
func (t *theme) lookChoice(checks []screening.Check, w, room int) []string {
	var lines []string
	if room >= 2*len(checks)+6 {
		for i, c := range checks {
			lines = append(lines, fit("   "+t.faint.paint(strconv.Itoa(i+1))+" "+t.clean(c.Question), w-1, t.g.more))
		}
		return lines
	}
	line := "  "
	for i, c := range checks {
		item := " " + strconv.Itoa(i+1) + " " + t.clean(c.Plain()) + " "
		if width(line+item) > w-1 {
			lines = append(lines, t.faint.paint(line))
			line = "  "
		}
		line += item
	}
	return append(lines, t.faint.paint(line))
}

// lookLines says of each thing to look for what it means, what it does, and who says so.
func (t *theme) lookLines(checks []screening.Check, w int) []string {
	var lines []string
	for i, c := range checks {
		for k, l := range wrapHang(strconv.Itoa(i+1)+"  ", t.clean(c.Question), w, 0, "") {
			if k == 0 {
				l = t.strong.paint(l)
			}
			lines = append(lines, l)
		}
		if c.Help != "" {
			lines = append(lines, wrapHang("   ", t.clean(c.Help), w, 0, "")...)
		}
		verdict := "only kept with the part"
		if c.Verdict != screening.NoVerdict {
			verdict = c.Verdict.String() + ": " + c.Reason
		}
		for _, l := range wrapHang("   ", t.clean(verdict+" ("+c.Source.String()+")"), w, 0, "") {
			lines = append(lines, t.faint.paint(l))
		}
		lines = append(lines, "")
	}
	return lines
}

// lookEcho says what the digits typed would report.
func lookEcho(q screening.Question, text string) string {
	faults, err := entry.AnswerLook(q, text)
	switch {
	case err != nil:
		return ""
	case len(faults) == 0:
		return "= nothing seen"
	}
	return "= " + strings.ReplaceAll(strings.Join(faults, "; "), "-", " ")
}
