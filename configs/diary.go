package configs

import (
	"strings"
	"time"

	"sashlog/configs/site"
)

// diaryColumns are the columns of the diary; from, to and kind are needed.
var diaryColumns = []string{"from", "to", "kind", "zones", "note"}

var eventKinds = []site.EventKind{site.EventWorks, site.EventSmoke, site.EventSetting, site.EventClosure,
	site.EventSensorSwap, site.EventFault, site.EventOther}

// readDiary reads the diary into the site. Days are inclusive, date-times are
// local and half-open; an empty "to" means the day of "from".
func (b *builder) readDiary(file string, raw []byte) {
	t := openTable(file, raw, diaryColumns, 3, &b.tables)
	if t == nil {
		return
	}
	width := 0
	for _, i := range t.columns {
		width = max(width, i+1)
	}
	for {
		r, ok := t.next()
		if !ok {
			return
		}
		r.tooLong(width)
		e := site.Event{Kind: site.EventKind(strings.ToLower(r.cell("kind"))), Note: r.cell("note"), Line: r.line}
		if !contains(words(eventKinds), string(e.Kind)) {
			r.at("kind", didYouMean(string(e.Kind), words(eventKinds)), "unknown kind %q", r.cell("kind"))
		}
		e.Zones = b.diaryZones(&r)
		from, _, okF := b.moment(&r, "from", true)
		to, day, okT := b.moment(&r, "to", false)
		if r.cell("to") == "" && okF {
			d := site.DateOf(from)
			if _, isDay := parseDate(r.cell("from")); isDay {
				to, day, okT = d.Start(b.out.Site.Location), true, true
			} else {
				r.at("to", "give the end, or whole days only", "to is empty")
			}
		}
		if day {
			to = site.DateOf(to).Next().Start(b.out.Site.Location)
		}
		if okF && okT {
			e.FromUTC, e.ToUTC = from.Unix(), to.Unix()
			if e.ToUTC <= e.FromUTC {
				r.at("to", "", "to is %q, before from %q", r.cell("to"), r.cell("from"))
			}
		}
		b.out.Site.Diary = append(b.out.Site.Diary, e)
	}
}

// moment reads a local day or date-time of the diary.
func (b *builder) moment(r *row, column string, needed bool) (_ time.Time, day, ok bool) {
	text := r.cell(column)
	if text == "" {
		if needed {
			r.at(column, "write 2025-03-31 or 2025-03-31 14:30", "%s is empty", column)
		}
		return time.Time{}, false, false
	}
	loc := b.out.Site.Location
	if d, isDay := parseDate(text); isDay {
		return d.Start(loc), true, true
	}
	for _, form := range []string{"2006-01-02 15:04", "2006-01-02T15:04", "2006-01-02 15:04:05", "2006-01-02T15:04:05"} {
		t, err := time.ParseInLocation(form, text, loc)
		if err != nil || t.Year() < 1900 || t.Year() > 2200 {
			continue
		}
		if t.Format(form) != text {
			r.at(column, "the clocks went forward over it", "%s is %q: this local time did not exist", column, text)
			return time.Time{}, false, false
		}
		return t, false, true
	}
	r.at(column, "write 2025-03-31 or 2025-03-31 14:30", "%s is %q: not a day or local time", column, text)
	return time.Time{}, false, false
}

// diaryZones reads the zones of a note: ids separated by semicolon, comma or
// bar; empty or all means every zone.
func (b *builder) diaryZones(r *row) []string {
	text := r.cell("zones")
	if text == "" || strings.EqualFold(text, "all") {
		return nil
	}
	if b.out.Site.ZoneIndex(text) >= 0 {
		return []string{text}
	}
	var out []string
	for _, id := range strings.FieldsFunc(text, func(c rune) bool { return c == ';' || c == ',' || c == '|' }) {
		id = strings.TrimSpace(id)
		if id == "" {
			continue
		}
		if b.out.Site.ZoneIndex(id) < 0 {
			r.at("zones", didYouMean(id, b.zoneIDs()), "zones names %q: there is no such zone", id)
			continue
		}
		out = append(out, id)
	}
	return out
}
