package tabular

import (
	"fmt"
	"strings"

	"sashlog/configs/site"
	"sashlog/ingest/cell"
	"sashlog/ingest/clock"
)

// doubts reports where the names of columns say something else than the site
// description: a zone in the name of the time column, a unit in a column's.
func (m *Mapper) doubts(issue func(point int, text, hint string)) {
	if m.frame.Time >= 0 {
		name := m.frame.Names[m.frame.Time]
		if off, ok := clock.OffsetIn(name); ok && m.log.Clock.Kind != site.ClockOffset && m.log.Clock.Kind != site.ClockUTC && !m.log.Clock.OverruleOffset {
			issue(-1, fmt.Sprintf("the time column is called %q, but the log's clock is %s", name, clockWords(m.log.Clock.Kind)),
				fmt.Sprintf("if its times do not follow daylight saving, set the log's clock to the offset %s", off))
		}
	}
	if m.frame.Layout != site.Wide || m.frame.HeaderLine == 0 {
		return
	}
	for i := range m.targets {
		t := &m.targets[i]
		said := HeaderUnit(m.frame.Names[t.col])
		if said != "" && t.unit != "" && !cell.SameUnit(said, t.unit) {
			issue(t.point, fmt.Sprintf("the column is called %q, but the point's unit is %q", m.frame.Names[t.col], t.unit), "check the unit in the points table")
		}
	}
}

func clockWords(k site.ClockKind) string {
	if k == "" {
		k = site.ClockLocal
	}
	return string(k)
}

// HeaderUnit is the unit a column's name carries, in brackets or after a
// comma, when it is one that logs are known to use; else empty.
func HeaderUnit(name string) string {
	name = strings.TrimSpace(name)
	name = strings.TrimSuffix(name, "()")
	u := ""
	switch {
	case strings.HasSuffix(name, "]"):
		u = name[strings.LastIndexByte(name, '[')+1 : len(name)-1]
	case strings.HasSuffix(name, ")"):
		u = name[strings.LastIndexByte(name, '(')+1 : len(name)-1]
	default:
		i := strings.LastIndex(name, ", ")
		if i < 0 {
			return ""
		}
		u = name[i+2:]
	}
	u = strings.Trim(u, "' ")
	if !unitWords[strings.ToLower(u)] || u == "-" || u == "0/1" {
		return ""
	}
	return u
}

// Count writes a number with the word that fits it.
func Count(n int64, one, many string) string {
	if n == 1 {
		return "1 " + one
	}
	return fmt.Sprintf("%d %s", n, many)
}
