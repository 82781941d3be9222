package entry

import (
	"errors"
	"slices"
	"strings"
	"testing"

	"goodbin/screening"
)

func TestTheAnswerToALook(t *testing.T) {
	q := screening.Question{Ask: screening.AskLook, Checks: []screening.Check{
		{Name: "mains-or-cracked", Words: []string{"mains", "cracked"}}, {Name: "bulged", Words: []string{"leaking"}}, {Name: "poor-leads"},
	}}
	for _, tt := range []struct {
		text string
		want []string
		err  string // "" for none
	}{
		{"0", nil, ""},
		{"00", nil, ""},
		{"n", nil, ""},
		{" No ", nil, ""},
		{"1", []string{"mains-or-cracked"}, ""},
		{"31", []string{"mains-or-cracked", "poor-leads"}, ""},
		{"3 1", []string{"mains-or-cracked", "poor-leads"}, ""},
		{"22", []string{"bulged"}, ""},
		{"leaking", []string{"bulged"}, ""},
		{"CRACKED, poor-leads", []string{"mains-or-cracked", "poor-leads"}, ""},
		{"", nil, "nothing typed"},
		{"4", nil, "there is no 4"},
		{"10", nil, "there is no 0"},
		{"yes", nil, "no answer to a look"},
	} {
		t.Run(tt.text, func(t *testing.T) {
			got, err := AnswerLook(q, tt.text)
			if !slices.Equal(got, tt.want) {
				t.Errorf("%v, want %v", got, tt.want)
			}
			var e *Error
			if tt.err == "" && err != nil || tt.err != "" && (!errors.As(err, &e) || !strings.Contains(err.Error(), tt.err) || e.Hint == "") {
				t.Errorf("error %v, want %q with a hint", err, tt.err)
			}
		})
	}
}
