package guess

import (
	"context"
	"errors"
	"fmt"
	"strings"

	"sashlog/configs/site"
	"sashlog/ingest/cell"
	"sashlog/ingest/clock"
	"sashlog/ingest/columnar"
	"sashlog/ingest/logfile"
	"sashlog/ingest/sheet"
	"sashlog/ingest/station"
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
	said    map[string]string // units by column, by the file's metadata
	generic bool              // a single value column whose name says nothing

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
		with := p.lookText
		switch {
		case f.Kind == logfile.Parquet:
			with = lookParquet
		case station.Recognise(f):
			with = lookStation
		}
		s, err := with(ctx, f)
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
		s, err := lookSheet(ctx, f, n, 0)
		for row := 2; row <= titleRows && (err != nil || s.untitled()); row++ {
			// Titles above the names of columns: try the rows below.
			if below, e := lookSheet(ctx, f, n, row); e == nil && !below.untitled() {
				s, err = below, nil
			}
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

// lookParquet looks at a Parquet file, whose columns say what they hold.
func lookParquet(ctx context.Context, f *logfile.File) (*shape, error) {
	s := &shape{file: f, style: cell.Style{Mark: '.', Declared: true}}
	c, err := columnar.Open(&site.Site{}, &s.log, f, nil)
	if err != nil {
		return nil, errors.New(cause(err))
	}
	s.rows, s.said = c, c.Units()
	s.notes = append(s.notes, "Parquet file")
	s.notes = append(s.notes, c.Frame().Notes...)
	return s, s.settle(ctx)
}

// lookStation looks at hourly weather of a public station.
func lookStation(ctx context.Context, f *logfile.File) (*shape, error) {
	s := &shape{file: f, style: cell.Style{Mark: '.', Declared: true}}
	w, err := station.Open(&site.Site{}, &s.log, f, nil)
	if err != nil {
		return nil, errors.New(cause(err))
	}
	s.rows, s.said = w, w.Units()
	s.notes = append(s.notes, "hourly weather of a public station in fixed columns, universal time")
	return s, s.settle(ctx)
}

// titleRows is how far down the names of columns are looked for.
const titleRows = 12

// lookSheet looks at a sheet whose names of columns stand in a row, 0 to find
// it by looking.
func lookSheet(ctx context.Context, f *logfile.File, name string, header int) (*shape, error) {
	s := &shape{file: f, style: cell.Style{Mark: '.'}, log: site.Log{Sheet: name, HeaderRow: header}}
	b, err := sheet.Open(&site.Site{}, &s.log, f, nil)
	if err != nil {
		return nil, err
	}
	s.rows, s.date1904 = b, b.Date1904()
	s.notes = append(s.notes, b.Frame().Notes...)
	return s, s.settle(ctx)
}

// untitled reports that most columns have no name.
func (s *shape) untitled() bool {
	named := 0
	for _, n := range s.names {
		if n != "" {
			named++
		}
	}
	return named < 2 || named*2 < len(s.names)
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
