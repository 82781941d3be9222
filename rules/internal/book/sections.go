package book

import (
	"fmt"
	"strconv"
	"strings"

	"goodbin/screening"
)

// TraitSections says how many sections one shaft moves: "1", "2".
const TraitSections = "sections"

// mostSections is how many sections one shaft moves at most (house).
const mostSections = 8

// Sections lists the sections of a part: those whose values are claimed one by one, else as many as are claimed, else the one without a name.
func Sections(c screening.Claim) []string {
	if named := c.Sections(); named[0] != "" {
		return named
	}
	n, _ := strconv.Atoi(c.Trait(TraitSections))
	if n < 2 {
		return []string{""}
	}
	var list []string
	for i := range min(n, mostSections) {
		list = append(list, strconv.Itoa(i+1))
	}
	return list
}

// CheckSections refuses a number of sections that differs from the values that are claimed one by one.
func CheckSections(c screening.Claim) error {
	if n, named := c.Trait(TraitSections), c.Sections(); n != "" && named[0] != "" && strconv.Itoa(len(named)) != n {
		return fmt.Errorf("sections: %s are claimed, and values for %d (%s)", n, len(named), strings.Join(named, ", "))
	}
	return nil
}
