// Package privacy decides what a report may show of rooms for few people.
// Windows, presence and CO2 of a room for one to three people say when those
// people are there. So by default such rooms are shown without presence,
// counts and votes, and by day and week only. Every output asks this package,
// so that the rule stands in one place.
package privacy

import (
	"fmt"
	"sort"
	"strings"
	"time"
	"unicode"
	"unicode/utf8"

	"sashlog/configs/site"
)

// FewPeople is the greatest usual number of people for which a room is
// protected. Our assumption: above it no single person can be followed.
const FewPeople = 3

// Rule says what may be shown of each zone (same index as Site.Zones).
type Rule struct {
	internal bool
	codes    bool
	zones    []site.Zone
	presence bool // occupied times are measured unless a zone says otherwise
	found    []replacement
}

type replacement struct{ from, to string }

// For returns the rule a site asks for.
func For(s *site.Site) Rule {
	r := Rule{internal: s.Privacy.Internal, codes: s.Privacy.Codes, zones: s.Zones, presence: s.Occupancy.Source == site.ByPresence}
	if !r.codes {
		return r
	}
	for i, z := range s.Zones {
		for _, from := range []string{z.ID, z.Name} {
			if strings.TrimSpace(from) != "" {
				r.found = append(r.found, replacement{from, r.code(i)})
			}
		}
	}
	// Longer names first, so that "L1.02 east" is not cut to a code and " east".
	sort.SliceStable(r.found, func(a, b int) bool { return len(r.found[a].from) > len(r.found[b].from) })
	return r
}

func (r Rule) code(zone int) string {
	width := len(fmt.Sprint(len(r.zones)))
	return fmt.Sprintf("Z%0*d", max(2, width), zone+1)
}

// Empty reports whether the rule was never made.
func (r Rule) Empty() bool { return r.zones == nil }

// Internal reports whether everything may be shown.
func (r Rule) Internal() bool { return r.internal }

// Coded reports whether codes stand for the names of zones.
func (r Rule) Coded() bool { return r.codes }

// Protected reports whether the zone is a room for one to three people whose
// times must not be shown: no presence, no counts, no votes, nothing finer
// than a day; or one that opens through such a room and so shows its windows. A
// zone whose usual number is not given is not protected;
// Unstated counts those, and outputs say so.
func (r Rule) Protected(zone int) bool {
	if r.internal || zone < 0 || zone >= len(r.zones) {
		return false
	}
	if few(r.zones[zone].People) {
		return true
	}
	for _, id := range r.zones[zone].Openings.Through {
		for i := range r.zones {
			if r.zones[i].ID == id && few(r.zones[i].People) {
				return true
			}
		}
	}
	return false
}

// ByWeek reports whether a protected zone is told by week: its occupied hours
// are measured, so that each of them says that somebody was there.
func (r Rule) ByWeek(zone int) bool {
	if !r.Protected(zone) {
		return false
	}
	if own := r.zones[zone].OccupancySource; own != "" {
		return own == site.ByPresence
	}
	return r.presence
}

// SameSpan reports whether two days of a protected zone are told together: the
// same day, or the same week from Monday.
func (r Rule) SameSpan(zone int, a, b site.Date) bool {
	if a == b || !r.ByWeek(zone) {
		return a == b
	}
	monday := func(d site.Date) site.Date {
		t := d.Start(time.UTC)
		return site.DateOf(t.AddDate(0, 0, -(int(t.Weekday())+6)%7))
	}
	return monday(a) == monday(b)
}

func few(people float64) bool { return people > 0 && people <= FewPeople }

// ProtectedTogether reports whether a picture that pools the zones would still
// follow few people: all of them together have a usual number of one to three.
func (r Rule) ProtectedTogether(zones []int) bool {
	if r.internal || len(zones) == 0 {
		return false
	}
	sum := 0.0
	for _, z := range zones {
		if z < 0 || z >= len(r.zones) || !(r.zones[z].People > 0) {
			return false
		}
		sum += r.zones[z].People
	}
	return few(sum)
}

// Count returns how many zones are protected, and of how many the usual number
// of people is not given.
func (r Rule) Count() (protected, unstated int) {
	for i := range r.zones {
		if r.Protected(i) {
			protected++
		}
		if !(r.zones[i].People >= 0) {
			unstated++
		}
	}
	return protected, unstated
}

// ID is what an output calls the zone: its id, or its code.
func (r Rule) ID(zone int) string {
	if zone < 0 || zone >= len(r.zones) {
		return ""
	}
	if r.codes {
		return r.code(zone)
	}
	return r.zones[zone].ID
}

// Name is the zone's name for people, empty when it has none or codes stand
// for names.
func (r Rule) Name(zone int) string {
	if r.codes || zone < 0 || zone >= len(r.zones) || r.zones[zone].Name == r.zones[zone].ID {
		return ""
	}
	return r.zones[zone].Name
}

// IDs gives what an output calls the zones with these ids; an id that is no
// zone's goes through Text.
func (r Rule) IDs(ids []string) []string {
	out := make([]string, len(ids))
	for i, id := range ids {
		out[i] = r.Text(id)
		for z := range r.zones {
			if r.zones[z].ID == id {
				out[i] = r.ID(z)
				break
			}
		}
	}
	return out
}

// Text replaces ids and names of zones in a sentence by their codes where
// codes stand for names; otherwise it returns the sentence as it is. An id is
// replaced only where it stands as a word of its own.
func (r Rule) Text(s string) string {
	if len(r.found) == 0 {
		return s
	}
	var b strings.Builder
	prev := ' '
next:
	for i := 0; i < len(s); {
		if !wordRune(prev) {
			for _, f := range r.found {
				if strings.HasPrefix(s[i:], f.from) {
					after, _ := utf8.DecodeRuneInString(s[i+len(f.from):])
					if i+len(f.from) == len(s) || !wordRune(after) {
						b.WriteString(f.to)
						i += len(f.from)
						prev = 'x'
						continue next
					}
				}
			}
		}
		c, n := utf8.DecodeRuneInString(s[i:])
		b.WriteString(s[i : i+n])
		prev = c
		i += n
	}
	return b.String()
}

func wordRune(c rune) bool { return unicode.IsLetter(c) || unicode.IsDigit(c) }

// File names an input file: its path, or its number where codes stand for
// names, since file names often name rooms.
func (r Rule) File(index int, path string) string {
	if r.codes {
		return fmt.Sprintf("file %d", index+1)
	}
	return path
}

// Log names a log: its name, or its number where codes stand for names.
func (r Rule) Log(index int, name string) string {
	if r.codes {
		return fmt.Sprintf("log %d", index+1)
	}
	return name
}

// Logs replaces the quoted names of logs in a sentence where codes stand for
// names.
func (r Rule) Logs(names []string, s string) string {
	if r.codes {
		for i, n := range names {
			s = strings.ReplaceAll(s, fmt.Sprintf("%q", n), fmt.Sprintf("%q", r.Log(i, n)))
		}
	}
	return s
}
