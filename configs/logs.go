package configs

import (
	"fmt"
	"math"
	"path"
	"regexp"
	"strconv"
	"strings"
	"time"

	"sashlog/configs/site"
)

func (b *builder) logs() {
	s := b.out.Site
	if len(b.raw.Logs) == 0 {
		b.missing("logs", "say where the exported logs are")
	}
	byName := map[string]int{}
	for i := range b.raw.Logs {
		r, here := &b.raw.Logs[i], fmt.Sprintf("logs[%d]", i)
		l := site.Log{Path: r.Path, Name: r.Name, Sheet: r.Sheet,
			Layout:     word(b, here+".layout", r.Layout, site.Wide, site.Wide, site.Long, site.PerPoint),
			TimeColumn: r.TimeColumn, DateColumn: r.DateColumn, ClockColumn: r.ClockColumn,
			KeyColumns: r.KeyColumns, ValueColumns: r.ValueColumns,
			Separator: b.separator(here+".separator", r.Separator),
			Encoding:  word(b, here+".encoding", strings.ToLower(r.Encoding), "", "utf-8", "utf-16", "windows-1252"),
			DateOrder: word(b, here+".date_order", r.DateOrder, site.ProveOrder, site.YMD, site.DMY, site.MDY),
			Missing:   r.Missing, TimeFormat: r.TimeFormat,
		}
		if d := word(b, here+".decimal", r.Decimal, "", ".", ","); d != "" {
			l.Decimal = rune(d[0])
		}
		l.Line, _ = b.tree.where(here)
		if b.tree.has(here + ".influx") {
			b.influx(here, r, &l)
		} else if strings.TrimSpace(l.Path) == "" {
			b.missing(here+".path", "name a file, a folder, or a pattern such as logs/*.csv")
		} else if _, err := path.Match(l.Path, ""); err != nil {
			b.tree.at(here+".path", "* and ? stand for any text and any character", "path is %q: not a valid pattern", l.Path)
		}
		if l.Name == "" {
			l.Name = l.Path
		}
		if first, twice := byName[l.Name]; twice && l.Name != "" {
			b.tree.at(b.first(here+".name", here+".path"), "give each a name of its own", "log %q is listed twice, first on line %d", l.Name, first)
		} else {
			byName[l.Name] = l.Line
		}
		if l.Influx == nil {
			b.headerRow(here, r, &l)
			b.columns(here, r, &l)
		}
		l.Clock = b.clock(here+".clock", r.Clock)
		if l.Influx != nil && !b.tree.has(here+".clock") {
			l.Clock.Kind = site.ClockUTC // a database keeps instants
		}
		s.Logs = append(s.Logs, l)
	}
}

func (b *builder) headerRow(here string, r *rawLog, l *site.Log) {
	if r.HeaderRow == nil {
		return
	}
	v := *r.HeaderRow
	if v != math.Trunc(v) || v < -1 || v > 10000 {
		b.tree.at(here+".header_row", "count rows from 1; -1 means there is no header, 0 finds it",
			"header_row is %s: must be a whole number from -1 to 10000", b.said(here+".header_row", v))
		return
	}
	l.HeaderRow = int(v)
}

// columns checks the settings that only make sense together.
func (b *builder) columns(here string, r *rawLog, l *site.Log) {
	if r.TimeColumn != "" && (r.DateColumn != "" || r.ClockColumn != "") {
		b.tree.at(here+".time_column", "keep time_column, or date_column with clock_column", "time_column and date_column or clock_column contradict each other")
	} else if (r.DateColumn == "") != (r.ClockColumn == "") {
		b.tree.at(b.first(here+".date_column", here+".clock_column"), "a single column with both is time_column", "date_column and clock_column belong together: only one is given")
	}
	if l.Layout == site.Long {
		if len(r.KeyColumns) == 0 {
			b.missing(here+".key_columns", "the long layout needs the columns that name the point")
		}
		if len(r.ValueColumns) == 0 {
			b.missing(here+".value_columns", "the long layout needs the columns that hold the values")
		}
	} else {
		for _, k := range []string{here + ".key_columns", here + ".value_columns"} {
			if b.tree.has(k) && !b.tree.reported(k) {
				b.tree.at(k, "say layout: long, or remove it", "%s belongs to the long layout, this log is %s", last(k), l.Layout)
			}
		}
	}
	if l.Separator != 0 && l.Separator == l.Decimal {
		b.tree.at(here+".decimal", "", "decimal and separator are both %q", string(l.Separator))
	}
	if r.Sheet != "" && !strings.Contains(r.Path, "*") && strings.HasSuffix(strings.ToLower(r.Path), ".csv") {
		b.tree.at(here+".sheet", "sheets belong to workbooks (.xlsx)", "sheet is given but %q is a text file", r.Path)
	}
	if r.TimeFormat != "" {
		b.timeFormat(here+".time_format", r)
	}
}

// timeFormat checks that a reference-time layout can be read back.
func (b *builder) timeFormat(path string, r *rawLog) {
	ref := time.Date(2021, 11, 23, 22, 47, 0, 0, time.UTC)
	got, err := time.Parse(r.TimeFormat, ref.Format(r.TimeFormat))
	ok := err == nil && got.Hour()*60+got.Minute() == 22*60+47
	if r.DateColumn == "" {
		ok = ok && got.YearDay() == ref.YearDay() && got.Year() == ref.Year()
	}
	if !ok {
		b.tree.at(path, "write how the moment 2 January 2006, 15:04:05 would look in the log, for instance 02.01.2006 15:04",
			"time_format is %q: day and time cannot be read back by it", r.TimeFormat)
	}
}

func (b *builder) separator(path, text string) rune {
	if text == "" {
		return 0
	}
	switch text {
	case "tab", "\t":
		return '\t'
	case ",", ";", "|":
		return rune(text[0])
	}
	b.tree.at(path, "leave it out to have it found", `separator is %q: must be one of "," ";" "|" tab`, text)
	return 0
}

func (b *builder) clock(path string, r rawClock) site.Clock {
	text, here := r.Is, path+".is"
	if r.Word != "" {
		text, here = r.Word, path
	}
	c := b.clockKind(here, text)
	c.OverruleOffset = r.OverruleOffset
	c.ShiftS = b.shift(path+".shift_min", r.ShiftMin)
	for i, rs := range r.Shifts {
		p := fmt.Sprintf("%s.shifts[%d]", path, i)
		from, ok1 := b.date(p+".from", rs.From)
		to, ok2 := b.date(p+".to", rs.To)
		if rs.From == "" {
			b.missing(p+".from", "give the first day of the correction")
		}
		if rs.To == "" {
			b.missing(p+".to", "give the last day of the correction")
		}
		if rs.ShiftMin == nil && !b.tree.has(p+".shift_min") {
			b.missing(p+".shift_min", "give the minutes to add to the written times")
		}
		s := site.ClockShift{From: from, To: to, ShiftS: b.shift(p+".shift_min", rs.ShiftMin)}
		if rs.EndMin != nil || b.tree.has(p+".end_shift_min") {
			s.Grows, s.EndShiftS = true, b.shift(p+".end_shift_min", rs.EndMin)
			if ok1 && ok2 && from == to {
				b.tree.at(p+".end_shift_min", "give the last day of the drift, or keep shift_min alone", "a correction of one day cannot grow")
				continue
			}
			if ok1 && ok2 && to.Year-from.Year > driftYearsMost {
				b.tree.at(p+".to", "cut it where the clock was set right", "a correction that grows may last %d years, this one lasts from %s to %s", driftYearsMost, from, to)
				continue
			}
		}
		if ok1 && ok2 && to.Before(from) {
			b.tree.at(p+".to", "", "the shift ends on %s, before it begins on %s", to, from)
			continue
		}
		for _, o := range c.Shifts {
			if ok1 && ok2 && !o.From.IsZero() && !o.To.IsZero() && !to.Before(o.From) && !o.To.Before(from) {
				b.tree.at(p, "", "the shift from %s to %s overlaps another one", from, to)
				break
			}
		}
		c.Shifts = append(c.Shifts, s)
	}
	return c
}

// driftYearsMost bounds a correction that is cut into days.
const driftYearsMost = 10

func (b *builder) shift(path string, v *float64) int {
	m := b.number(path, v, -527040, 527040, " minutes (a year)")
	if math.IsNaN(m) {
		return 0
	}
	return int(math.Round(m * 60))
}

var offset = regexp.MustCompile(`^([+-])(\d\d):?(\d\d)$`)

func (b *builder) clockKind(path, text string) site.Clock {
	switch site.ClockKind(text) {
	case "", site.ClockLocal:
		return site.Clock{Kind: site.ClockLocal}
	case site.ClockUTC:
		return site.Clock{Kind: site.ClockUTC}
	case site.ClockStandard:
		return site.Clock{Kind: site.ClockStandard}
	}
	hint := `write local, utc, standard, an offset such as "+01:00", or a zone such as Europe/Zurich`
	if m := offset.FindStringSubmatch(text); m != nil {
		h, _ := strconv.Atoi(m[2])
		min, _ := strconv.Atoi(m[3])
		if h > 14 || min > 59 || h == 14 && min > 0 {
			b.tree.at(path, hint, "clock is %q: offsets reach from -14:00 to +14:00", text)
		}
		sec := h*3600 + min*60
		if m[1] == "-" {
			sec = -sec
		}
		return site.Clock{Kind: site.ClockOffset, OffsetS: sec}
	}
	loc, problem := zone(text)
	if problem != "" {
		b.tree.at(path, hint, "clock is %q: not a clock: %s", text, problem)
		return site.Clock{Kind: site.ClockLocal}
	}
	return site.Clock{Kind: site.ClockZone, Zone: loc}
}
