package influx

import (
	"context"
	"fmt"
	"strings"

	"sashlog/configs/site"
	"sashlog/ingest/reading"
)

// Loaded is the account of one point that Load wrote.
type Loaded struct {
	Point int // index into Site.Points
	// Tag is the value of the tag that names the point in the database.
	Tag string
	// Written counts the readings in the database; Duplicates those that
	// repeated one, Conflicts those that contradict another of the same
	// instant (none of them is written), Rejects the cells that are no
	// reading, Unfit numbers a database cannot hold.
	Written, Duplicates, Conflicts, Rejects, Unfit int64

	months map[span]int64
}

// Progress is told how many readings were written, of how many.
type Progress func(done, total int64)

// Load writes what the sources yield into the database of a log: one float
// per reading, in the quantity's canonical unit (Switch: 0 or 1; Status: the
// code of the state), tagged with the point's name, at its instant. The
// sources are read more than once. What is there already is written over, so
// that loading again changes nothing; at last the server's counts are held
// against what was written.
//
// Of several readings of one instant the database would keep the last; what
// contradicts itself is therefore left out, as an audit of the files would
// reject it.
func Load(ctx context.Context, s *site.Site, log *site.Log, sources []reading.Source, progress Progress) ([]Loaded, error) {
	w := &writer{ctx: ctx, site: s, conn: connect(log.Influx), progress: progress, points: make([]state, len(s.Points))}
	defer w.conn.close()
	if strings.HasPrefix(log.Influx.Measurement, "#") {
		return nil, &Failure{Text: fmt.Sprintf("measurement %q begins a comment in the line protocol", log.Influx.Measurement), Hint: "give the log another measurement"}
	}
	if err := w.name(sources); err != nil {
		return nil, err
	}
	// Nothing is read or written in vain when the database cannot be reached.
	if err := w.reach(); err != nil {
		return nil, at(nameOf(log.Influx), err)
	}
	// 1. Look: how many readings, and which points are out of order of time.
	if err := w.pass(sources, scout{w}); err != nil {
		return nil, err
	}
	// 2. Write what comes in order, 3. then the rest, sorted, as much at once
	// as fits into memory.
	if err := w.pass(sources, (*ordered)(w)); err != nil {
		return nil, err
	}
	for _, some := range w.disordered() {
		h := &sorter{w: w, held: some}
		if err := w.pass(sources, h); err != nil {
			return nil, err
		}
		h.write()
	}
	if w.flush(); w.err != nil {
		return nil, at(nameOf(log.Influx), w.err)
	}
	// 4. Count.
	out := w.account()
	if err := w.compare(out); err != nil {
		return out, at(nameOf(log.Influx), err)
	}
	return out, nil
}

// state is what the writer knows of a point.
type state struct {
	Loaded
	named      bool
	prefix     string // of its lines
	n          int64  // readings met by the scout
	lastT      int64
	begun, out bool // out of order of time

	pending  number
	waiting  bool
	said     int64
	conflict bool
}

type writer struct {
	ctx      context.Context
	site     *site.Site
	conn     *conn
	points   []state
	progress Progress
	total    int64
	done     int64
	batch    []byte
	lines    int
	err      error
}

// name gives each point its tag value and checks that no two share one.
func (w *writer) name(sources []reading.Source) error {
	in := w.conn.in
	by := map[string]int{}
	for _, src := range sources {
		for _, i := range src.Points() {
			if w.points[i].named {
				continue
			}
			tag := TagOf(&w.site.Points[i])
			if other, twice := by[tag]; twice {
				return &Failure{Text: fmt.Sprintf("points %q and %q would have one name in the database: %q", w.site.Points[other].ID(), w.site.Points[i].ID(), tag), Hint: "rename one of the columns or logs"}
			}
			by[tag] = i
			w.points[i] = state{Loaded: Loaded{Point: i, Tag: tag, months: map[span]int64{}}, named: true,
				prefix: escaped(in.Measurement, ", ") + "," + escaped(in.PointTag, ",= ") + "=" + escaped(tag, ",= ") + " " + escaped(in.Field, ",= ") + "="}
		}
	}
	return nil
}

// TagOf is how a point is called in the database: its source and column.
// Characters the line protocol cannot hold, and the bar that would part
// measurement and field, are written as in an address: %7C.
func TagOf(p *site.Point) string {
	var b strings.Builder
	id := p.ID()
	for i := 0; i < len(id); i++ {
		if c := id[i]; c < ' ' || c == 0x7f || c == '\\' || c == '|' {
			fmt.Fprintf(&b, "%%%02X", c)
			continue
		}
		b.WriteByte(id[i])
	}
	return strings.ToValidUTF8(b.String(), "\uFFFD")
}

// escaped puts a backslash before what ends a name in the line protocol.
func escaped(s, special string) string {
	var b strings.Builder
	for _, r := range s {
		if strings.ContainsRune(special, r) {
			b.WriteByte('\\')
		}
		b.WriteRune(r)
	}
	return b.String()
}

// reach asks the database something small.
func (w *writer) reach() error {
	_, err := w.conn.counts(w.ctx, place{w.conn.in.Measurement, w.conn.in.Field}, []string{"-"}, span{0, 3600})
	return err
}

// compare holds the server's counts against what was written.
func (w *writer) compare(out []Loaded) error {
	pl := place{w.conn.in.Measurement, w.conn.in.Field}
	var lacking, beyond int64
	var example string
	for _, b := range chunks(out, tagsMost) {
		every := map[span]bool{}
		var values []string
		for _, l := range b {
			values = append(values, l.Tag)
			for m := range l.months {
				every[m] = true
			}
		}
		for m := range every {
			have, err := w.conn.counts(w.ctx, pl, values, m)
			if err != nil {
				return at("counting what was written", err)
			}
			for _, l := range b {
				d := have[l.Tag] - l.months[m]
				if d != 0 && (example == "" || l.Tag < example) {
					example = l.Tag
				}
				lacking, beyond = lacking+max(0, -d), beyond+max(0, d)
			}
		}
	}
	switch {
	case lacking > 0:
		return &Failure{Text: fmt.Sprintf("%s that were written are not there, for instance of %q", readings(lacking), example), Hint: "does the bucket keep data long enough? see its retention"}
	case beyond > 0:
		return &Failure{Text: fmt.Sprintf("the database holds %s more than the files, for instance of %q", readings(beyond), example),
			Hint: "other files were loaded there before; give the log a new bucket or measurement, so that an audit reads these files only"}
	}
	return nil
}

func (w *writer) account() (out []Loaded) {
	for i := range w.points {
		if w.points[i].named {
			out = append(out, w.points[i].Loaded)
		}
	}
	return out
}

func readings(n int64) string {
	if n == 1 {
		return "1 reading"
	}
	return fmt.Sprintf("%d readings", n)
}
