package table

import (
	"fmt"
	"io"
	"sort"
	"strings"
	"time"

	"sashlog/analyze/lost"
	"sashlog/ingest/reading"
	"sashlog/report/privacy"
)

// episodes lists the missed episodes that may be shown, those with most
// person-hours (else hours) first; of protected rooms none, since a start and
// an end say when somebody was there.
func (in *Input) episodes(rule privacy.Rule) []lost.Episode {
	var out []lost.Episode
	for _, e := range in.Results.Lost.Episodes {
		if !rule.Protected(e.Zone) {
			out = append(out, e)
		}
	}
	weight := func(e *lost.Episode) float64 {
		if e.PersonH > 0 {
			return e.PersonH
		}
		return e.Hours
	}
	sort.SliceStable(out, func(i, j int) bool { return weight(&out[i]) > weight(&out[j]) })
	return out
}

func (in *Input) localAt(step int) string {
	return in.Grid.Time(step).Format("2006-01-02T15:04:05-07:00")
}

func contributing(e *lost.Episode) []string {
	out := []string{}
	for _, c := range e.Contributing {
		out = append(out, c.String())
	}
	return out
}

// WriteEpisodesCSV writes the missed episodes, worst first.
func WriteEpisodesCSV(w io.Writer, in Input) error {
	rule := privacy.For(in.Site)
	b := []byte(bom + "zone,start_local,end_local,hours,running,outdoor_temp_c,indoor_temp_c,comfort_high_c,co2_ppm,cause,contributing,evidence,people,person_h\n")
	for _, e := range in.episodes(rule) {
		b = appendText(b, rule.ID(e.Zone))
		b = append(append(b, ','), in.localAt(e.FromStep)...)
		b = append(append(b, ','), in.localAt(e.ToStep)...)
		b = appendNumber(append(b, ','), e.Hours, 5)
		b = appendText(append(b, ','), e.Running)
		b = appendNumber(append(b, ','), e.OutdoorTempC, 2)
		b = appendNumber(append(b, ','), e.IndoorTempC, 2)
		b = appendNumber(append(b, ','), e.ComfortHighC, 2)
		b = appendNumber(append(b, ','), e.CO2PPM, 0)
		b = appendText(append(b, ','), e.Cause.String())
		b = appendText(append(b, ','), strings.Join(contributing(&e), "; "))
		b = appendText(append(b, ','), rule.Text(e.Evidence))
		b = appendNumber(append(b, ','), e.People, 1)
		b = appendNumber(append(b, ','), e.PersonH, 3)
		b = append(b, '\n')
	}
	_, err := w.Write(b)
	return err
}

// reasons writes the rejected readings of a point by reason, as "missing=12;
// spike=1".
func reasons(p *reading.PointLedger) string {
	var parts []string
	for r := reading.Accepted + 1; r < reading.NumReasons; r++ {
		if n := p.Counts[r]; n > 0 {
			parts = append(parts, fmt.Sprintf("%s=%d", r, n))
		}
	}
	return strings.Join(parts, "; ")
}

// checksOf writes what the checks said of a point.
func checksOf(l *reading.Ledger, point int) string {
	var parts []string
	for k := range l.Checks {
		c := &l.Checks[k]
		for _, p := range c.Points {
			if p == point {
				parts = append(parts, fmt.Sprintf("%s (%s): %s", c.Kind, c.Effect, c.Evidence))
			}
		}
	}
	return strings.Join(parts, "; ")
}

func utc(unixS int64, known bool) string {
	if !known {
		return ""
	}
	return time.Unix(unixS, 0).UTC().Format(time.RFC3339)
}

// WriteReadingsCSV writes what became of every point's readings.
func WriteReadingsCSV(w io.Writer, in Input) error {
	rule := privacy.For(in.Site)
	b := []byte(bom + "source,column,point,rows_read,accepted,rejected,rejected_by_reason,first_utc,last_utc,gaps,longest_gap_h,coverage,checks,clock\n")
	for i := range in.Ledger.Points {
		p, def := &in.Ledger.Points[i], &in.Site.Points[i]
		known := p.Counts[reading.Accepted] > 0
		source, name := def.Source, def.Column
		if rule.Coded() { // names of files and columns often name rooms
			source, name = fmt.Sprintf("source of point %d", i+1), fmt.Sprintf("column of point %d", i+1)
		}
		b = appendText(b, source)
		b = appendText(append(b, ','), name)
		b = appendText(append(b, ','), rule.Text(reading.Title(in.Site, i)))
		b = fmt.Appendf(b, ",%d,%d,%d,", p.RowsRead, p.Counts[reading.Accepted], p.Rejected())
		b = appendText(b, reasons(p))
		b = append(append(b, ','), utc(p.FirstUTC, known)...)
		b = append(append(b, ','), utc(p.LastUTC, known)...)
		b = fmt.Appendf(b, ",%d,", p.Gaps)
		b = appendNumber(b, float64(p.LongestGapS)/3600, 2)
		b = appendNumber(append(b, ','), p.Coverage, 5)
		b = appendText(append(b, ','), rule.Text(rule.Logs(logNames(in.Ledger), checksOf(in.Ledger, i))))
		b = appendText(append(b, ','), clockOf(in.Ledger, i))
		b = append(b, '\n')
	}
	_, err := w.Write(b)
	return err
}
