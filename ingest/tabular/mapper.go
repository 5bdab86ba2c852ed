package tabular

import (
	"sort"
	"strings"

	"sashlog/configs/site"
	"sashlog/ingest/cell"
	"sashlog/ingest/clock"
	"sashlog/ingest/reading"
)

// Match is one point that a file may yield: for the wide layout the column it
// stands in; for the others every point of the log.
type Match struct {
	Point  int
	Column int // 0-based, -1 when rows carry keys
}

// Mapper turns the rows of one pass over a file or sheet into readings. It is
// the only place where a cell becomes a reading or a reject.
type Mapper struct {
	file   string
	log    *site.Log
	frame  *Frame
	to     reading.Sink
	gapper reading.Gapper // nil where the sink does not ask
	parser *clock.Parser
	times  *clock.Resolver
	tally  clock.Tally
	order  *clock.Series   // wide, per point: one order of rows
	orders []*clock.Series // long: by target

	rows     *rows    // wide, per point: readings wait here for a sink that takes blocks; else nil
	targets  []target // wide, per point: by column
	keys     map[string]*entry
	joined   []byte
	names    map[string]string // names of unmapped rows
	distrust bool

	line     int64
	lastText []byte
	last     clock.Stamp

	Rows, NoChange                     int64
	short, long, badTime, repeatedHead int64
	stray, multi                       int64
	badFaults                          [4]int64
	headTime                           string
}

// target is one point's cells.
type target struct {
	col   int
	point int
	dec   *cell.Decoder
	cov   bool
	unit  string // as the points table says

	hit      []byte // text of the state met last
	hitValue float64
}

// entry is a name that rows of a long log carry, with its targets per value
// column.
type entry struct {
	targets [][]int // indexes into Mapper.targets
	name    string
}

// Setup is what a mapper needs to know of its file.
type Setup struct {
	Site    *site.Site
	Log     *site.Log
	File    string
	Frame   *Frame
	Style   cell.Style
	Matches []Match
	Order   site.DateOrder
	// Date1904 sets the epoch of serial dates; Serial says that a workbook's
	// numbers are.
	Date1904 bool
	// Disordered says that the first rows are not in order of time.
	Disordered bool
}

// NewMapper makes a mapper for one pass; it takes the points' conversions as
// they are now.
func NewMapper(s Setup, to reading.Sink) (*Mapper, error) {
	m := &Mapper{file: s.File, log: s.Log, frame: s.Frame, to: to, distrust: s.Disordered, names: map[string]string{}}
	m.gapper, _ = to.(reading.Gapper)
	var err error
	if m.parser, err = clock.NewParser(s.Order, s.Log.TimeFormat, s.Date1904); err != nil {
		return nil, err
	}
	if m.times, err = clock.NewResolver(s.Log.Clock, s.Site.Location); err != nil {
		return nil, err
	}
	sampled := false
	for _, mt := range s.Matches {
		p := &s.Site.Points[mt.Point]
		m.targets = append(m.targets, target{col: mt.Column, point: mt.Point, unit: p.Unit,
			dec: cell.NewDecoder(mt.Point, p, s.Style, s.Log.Missing), cov: p.Logging == site.COV})
		sampled = sampled || p.Logging != site.COV
	}
	sort.SliceStable(m.targets, func(i, j int) bool { return m.targets[i].col < m.targets[j].col })
	if t := max(s.Frame.Time, s.Frame.Date); t >= 0 && s.Frame.HeaderLine > 0 {
		m.headTime = s.Frame.Names[t]
	}
	if s.Frame.Layout != site.Long {
		m.order = m.series(sampled)
		m.rows = newRows(to, m.targets)
		return m, nil
	}
	m.keys = map[string]*entry{}
	for i := range m.targets {
		m.orders = append(m.orders, m.series(!m.targets[i].cov))
		col := s.Site.Points[m.targets[i].point].Column
		for v, vc := range s.Frame.Values {
			key := col
			if len(s.Frame.Values) > 1 {
				var ok bool
				if key, ok = strings.CutSuffix(col, "/"+s.Frame.Names[vc]); !ok {
					continue
				}
			}
			m.entryOf(key, len(s.Frame.Values)).targets[v] = append(m.entryOf(key, len(s.Frame.Values)).targets[v], i)
		}
	}
	return m, nil
}

func (m *Mapper) series(exact bool) *clock.Series {
	s := clock.NewSeries(&m.tally, exact)
	if m.distrust {
		s.Distrust()
	}
	return s
}

func (m *Mapper) entryOf(key string, values int) *entry {
	e := m.keys[key]
	if e == nil {
		e = &entry{targets: make([][]int, values), name: key}
		m.keys[key] = e
	}
	return e
}

// stamp reads the time of a row; the text read last costs a comparison.
func (m *Mapper) stamp(b []byte) (clock.Stamp, clock.Fault) {
	if len(b) > 0 && string(b) == string(m.lastText) {
		return m.last, clock.Fine
	}
	st, f := m.parser.Parse(b)
	if f == clock.Fine {
		m.lastText = append(m.lastText[:0], b...)
		m.last = st
	}
	return st, f
}

// place settles the time of a row for one series: the sink its cells go to
// and their instant.
func (m *Mapper) place(st clock.Stamp, s *clock.Series) (reading.Sink, int64) {
	var u int64
	var v clock.Verdict
	if st.HasOffset {
		u, v = m.times.Written(st.WallS, st.OffsetS)
		if v == clock.Sure {
			s.Sure(st.WallS-st.OffsetS, m.to)
			return m.to, u
		}
	} else {
		u, v = m.times.Resolve(st.WallS)
	}
	switch v {
	case clock.Sure:
		s.Sure(st.WallS, m.to)
		return m.to, u
	case clock.Skipped:
		return refuser{m, reading.SkippedHour, m.where(0), ""}, 0
	}
	return s.Hold(st.WallS, m.times.Window(st.WallS), m.where(0), m.to), u
}

func (m *Mapper) where(col int) reading.Where {
	return reading.Where{File: m.file, Line: m.line, Col: col}
}

// refuse is the sink for the cells of a row whose time cannot be read; it is
// nil for a header repeated within the file.
func (m *Mapper) refuse(text []byte, f clock.Fault) reading.Sink {
	t := ""
	if m.badTime < 100 || m.headTime != "" {
		t = cell.Text(text, false)
	}
	if m.headTime != "" && strings.TrimSpace(t) == m.headTime {
		m.repeatedHead++
		return nil
	}
	m.badTime++
	m.badFaults[f]++
	return refuser{m, reading.BadTime, m.where(0), t}
}

// refuser rejects everything for one reason.
type refuser struct {
	m    *Mapper
	r    reading.Reason
	at   reading.Where
	text string
}

func (r refuser) Reading(point int, _ int64, _ float64) {
	if r.r == reading.SkippedHour {
		r.m.tally.Skipped++
	}
	r.m.to.Reject(point, r.r, r.at, r.text)
}

func (r refuser) Reject(point int, _ reading.Reason, _ reading.Where, _ string) {
	r.m.to.Reject(point, r.r, r.at, r.text)
}

func (r refuser) Issue(i reading.Issue) { r.m.to.Issue(i) }

// Row takes one row: its line, cells and, when known, the byte each cell
// begins at. Cells that a workbook cut off at the end of a row count as empty
// when padded is set.
func (m *Mapper) Row(line int64, cells [][]byte, starts []int, padded bool) {
	m.line = line
	m.Rows++
	text, st, f := m.time(cells)
	if m.keys != nil {
		m.longRow(cells, starts, text, st, f)
		return
	}
	var to reading.Sink
	var u int64
	if f != clock.Fine {
		if to = m.refuse(text, f); to == nil {
			return
		}
	} else {
		to, u = m.placeRow(st)
	}
	for i := len(m.frame.Names); i < len(cells); i++ {
		if len(cells[i]) > 0 {
			m.long++
			break
		}
	}
	for i := range m.targets {
		t := &m.targets[i]
		if t.col >= len(cells) {
			if !padded {
				m.cut(i, to)
				return
			}
			m.cell(t, nil, u, 0, to)
			continue
		}
		m.cell(t, cells[t.col], u, startOf(starts, t.col), to)
	}
}

func startOf(starts []int, col int) int {
	if col < len(starts) {
		return starts[col] + 1
	}
	return col + 1
}

// cut rejects the cells from target i on: the row ended before them.
func (m *Mapper) cut(i int, to reading.Sink) {
	m.short++
	for ; i < len(m.targets); i++ {
		to.Reject(m.targets[i].point, reading.Truncated, m.where(0), "")
	}
}

// time reads the time of a row from its one or two cells.
func (m *Mapper) time(cells [][]byte) (text []byte, st clock.Stamp, f clock.Fault) {
	fr := m.frame
	if fr.Time >= 0 {
		if fr.Time >= len(cells) {
			return nil, st, clock.Unreadable
		}
		st, f = m.stamp(cells[fr.Time])
		return cells[fr.Time], st, f
	}
	if fr.Date >= len(cells) || fr.Clock >= len(cells) {
		return nil, st, clock.Unreadable
	}
	st, f = m.parser.ParseSplit(cells[fr.Date], cells[fr.Clock])
	if f != clock.Fine {
		text = append(append(append(text, cells[fr.Date]...), ' '), cells[fr.Clock]...)
	}
	return text, st, f
}

// cell hands over one cell as a reading or a reject.
func (m *Mapper) cell(t *target, b []byte, unixS int64, col int, to reading.Sink) {
	if m.rows != nil && to == reading.Sink(m.rows) {
		m.rows.nothing(t.point)
	}
	v, r, text := t.dec.Decode(b)
	switch {
	case r == reading.Accepted:
		to.Reading(t.point, unixS, v)
		if !t.dec.Numeric() && len(b) <= 32 {
			t.hit, t.hitValue = append(t.hit[:0], b...), v
		}
	case r == reading.Missing && t.cov && text == "":
		m.NoChange++ // nothing written: nothing changed
	default:
		to.Reject(t.point, r, m.where(col), text)
		if t.cov && text != "" { // a sampled value holds a few intervals anyway
			m.gap(t, unixS, to)
		}
	}
}

// gap tells that a record held no value. Instants that are not sure are passed
// over.
func (m *Mapper) gap(t *target, unixS int64, to reading.Sink) {
	switch {
	case m.gapper == nil:
	case to == m.to:
		m.gapper.Gap(t.point, unixS)
	case m.rows != nil && to == reading.Sink(m.rows):
		m.rows.Gap(t.point, unixS)
	}
}
