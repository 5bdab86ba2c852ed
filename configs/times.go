package configs

import (
	"fmt"
	"slices"
	"strconv"
	"strings"
	"time"

	"sashlog/configs/site"
)

func (b *builder) occupancy() {
	o, r := &b.out.Site.Occupancy, b.raw.Occupancy
	o.Source = word(b, "occupancy.source", r.Source, site.BySchedule, site.BySchedule, site.ByPresence)
	o.Times = b.times("occupancy.times", r.Times)
	o.Holidays = b.holidays("occupancy.holidays", r.Holidays)
}

// times reads a list of occupied times; none of them may overlap another.
func (b *builder) times(path string, raw []rawTimes) []site.Times {
	var out []site.Times
	var at []string
	for i, r := range raw {
		here := fmt.Sprintf("%s[%d]", path, i)
		n := len(b.tree.problems)
		var t site.Times
		t.Days = b.days(here+".days", r.Days)
		t.FromMin = b.clockTime(here+".from", r.From)
		t.ToMin = b.clockTime(here+".to", r.To)
		if len(b.tree.problems) > n {
			continue
		}
		if t.FromMin >= t.ToMin {
			b.tree.at(here+".to", "for times past midnight write two entries, one up to 24:00 and one from 00:00",
				"to is %q, not after from %q", r.To, r.From)
			continue
		}
		for j := range out {
			if d := overlap(out[j], t); d >= 0 {
				b.tree.at(here, "join them or move one", "%s %s-%s overlaps %s-%s of %s", dayNames[d], r.From, r.To,
					hhmm(out[j].FromMin), hhmm(out[j].ToMin), at[j])
				break
			}
		}
		out, at = append(out, t), append(at, here)
	}
	return out
}

// overlap returns the first weekday on which two spans meet, or -1.
func overlap(a, b site.Times) int {
	if a.FromMin >= b.ToMin || b.FromMin >= a.ToMin {
		return -1
	}
	for d := range a.Days {
		if a.Days[d] && b.Days[d] {
			return d
		}
	}
	return -1
}

func hhmm(min int) string { return fmt.Sprintf("%02d:%02d", min/60, min%60) }

func (b *builder) clockTime(path, text string) int {
	if text == "" {
		b.missing(path, `write a local time in quotes, for instance "08:00"`)
		return 0
	}
	if h, m, ok := strings.Cut(text, ":"); ok && len(m) == 2 && len(h) > 0 && len(h) <= 2 {
		hh, err1 := strconv.ParseUint(h, 10, 8)
		mm, err2 := strconv.ParseUint(m, 10, 8)
		if err1 == nil && err2 == nil && mm < 60 && (hh < 24 || hh == 24 && mm == 0) {
			return int(hh*60 + mm)
		}
	}
	b.tree.at(path, `write it in quotes, for instance "08:00"`, "%s is %q: must be a time from 00:00 to 24:00", last(path), text)
	return 0
}

// dayNames are indexed by time.Weekday.
var dayNames = [7]string{"sun", "mon", "tue", "wed", "thu", "fri", "sat"}

// days reads weekdays: names, spans such as mon-fri, or all.
func (b *builder) days(path string, raw many) (out [7]bool) {
	if len(raw) == 0 {
		b.missing(path, "write for instance mon-fri")
		return out
	}
	for i, text := range raw {
		here := path
		if p := fmt.Sprintf("%s[%d]", path, i); b.tree.has(p) {
			here = p
		}
		if strings.EqualFold(strings.TrimSpace(text), "all") {
			out = [7]bool{true, true, true, true, true, true, true}
			continue
		}
		from, to, span := strings.Cut(text, "-")
		if !span {
			to = from
		}
		f, t := weekday(from), weekday(to)
		if f < 0 || t < 0 {
			b.tree.at(here, "write mon, tue, wed, thu, fri, sat, sun, a span such as mon-fri, or all", "days is %q: no such weekday", text)
			continue
		}
		for d := f; ; d = (d + 1) % 7 {
			out[d] = true
			if d == t {
				break
			}
		}
	}
	return out
}

// weekday reads a day's name, at least its first three letters.
func weekday(text string) int {
	w := strings.ToLower(strings.TrimSpace(text))
	for d := time.Sunday; d <= time.Saturday; d++ {
		if len(w) >= 3 && strings.HasPrefix(strings.ToLower(d.String()), w) {
			return int(d)
		}
	}
	return -1
}

// holidays reads days and spans of days (from..to, both included), sorted.
func (b *builder) holidays(path string, raw many) []site.Date {
	var out []site.Date
	for i, text := range raw {
		here := path
		if p := fmt.Sprintf("%s[%d]", path, i); b.tree.has(p) {
			here = p
		}
		first, end, span := strings.Cut(text, "..")
		if !span {
			end = first
		}
		from, ok1 := parseDate(first)
		to, ok2 := parseDate(end)
		switch {
		case !ok1 || !ok2:
			b.tree.at(here, "write 2025-12-25, or 2025-12-24..2025-12-31 for a span", "holiday %q: no such day", text)
			continue
		case to.Before(from):
			b.tree.at(here, "", "holiday %q ends before it begins", text)
			continue
		case to.Start(time.UTC).Sub(from.Start(time.UTC)) > 400*24*time.Hour:
			b.tree.at(here, "check the years", "holiday %q lasts more than a year", text)
			continue
		}
		for d := from; !to.Before(d); d = d.Next() {
			out = append(out, d)
		}
	}
	slices.SortFunc(out, func(a, b site.Date) int {
		if a.Before(b) {
			return -1
		}
		if b.Before(a) {
			return 1
		}
		return 0
	})
	return slices.Compact(out)
}
