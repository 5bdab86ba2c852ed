package tabular

import (
	"bytes"
	"strings"

	"sashlog/configs/site"
	"sashlog/ingest/cell"
	"sashlog/ingest/clock"
	"sashlog/ingest/logfile"
	"sashlog/ingest/reading"
)

// Looked is a file or sheet whose head has been looked at: what every reader
// of rows knows before it reads, and what it can tell afterwards.
type Looked struct {
	site     *site.Site
	log      *site.Log
	file     *logfile.File
	frame    Frame
	style    cell.Style
	head     []headTime
	date1904 bool
	jumbled  bool
	matches  []Match
	points   []int
	order    site.DateOrder
	proof    string
	prover   clock.Prover

	// Ledger is the account of the last pass.
	Ledger reading.FileLedger
	notes  []reading.ClockNote
}

// NewLooked takes what the head of a file showed.
func NewLooked(s *site.Site, log *site.Log, f *logfile.File, fr Frame, style cell.Style, head []HeadRow, date1904 bool) Looked {
	l := Looked{site: s, log: log, file: f, frame: fr, style: style, head: timesOf(head, &fr), date1904: date1904, order: log.DateOrder}
	tc := max(fr.Time, fr.Date)
	for _, row := range head {
		if row.Line >= fr.DataLine && tc < len(row.Cells) {
			l.prover.Add([]byte(row.Cells[tc]), row.Line)
		}
	}
	return l
}

// Name implements reading.Source.
func (l *Looked) Name() string { return l.file.Name }

// Points implements reading.Source.
func (l *Looked) Points() []int { return l.points }

// Frame is the frame found in the head.
func (l *Looked) Frame() *Frame { return &l.frame }

// SetMatches names the points the file may yield.
func (l *Looked) SetMatches(ms []Match) {
	l.matches, l.points = ms, nil
	for _, m := range ms {
		l.points = append(l.points, m.Point)
	}
}

// Prover holds what the dates of the head prove about their order.
func (l *Looked) Prover() *clock.Prover { return &l.prover }

// Settle sets the order of day and month and how it was proven. It must be
// called before the first pass.
func (l *Looked) Settle(o site.DateOrder, proof string) {
	l.order, l.proof = o, proof
	l.jumbled = l.disordered()
	l.head = nil
}

// Prove returns a function that takes rows until their dates prove the order.
func (l *Looked) Prove() func(line int64, cells [][]byte, _ []int) bool {
	tc := max(l.frame.Time, l.frame.Date)
	var last []byte
	return func(line int64, cells [][]byte, _ []int) bool {
		if tc >= len(cells) || bytes.Equal(last, cells[tc]) {
			return true
		}
		last = append(last[:0], cells[tc]...)
		l.prover.Add(last, line)
		_, _, ok := l.prover.Proven()
		return !ok
	}
}

// Describe is the account of the last pass.
func (l *Looked) Describe() reading.FileLedger { return l.Ledger }

// ClockNotes tells what the clock met in the last pass.
func (l *Looked) ClockNotes() []reading.ClockNote { return l.notes }

// Begin starts a pass.
func (l *Looked) Begin(to reading.Sink) (*Mapper, error) {
	l.Ledger, l.notes = reading.FileLedger{Path: l.file.Name}, nil
	m, err := NewMapper(Setup{Site: l.site, Log: l.log, File: l.file.Name, Frame: &l.frame, Style: l.style,
		Matches: l.matches, Order: l.order, Date1904: l.date1904, Disordered: l.jumbled}, to)
	if err != nil {
		return nil, logfile.Failure{Name: l.file.Name, Err: err}
	}
	return m, nil
}

// End ends a pass: held rows are released, facts noted.
func (l *Looked) End(m *Mapper, dialect []string) {
	m.Finish()
	l.Ledger.Rows = m.Rows
	l.Ledger.Dialect = append(append([]string{}, dialect...), m.Words(l.proof)...)
	l.notes = m.ClockNotes()
}

// disordered reports whether rows are out of order of time, repeated hours
// aside; for long logs, those of any one name.
func (l *Looked) disordered() bool {
	p, err := clock.NewParser(l.order, l.log.TimeFormat, l.date1904)
	if err != nil {
		return false
	}
	c, err := clock.NewResolver(l.log.Clock, l.site.Location)
	if err != nil {
		return false
	}
	type state struct {
		last int64
		dir  int
	}
	last := map[string]*state{}
	for _, r := range l.head {
		var st clock.Stamp
		var fault clock.Fault
		if l.frame.Time >= 0 {
			st, fault = p.Parse([]byte(r.time))
		} else {
			st, fault = p.ParseSplit([]byte(r.time), []byte(r.clock))
		}
		if fault != clock.Fine {
			continue
		}
		u, v := c.Resolve(st.WallS)
		if st.HasOffset {
			u, v = c.Written(st.WallS, st.OffsetS)
		}
		if v != clock.Sure {
			continue
		}
		was := last[r.key]
		if was == nil {
			last[r.key] = &state{u, 0}
			continue
		}
		dir := 0
		if u > was.last {
			dir = 1
		} else if u < was.last {
			dir = -1
		}
		if dir != 0 && was.dir != 0 && dir != was.dir {
			return true
		}
		if dir != 0 {
			was.dir = dir
		}
		was.last = u
	}
	return false
}

// headTime is what is kept of a row of the head.
type headTime struct{ time, clock, key string }

// timesOf keeps the times and keys of the head's data rows.
func timesOf(rows []HeadRow, f *Frame) []headTime {
	var out []headTime
	for _, r := range rows {
		if r.Line < f.DataLine || max(f.Time, max(f.Date, f.Clock)) >= len(r.Cells) {
			continue
		}
		var h headTime
		if f.Time >= 0 {
			h.time = strings.Clone(r.Cells[f.Time])
		} else {
			h.time, h.clock = strings.Clone(r.Cells[f.Date]), strings.Clone(r.Cells[f.Clock])
		}
		for _, k := range f.Keys {
			if k < len(r.Cells) {
				h.key += "/" + r.Cells[k]
			}
		}
		out = append(out, h)
	}
	return out
}
