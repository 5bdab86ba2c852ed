package guess

import (
	"fmt"
	"io"
	"math"
	"strconv"
	"strings"
	"time"

	"sashlog/configs/site"
)

// WriteSite writes the proposed site file. What only a person can say is
// marked TO FILL IN; everything else is a proposal with its reason.
func (p *Proposal) WriteSite(w io.Writer) error {
	y := &yamlFile{w: w}
	y.line("# Proposed by sashlog scan from the exports alone. Nothing here is certain: go")
	y.line("# through it from top to bottom. Lines marked TO FILL IN need a person; the rest")
	y.line("# is proposed, with its reason. Then run:  sashlog audit %s", p.Options.SiteFile)
	y.line("")
	p.head(y)
	p.occupancy(y)
	p.zoneLines(y)
	p.plantLines(y)
	y.line("# criteria: {preset: en16798-1-ii}   # the numbers the audit judges by")
	y.line("# privacy: internal                  # left out, rooms for one to three people are not shown hour by hour")
	y.line("")
	p.logLines(y)
	y.line("points: %s   # which logged column is what; rows that begin with # are left open", quote(p.Options.PointsFile))
	if p.Typical != nil {
		y.line("weather: {typical_year: %s}   # a typical year of %s; never stands in for measured weather", quote(p.Typical.Path), comment(p.Typical.Place))
	}
	p.openLines(y)
	return y.err
}

type yamlFile struct {
	w   io.Writer
	err error
}

func (y *yamlFile) line(format string, args ...any) {
	if y.err == nil {
		_, y.err = fmt.Fprintf(y.w, format+"\n", args...)
	}
}

// quote writes a text as YAML, quoted unless it is a plain word.
func quote(s string) string {
	plain := s != ""
	for i, r := range s {
		ok := r >= 'a' && r <= 'z' || r >= 'A' && r <= 'Z' || r == '_' || i > 0 && (r >= '0' && r <= '9' || r == '.' || r == '-' || r == '/')
		plain = plain && ok
	}
	switch strings.ToLower(s) {
	case "true", "false", "yes", "no", "on", "off", "null", "y", "n", "nan", "inf", ".":
		plain = false
	}
	if plain {
		return s
	}
	var b strings.Builder
	b.WriteByte('"')
	for _, r := range s {
		switch {
		case r == '"' || r == '\\':
			b.WriteByte('\\')
			b.WriteRune(r)
		case r == '\t':
			b.WriteString(`\t`)
		case r == '\n':
			b.WriteString(`\n`)
		case r < 0x20 || r == 0x7f || r >= 0x80 && r < 0xa0 || r == 0x2028 || r == 0x2029 || r == 0xfeff || r == 0xfffd || !strconv.IsPrint(r) && r != '\u00a0':
			if r > 0xffff {
				fmt.Fprintf(&b, `\U%08X`, r)
			} else {
				fmt.Fprintf(&b, `\u%04X`, r)
			}
		default:
			b.WriteRune(r)
		}
	}
	b.WriteByte('"')
	return b.String()
}

// comment makes foreign text safe in a comment: one line, nothing invisible.
func comment(s string) string {
	return strings.Map(func(r rune) rune {
		if !strconv.IsPrint(r) {
			return ' '
		}
		return r
	}, s)
}

func quotes(list []string) string {
	out := make([]string, len(list))
	for i, s := range list {
		out[i] = quote(s)
	}
	return "[" + strings.Join(out, ", ") + "]"
}

func (p *Proposal) head(y *yamlFile) {
	y.line("site:")
	y.line("  name: \"\"        # TO FILL IN: what the building is called")
	hint := "region and city, for instance Europe/Zurich; daylight saving follows from it"
	if o := p.offsets(); o != "" {
		hint += "; some times carry the offset " + o
	}
	y.line("  time_zone: \"\"   # TO FILL IN: %s", hint)
	if t := p.Typical; t != nil {
		y.line("  latitude: %.2f    # proposed: that of the typical-year file (%s); write the building's own", t.LatitudeDeg, comment(t.Place))
		y.line("  longitude: %.2f", t.LongitudeDeg)
		y.line("  elevation_m: %.0f", t.ElevationM)
	} else {
		y.line("  # latitude: 47.0    # TO FILL IN: degrees, south negative; for the sun and the seasons")
		y.line("  # longitude: 8.0    # TO FILL IN: degrees, west negative")
		y.line("  # elevation_m: 450  # TO FILL IN: metres above the sea; for the air pressure")
	}
	if from, to, ok := p.span(); ok {
		y.line("# period: {from: %s, to: %s}   # what the logs hold; give one to audit less", from.Format(time.DateOnly), to.Format(time.DateOnly))
	}
	y.line("")
}

// offsets lists the offsets from universal time met in the logs.
func (p *Proposal) offsets() string {
	for _, l := range p.Logs {
		if l.Clock == "local" && strings.Contains(l.ClockWhy, "offset") {
			return strings.TrimPrefix(l.ClockWhy, "its times carry the offset ")
		}
	}
	return ""
}

// span is the written time the logs of rooms hold.
func (p *Proposal) span() (from, to time.Time, ok bool) {
	lo, hi := int64(math.MaxInt64), int64(math.MinInt64)
	for _, t := range p.Tracks {
		if t.Mapped() && t.OwnerKind == site.OwnerZone && t.pace.n > 0 {
			lo, hi = min(lo, t.pace.first), max(hi, t.pace.last)
		}
	}
	if lo > hi {
		return from, to, false
	}
	return time.Unix(lo, 0).UTC(), time.Unix(hi-1, 0).UTC(), true
}

func (p *Proposal) occupancy(y *yamlFile) {
	y.line("# When people are there, in local time.")
	y.line("occupancy:")
	y.line("  source: schedule")
	if len(p.Occupied) == 0 {
		y.line("  times: []       # TO FILL IN, for instance: [{days: mon-fri, from: \"08:00\", to: \"18:00\"}]")
		if p.OccupiedHint != "" {
			y.line("  # people seem to be there %s", p.OccupiedHint)
		}
	} else {
		y.line("  times:          # proposed from %s; check them", p.OccupiedWhy)
		for _, t := range p.Occupied {
			y.line("    - {days: %s, from: %q, to: %q}", dayWords(t.Days), hhmm(t.FromMin), hhmm(t.ToMin))
		}
	}
	y.line("  # holidays: [2025-01-01, 2025-12-24..2025-12-31]   # TO FILL IN if there were any")
	y.line("")
}

func hhmm(m int) string { return fmt.Sprintf("%02d:%02d", m/60, m%60) }

// dayWords writes weekdays as a list, Monday first.
func dayWords(days [7]bool) string {
	var out []string
	for i := 1; i <= 7; i++ {
		if days[i%7] {
			out = append(out, [...]string{"sun", "mon", "tue", "wed", "thu", "fri", "sat"}[i%7])
		}
	}
	return "[" + strings.Join(out, ", ") + "]"
}

func (p *Proposal) zoneLines(y *yamlFile) {
	y.line("# One entry per zone, as the names of columns group them. TO FILL IN where you")
	y.line("# can: name, floor, area_m2, height_m, people, place (perimeter or core), faces,")
	y.line("# openings (outdoors, none, or {through: [ids]}), fan_m_s, scheme.")
	if len(p.Zones) == 0 {
		y.line("zones: []   # TO FILL IN: no column could be given to a room")
		y.line("")
		return
	}
	y.line("zones:")
	for i := range p.Zones {
		z := &p.Zones[i]
		y.line("  - id: %s", quote(z.ID))
		if z.Floor != "" {
			y.line("    floor: %s   # proposed, from its name", quote(z.Floor))
		}
		if z.People > 0 {
			y.line("    people: %d   # proposed: %s", z.People, z.PeopleWhy)
		}
		switch {
		case z.Driven:
			y.line("    openings: outdoors   # proposed: window positions are logged")
			y.line("    windows: automatic   # proposed, since positions are logged: automatic or mixed?")
		case z.HasWindow:
			y.line("    openings: outdoors   # proposed: window contacts are logged")
		default:
			y.line("    # openings: none     # no window contact was found: TO FILL IN none where the room has no opening")
		}
	}
	y.line("")
}

func (p *Proposal) plantLines(y *yamlFile) {
	if len(p.Plant) == 0 {
		y.line("# plant: []   # no point of a plant unit was found; without one a zone is never mechanical")
		y.line("")
		return
	}
	y.line("# Plant. serves is a proposal: confirm it. TO FILL IN where you can: name, air")
	y.line("# (outdoor, recirculated, mixed or none), rated_power_kw.")
	y.line("plant:")
	for i := range p.Plant {
		u := &p.Plant[i]
		y.line("  - id: %s", quote(u.ID))
		if len(u.Serves) == 0 {
			y.line("    serves: []   # TO FILL IN: the ids of the zones it serves; nothing in the logs says so")
			continue
		}
		y.line("    serves: %s   # proposed: %s", quotes(u.Serves), comment(u.Why))
	}
	y.line("")
}

func (p *Proposal) logLines(y *yamlFile) {
	y.line("# Where the logs are and how they are written, as found by looking at them.")
	readable := 0
	for _, l := range p.Logs {
		if !l.Undated {
			readable++
		}
	}
	if readable == 0 {
		y.line("logs: []   # TO FILL IN: no log with dates was found")
	} else {
		y.line("logs:")
	}
	for _, l := range p.Logs {
		l.write(y, p)
	}
	y.line("")
}

// write writes one entry of the list of logs.
func (l *Log) write(y *yamlFile, p *Proposal) {
	lead := "  "
	if l.Undated {
		y.line("  # The next log has times of day without dates and cannot be read until it gets dates:")
		lead = "  # "
	}
	s := &l.Setting
	y.line("%s- name: %s", lead, quote(l.Name))
	put := func(format string, args ...any) { y.line(lead+"  "+format, args...) }
	put("path: %s", quote(s.Path))
	put("layout: %s   # %s", s.Layout, l.about())
	if s.Sheet != "" {
		put("sheet: %s", quote(s.Sheet))
	}
	if s.HeaderRow > 0 {
		put("header_row: %d   # titles stand above the names of columns", s.HeaderRow)
	}
	if s.TimeColumn != "" && !l.Undated && !(s.Layout == site.PerPoint && s.TimeColumn == "1") {
		put("time_column: %s", quote(s.TimeColumn))
	}
	if s.DateColumn != "" {
		put("date_column: %s", quote(s.DateColumn))
		put("clock_column: %s", quote(s.ClockColumn))
	}
	if s.Layout == site.Long {
		put("key_columns: %s", quotes(s.KeyColumns))
		put("value_columns: %s", quotes(s.ValueColumns))
	}
	if s.Separator != 0 && s.Separator != ' ' {
		sep := quote(string(s.Separator))
		if s.Separator == '\t' {
			sep = "tab"
		}
		put("separator: %s", sep)
	}
	if s.Decimal != 0 {
		put("decimal: %s", quote(string(s.Decimal)))
	}
	switch {
	case strings.HasPrefix(l.Charset, "Windows"):
		put("encoding: windows-1252   # some letters are not UTF-8")
	case strings.HasPrefix(l.Charset, "UTF-16"):
		put("encoding: utf-16")
	}
	switch {
	case l.DateOpen:
		put("# date_order: dmy   # TO FILL IN dmy or mdy: %s", comment(l.DateProof))
	case s.DateOrder != "":
		put("date_order: %s   # proven: %s", s.DateOrder, comment(l.DateProof))
	}
	if len(l.Missing) > 0 {
		put("missing: %s   # met often and far outside all other values", quotes(l.Missing))
	}
	why := l.ClockWhy
	if why == "" {
		why = "nothing written says; standard if the logger ignores daylight saving, utc, or an offset"
	}
	clock := l.Clock
	if clock == "" {
		clock = "local"
	}
	put("clock: %s   # %s", quote(clock), comment(why))
}

// about says in words what a log holds.
func (l *Log) about() string {
	var b strings.Builder
	fmt.Fprintf(&b, "%d points", len(l.tracks)-len(l.Blank))
	if l.Files > 1 {
		fmt.Fprintf(&b, " in %d files", l.Files)
	}
	if !l.Undated && l.LastS > l.FirstS {
		fmt.Fprintf(&b, ", %s to %s", time.Unix(l.FirstS, 0).UTC().Format(time.DateOnly), time.Unix(l.LastS, 0).UTC().Format(time.DateOnly))
	}
	if l.IntervalS > 0 && l.Setting.Layout != site.Long {
		fmt.Fprintf(&b, ", usually every %s", every(l.IntervalS))
	}
	return b.String()
}

func every(s int64) string {
	switch {
	case s%3600 == 0:
		return fmt.Sprintf("%d h", s/3600)
	case s%60 == 0:
		return fmt.Sprintf("%d min", s/60)
	}
	return fmt.Sprintf("%d s", s)
}

// openLines lists, as comments, the guesses that are least certain and the
// columns left open.
func (p *Proposal) openLines(y *yamlFile) {
	y.line("")
	y.line("# How sure the guesses are (all of them stand in %s, in the note column):", p.Options.PointsFile)
	mapped, open := p.sorted(true), p.sorted(false)
	y.line("#   %d columns mapped, %d left open; a guess below %.0f %% is left open", len(mapped), len(open), 100*MapAt)
	for _, t := range mapped {
		if c := min(t.Confidence, t.OwnerConf); c < 0.75 || len(t.Doubts) > 0 {
			y.line("#   %.0f %%  %s / %s = %s of %s: %s", 100*c, comment(t.Source), comment(t.Column), t.Quantity, comment(t.Owner), comment(strings.Join(append(append([]string{}, t.Reasons...), t.Doubts...), "; ")))
		}
	}
	for _, t := range open {
		y.line("#   open  %s / %s: %s", comment(t.Source), comment(t.Column), comment(strings.TrimPrefix(strings.TrimPrefix(t.Note(), "left open, "), "left open: ")))
	}
	for _, l := range p.Logs {
		for _, d := range l.Doubts {
			y.line("#   log %s: %s", comment(l.Name), comment(d))
		}
		if len(l.Blank) > 0 {
			y.line("#   log %s: %d columns without any value: %s", comment(l.Name), len(l.Blank), comment(strings.Join(first(l.Blank, 8), ", ")))
		}
	}
}

func first(list []string, n int) []string {
	if len(list) <= n {
		return list
	}
	return append(append([]string{}, list[:n]...), fmt.Sprintf("and %d more", len(list)-n))
}
