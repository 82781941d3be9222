package screening

// Status says how well a figure is known.
type Status uint8

// The statuses a figure can have.
const (
	NoStatus       Status = iota
	Published             // read in the document named
	SecondHand            // another text quotes it
	CommonPractice        // trade rule, no source
	FromMemory            // not seen in any text
	Derived               // computed from published figures; the source says how
	House                 // the program's or the user's own
)

var statusNames = [...]string{"", "published", "second-hand", "common practice", "from memory", "derived", "house"}

// String returns the status in words.
func (s Status) String() string {
	if int(s) >= len(statusNames) {
		return ""
	}
	return statusNames[s]
}

// StatusNamed finds the status of a name; it reports false for an unknown one.
func StatusNamed(name string) (Status, bool) {
	for i, n := range statusNames {
		if n == name && i > 0 {
			return Status(i), true
		}
	}
	return NoStatus, false
}

// MayReject reports whether a failure against a figure of this status counts by itself; otherwise it counts as close until the figure
// is confirmed.
func (s Status) MayReject() bool { return s == Published || s == CommonPractice || s == House }

// Source is where a figure comes from.
type Source struct {
	Document string
	Clause   string
	Status   Status
}

// String prints the source in one line: "Chemi-Con KHE series, specifications (published)".
func (s Source) String() string {
	text := s.Document
	if s.Clause != "" {
		if text != "" {
			text += ", "
		}
		text += s.Clause
	}
	if text == "" {
		return s.Status.String()
	}
	return text + " (" + s.Status.String() + ")"
}
