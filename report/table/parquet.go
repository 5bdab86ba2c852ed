package table

import (
	"io"
	"math"

	"github.com/parquet-go/parquet-go"

	"sashlog/analyze/exceedance"
	"sashlog/report/privacy"
)

// cells collects one parquet column of one zone.
type cells struct {
	name   string
	values []parquet.Value
}

// parquetTable writes columns zone by zone. Parquet orders columns of a schema
// made at run time by name; readers go by name.
type parquetTable struct {
	writer  *parquet.GenericWriter[any]
	columns []cells
	index   map[string]int // name -> column
	place   map[string]int // name -> place in the schema
	rows    int
}

func newParquetTable(w io.Writer, name string, texts []string, numbers []string) *parquetTable {
	group := parquet.Group{"start_utc": parquet.Timestamp(parquet.Millisecond)}
	t := &parquetTable{index: map[string]int{}, place: map[string]int{}}
	add := func(name string, node parquet.Node) {
		group[name] = node
		t.index[name] = len(t.columns)
		t.columns = append(t.columns, cells{name: name})
	}
	add("start_utc", parquet.Timestamp(parquet.Millisecond))
	for _, n := range texts {
		add(n, parquet.Encoded(parquet.String(), &parquet.RLEDictionary))
	}
	for _, n := range numbers {
		add(n, parquet.Optional(parquet.Leaf(parquet.DoubleType)))
	}
	schema := parquet.NewSchema(name, group)
	for i, path := range schema.Columns() {
		t.place[path[0]] = i
	}
	t.writer = parquet.NewGenericWriter[any](w, schema, parquet.Compression(&parquet.Snappy))
	return t
}

func (t *parquetTable) text(name, s string) {
	c := &t.columns[t.index[name]]
	c.values = append(c.values, parquet.ByteArrayValue([]byte(s)).Level(0, 0, t.place[name]))
}

func (t *parquetTable) instant(unixS int64) {
	c := &t.columns[t.index["start_utc"]]
	c.values = append(c.values, parquet.Int64Value(unixS*1000).Level(0, 0, t.place["start_utc"]))
	t.rows++
}

// number adds a value; NaN is null.
func (t *parquetTable) number(name string, v float64) {
	c := &t.columns[t.index[name]]
	if math.IsNaN(v) {
		c.values = append(c.values, parquet.NullValue().Level(0, 0, t.place[name]))
		return
	}
	c.values = append(c.values, parquet.DoubleValue(v).Level(0, 1, t.place[name]))
}

// flush hands the rows collected so far to the file.
func (t *parquetTable) flush() error {
	writers := t.writer.ColumnWriters()
	for k := range t.columns {
		c := &t.columns[k]
		if _, err := writers[t.place[c.name]].WriteRowValues(c.values); err != nil {
			return err
		}
		c.values = c.values[:0]
	}
	t.rows = 0
	return t.writer.Flush()
}

func (t *parquetTable) close() error {
	if t.rows > 0 {
		if err := t.flush(); err != nil {
			return err
		}
	}
	return t.writer.Close()
}

// WriteHoursParquet writes the hourly record; the same rows and values as
// hours.csv, hours unrounded.
func WriteHoursParquet(w io.Writer, in Input) error {
	all := append(columnsBefore(), columnsAfter()...)
	numbers := []string{"people"}
	for _, c := range all {
		numbers = append(numbers, c.name)
	}
	t := newParquetTable(w, "hours", []string{"start_local", "local_date", "zone", "comfort_model"}, numbers)
	rule := privacy.For(in.Site)
	last := -1
	err := in.eachRow(rule, func(r *row) error {
		if r.zone != last && t.rows > 0 {
			if err := t.flush(); err != nil {
				return err
			}
		}
		last = r.zone
		t.instant(r.startUTC)
		t.text("start_local", r.localTime().Format("2006-01-02T15:04:05-07:00"))
		t.text("local_date", r.date.String())
		t.text("zone", Harmless(rule.ID(r.zone)))
		t.text("comfort_model", r.model.String())
		t.number("people", in.Results.Hours.People[r.zone])
		for _, c := range all {
			if c.counted {
				t.number(c.name, float64(r.seconds[c.seconds])/3600)
			} else {
				t.number(c.name, float64(r.values[c.value]))
			}
		}
		return nil
	})
	if err != nil {
		return err
	}
	return t.close()
}

// WriteComfortParquet writes the long table of comfort: zone, hour, criterion,
// model, hours and degree-hours too warm and too cool. Hours in which a
// criterion applies but nothing is exceeded are rows of zeros.
func WriteComfortParquet(w io.Writer, in Input) error {
	t := newParquetTable(w, "comfort", []string{"start_local", "zone", "criterion", "model"}, []string{"over_h", "under_h", "over_kh", "under_kh"})
	rule := privacy.For(in.Site)
	rec := in.Results.Hours
	var failed error
	put := func(e exceedance.Hourly) {
		if failed != nil {
			return
		}
		h := &rec.Hours[e.Hour]
		r := row{startUTC: h.StartUTC, offsetS: h.OffsetS}
		t.instant(h.StartUTC)
		t.text("start_local", r.localTime().Format("2006-01-02T15:04:05-07:00"))
		t.text("zone", Harmless(rule.ID(e.Zone)))
		t.text("criterion", e.Criterion)
		t.text("model", e.Model)
		t.number("over_h", float64(e.OverH))
		t.number("under_h", float64(e.UnderH))
		t.number("over_kh", float64(e.OverKh))
		t.number("under_kh", float64(e.UnderKh))
		if t.rows >= 1<<16 {
			failed = t.flush()
		}
	}
	daily := byDay{in: &in, put: put}
	each := in.Results.Exceedance.EachHour
	if each == nil { // nothing was counted
		each = func(func(exceedance.Hourly)) {}
	}
	each(func(e exceedance.Hourly) {
		if !rule.Protected(e.Zone) {
			daily.end()
			put(e)
			return
		}
		daily.add(e)
	})
	daily.end()
	if failed != nil {
		return failed
	}
	return t.close()
}

// byDay adds the hours of a protected room up to local days.
type byDay struct {
	in  *Input
	put func(exceedance.Hourly)
	sum exceedance.Hourly
	any bool
}

func (d *byDay) add(e exceedance.Hourly) {
	list := d.in.Results.Hours.Hours
	same := d.any && d.sum.Zone == e.Zone && d.sum.Criterion == e.Criterion && list[d.sum.Hour].Date == list[e.Hour].Date
	if !same {
		d.end()
		d.sum, d.any = exceedance.Hourly{Zone: e.Zone, Hour: e.Hour, Criterion: e.Criterion}, true
		for d.sum.Hour > 0 && list[d.sum.Hour-1].Date == list[e.Hour].Date {
			d.sum.Hour-- // the day begins at midnight
		}
	}
	d.sum.Model = e.Model
	d.sum.OverH += e.OverH
	d.sum.UnderH += e.UnderH
	d.sum.OverKh += e.OverKh
	d.sum.UnderKh += e.UnderKh
}

func (d *byDay) end() {
	if d.any {
		d.put(d.sum)
	}
	d.any = false
}
