package guess

import (
	"context"
	"errors"
	"fmt"
	"sort"
	"strings"

	"sashlog/configs/site"
	"sashlog/ingest/cell"
	"sashlog/ingest/clock"
	"sashlog/ingest/logfile"
	"sashlog/ingest/sheet"
	"sashlog/ingest/tabular"
)

// rows is a file or sheet that can be run over.
type rows interface {
	Frame() *tabular.Frame
	Prover() *clock.Prover
	ScanOrder(context.Context) error
	Rows(context.Context, func(line int64, cells [][]byte) bool) error
}

// shape is one file or sheet as its rows show it.
type shape struct {
	file     *logfile.File
	log      site.Log // how it will be read
	rows     rows
	style    cell.Style
	charset  string
	date1904 bool
	notes    []string
	// undated: only times of day were found.
	undated bool
	// units of the keys of a long log, by joined key.
	unitCol int
	keys    []int
	values  []int
	names   []string
	generic bool // a single value column whose name says nothing

	order    site.DateOrder
	proof    string
	doubtful bool // the order of day and month is open

	firstS, lastS int64
	intervalS     int64
}

// look finds out how a file is written: one shape, or one per sheet.
func (p *Proposal) look(ctx context.Context, f *logfile.File) []*shape {
	if what := p.special(f); what != "" {
		p.note(f.Name, what)
		return nil
	}
	if f.Kind != logfile.Workbook {
		s, err := p.lookText(ctx, f)
		if err != nil {
			p.note(f.Name, "not taken for a log: "+err.Error())
			return nil
		}
		return []*shape{s}
	}
	names, err := sheet.Names(f)
	if err != nil {
		p.note(f.Name, "cannot be read: "+cause(err))
		return nil
	}
	var out []*shape
	for _, n := range names {
		log := site.Log{Sheet: n}
		s := &shape{file: f, style: cell.Style{Mark: '.'}}
		b, err := sheet.Open(&site.Site{}, &log, f, nil)
		if err == nil {
			s.log, s.rows, s.date1904 = log, b, b.Date1904()
			s.notes = append(s.notes, b.Frame().Notes...)
			err = s.settle(ctx)
		}
		if err != nil {
			p.note(f.Name, fmt.Sprintf("sheet %q not taken for a log: %s", n, cause(err)))
			continue
		}
		if len(names) == 1 {
			s.log.Sheet = ""
		}
		out = append(out, s)
	}
	return out
}

func cause(err error) string {
	var fe logfile.Failure
	if errors.As(err, &fe) {
		return fe.Err.Error()
	}
	return err.Error()
}

func (p *Proposal) lookText(ctx context.Context, f *logfile.File) (*shape, error) {
	s := &shape{file: f}
	t, err := tabular.Open(&site.Site{}, &s.log, f, nil)
	if err != nil {
		if t, err = s.withoutDates(f, err); err != nil {
			return nil, errors.New(cause(err))
		}
	}
	d := t.Dialect()
	s.rows, s.style, s.charset = t, d.Style, d.Charset()
	s.notes = append(s.notes, d.Notes...)
	s.log.Separator = rune(d.Sep)
	if d.Proven {
		s.log.Decimal = rune(d.Style.Mark)
	}
	return s, s.settle(ctx)
}

// withoutDates opens a file whose rows carry times of day but no dates, so
// that its columns can at least be named.
func (s *shape) withoutDates(f *logfile.File, err error) (*tabular.File, error) {
	if !errors.As(err, new(tabular.Unsettled)) {
		return nil, err
	}
	r, e := f.Open(false)
	if e != nil {
		return nil, e
	}
	defer r.Close()
	d, head, _ := tabular.Look(r, &s.log, nil)
	for c, name := range d.Frame.Names {
		n, all := 0, 0
		for _, row := range head {
			if row.Line < d.Frame.DataLine || c >= len(row.Cells) {
				continue
			}
			all++
			if clock.FormOf([]byte(row.Cells[c])) == clock.FormClock {
				n++
			}
		}
		if n > 0 && n*10 >= all*9 {
			s.undated = true
			log := site.Log{TimeColumn: name}
			t, e := tabular.Open(&site.Site{}, &log, f, nil)
			if e != nil {
				return nil, e
			}
			return t, nil
		}
	}
	return nil, err
}

// column is what a sample of rows shows of one column.
type column struct {
	name                 string
	filled, number, word int
	states, quality      int
	units                int
	distinct             map[string]int
	rising               bool // whole numbers that only rise
	tokens               []token
}

// sampleMax bounds the rows kept for the decision about the layout.
const sampleMax = 4000

// settle reads the rows once and decides layout, keys and values.
func (s *shape) settle(ctx context.Context) error {
	fr := s.rows.Frame()
	s.unitCol, s.names = -1, fr.Names
	if fr.Time >= 0 {
		s.log.TimeColumn = fr.Names[fr.Time]
	} else {
		s.log.DateColumn, s.log.ClockColumn = fr.Names[fr.Date], fr.Names[fr.Clock]
	}
	if !s.undated {
		if err := s.findOrder(ctx); err != nil {
			return err
		}
	}
	var sample [][]string
	stride, n := 1, 0
	times, err := newTimes(s)
	if err != nil {
		return err
	}
	var pace pace
	err = s.rows.Rows(ctx, func(_ int64, cells [][]byte) bool {
		if t, ok := times.at(cells); ok {
			pace.add(t)
		}
		if n%stride == 0 {
			row := make([]string, len(cells))
			for i, c := range cells {
				row[i] = strings.TrimSpace(cell.Text(c, s.style.Latin))
			}
			sample = append(sample, row)
			if len(sample) == sampleMax {
				for i := 0; i < sampleMax/2; i++ {
					sample[i] = sample[2*i]
				}
				sample = sample[:sampleMax/2]
				stride *= 2
			}
		}
		n++
		return true
	})
	if err != nil {
		return errors.New(cause(err))
	}
	if n < 3 {
		return fmt.Errorf("%s of data only", tabular.Count(int64(n), "row", "rows"))
	}
	if !s.undated && pace.n*2 < n {
		return fmt.Errorf("%d of %d rows carry a readable time in column %q", pace.n, n, s.log.TimeColumn+s.log.DateColumn)
	}
	s.firstS, s.lastS, s.intervalS = pace.first, pace.last, pace.usual()
	cols := s.columns(sample)
	if isSurvey(cols) {
		return errors.New("answers of people (a survey), not a log of sensors")
	}
	s.arrange(cols, sample, &pace)
	if len(s.values) == 0 {
		return errors.New("no column holds numbers or states")
	}
	return nil
}

func (s *shape) columns(sample [][]string) []column {
	fr := s.rows.Frame()
	cols := make([]column, len(fr.Names))
	for i := range cols {
		c := &cols[i]
		c.name, c.distinct, c.rising = fr.Names[i], map[string]int{}, true
		c.tokens = tokens(c.name)
		last := -1.0
		for _, r := range sample {
			if i >= len(r) || r[i] == "" {
				continue
			}
			c.filled++
			if len(c.distinct) < 2000 || c.distinct[r[i]] > 0 {
				c.distinct[r[i]]++
			}
			v, rest, ok := s.style.Number([]byte(r[i]))
			if ok && len(rest) <= 6 {
				c.number++
				c.rising = c.rising && v > last && v == float64(int64(v))
				last = v
				continue
			}
			c.rising = false
			c.word++
		}
		for text, n := range c.distinct {
			if _, _, ok := s.style.Number([]byte(text)); ok {
				continue
			}
			switch {
			case isMissing(text):
				c.word -= n
			case isState(text):
				c.states += n
			case isQuality(text):
				c.quality += n
			}
			if isUnit(text) {
				c.units += n
			}
		}
	}
	return cols
}

// isSurvey reports columns that hold people's votes.
func isSurvey(cols []column) bool {
	n := 0
	for i := range cols {
		for _, t := range cols[i].tokens {
			switch t.fold {
			case "vote", "votes", "tsv", "tpv", "sensation", "preference", "acceptability", "clothing", "clo", "met", "questionnaire", "gender", "votum", "empfindung", "ressenti":
				n++
			}
		}
	}
	return n >= 2
}

// arrange decides between wide, long and one file per point.
func (s *shape) arrange(cols []column, sample [][]string, pace *pace) {
	fr := s.rows.Frame()
	var labels, ids []int
	skip := map[int]bool{fr.Time: true, fr.Date: true, fr.Clock: true}
	for i := range cols {
		c := &cols[i]
		switch {
		case skip[i] || c.filled == 0:
		case s.rising(c, pace) || isCalendar(c.tokens):
			skip[i] = true
		case c.word*2 > c.filled && c.units*2 > c.filled && len(c.distinct) > 0:
			s.unitCol = i
			skip[i] = true
		case c.word*2 > c.filled && c.quality*10 >= c.word*9:
			skip[i] = true
			s.notes = append(s.notes, fmt.Sprintf("column %q holds marks of quality", c.name))
		case c.word*2 > c.filled && c.states*2 < c.word && len(c.distinct)*3 <= c.filled+6:
			labels = append(labels, i)
		case c.number*10 >= c.filled*9 && isKeyName(c.tokens) && len(c.distinct) <= 500:
			ids = append(ids, i)
		}
	}
	varied := func(list []int) (out []int) {
		for _, i := range list {
			if len(cols[i].distinct) > 1 {
				out = append(out, i)
			}
		}
		return out
	}
	mixed := pace.back > 0 || pace.equal*50 > pace.n
	var keys []int
	if l := varied(labels); len(l) > 0 && (mixed || pace.share() < 0.6 && hasHint(cols, l)) {
		keys = append(keys, l...)
	}
	if l := varied(ids); mixed && len(l) > 0 {
		keys = append(keys, l...)
	}
	keys = undetermined(keys, cols, sample)
	for _, i := range append(append([]int{}, labels...), ids...) {
		// Constant names, and names that another name determines, are no values.
		if hasIndex(keys, i) {
			continue
		}
		if len(cols[i].distinct) == 1 || len(keys) > 0 {
			skip[i] = true
		}
	}
	for i := range cols {
		c := &cols[i]
		if skip[i] || hasIndex(keys, i) || c.filled == 0 || c.name == "" && fr.HeaderLine > 0 {
			continue
		}
		s.values = append(s.values, i)
	}
	s.keys = keys
	switch {
	case len(keys) > 0 && len(s.values) > 0:
		s.log.Layout = site.Long
		for _, k := range keys {
			s.log.KeyColumns = append(s.log.KeyColumns, fr.Names[k])
		}
		for _, v := range s.values {
			s.log.ValueColumns = append(s.log.ValueColumns, fr.Names[v])
		}
	default:
		s.log.Layout = site.Wide
		s.generic = len(s.values) == 1 && (fr.HeaderLine == 0 || !speaks(cols[s.values[0]].tokens))
	}
}

// rising reports a column that only counts rows.
func (s *shape) rising(c *column, pace *pace) bool {
	return c.rising && c.number == c.filled && c.number > 2 && !speaks(c.tokens)
}

func hasHint(cols []column, list []int) bool {
	for _, i := range list {
		if isKeyName(cols[i].tokens) {
			return true
		}
	}
	return false
}

func hasIndex(list []int, x int) bool {
	for _, v := range list {
		if v == x {
			return true
		}
	}
	return false
}

// undetermined drops keys that another key determines (a description beside a
// name), and puts the more general first: rooms before windows.
func undetermined(keys []int, cols []column, sample [][]string) []int {
	sort.SliceStable(keys, func(a, b int) bool { return len(cols[keys[a]].distinct) > len(cols[keys[b]].distinct) })
	var out []int
	for _, k := range keys {
		by := false
		for _, m := range out {
			by = by || determines(m, k, sample)
		}
		if !by {
			out = append(out, k)
		}
	}
	sort.SliceStable(out, func(a, b int) bool { return keyRank(cols[out[a]].tokens) < keyRank(cols[out[b]].tokens) })
	return out
}

func determines(a, b int, sample [][]string) bool {
	of := map[string]string{}
	for _, r := range sample {
		if a >= len(r) || b >= len(r) {
			continue
		}
		if v, ok := of[r[a]]; ok && v != r[b] {
			return false
		}
		of[r[a]] = r[b]
	}
	return true
}
