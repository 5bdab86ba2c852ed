package table

import (
	"io"
	"math"

	"github.com/parquet-go/parquet-go"

	"sashlog/analyze/exceedance"
	"sashlog/analyze/hours"
	"sashlog/report/privacy"
)

// cells collects one parquet column of one zone.
type cells struct {
	place  int // in the schema
	values []parquet.Value
}

// parquetTable writes columns zone by zone: column 0 is start_utc, then come
// the texts, then the numbers, each in the order given. Parquet orders columns
// of a schema made at run time by name; readers go by name.
type parquetTable struct {
	writer  *parquet.GenericWriter[any]
	columns []cells
	number0 int // the first number's column
	rows    int
}

func newParquetTable(w io.Writer, name string, texts []string, numbers []string) *parquetTable {
	names := append(append([]string{"start_utc"}, texts...), numbers...)
	t := &parquetTable{columns: make([]cells, len(names)), number0: 1 + len(texts)}
	group := parquet.Group{}
	column := map[string]int{}
	for i, n := range names {
		column[n] = i
		switch {
		case i == 0:
			group[n] = parquet.Timestamp(parquet.Millisecond)
		case i < t.number0:
			group[n] = parquet.Encoded(parquet.String(), &parquet.RLEDictionary)
		default:
			group[n] = parquet.Optional(parquet.Leaf(parquet.DoubleType))
		}
	}
	schema := parquet.NewSchema(name, group)
	for place, path := range schema.Columns() {
		t.columns[column[path[0]]].place = place
	}
	t.writer = parquet.NewGenericWriter[any](w, schema, parquet.Compression(&parquet.Snappy))
	return t
}

// row begins a row.
func (t *parquetTable) row(startUTC int64, texts ...[]byte) {
	t.put(0, parquet.Int64Value(startUTC*1000).Level(0, 0, t.columns[0].place))
	for i, s := range texts {
		t.put(1+i, parquet.ByteArrayValue(s).Level(0, 0, t.columns[1+i].place))
	}
	t.rows++
}

// number adds the k-th number of a row; NaN is null.
func (t *parquetTable) number(k int, v float64) {
	k += t.number0
	if math.IsNaN(v) {
		t.put(k, parquet.NullValue().Level(0, 0, t.columns[k].place))
		return
	}
	t.put(k, parquet.DoubleValue(v).Level(0, 1, t.columns[k].place))
}

func (t *parquetTable) put(k int, v parquet.Value) {
	c := &t.columns[k]
	c.values = append(c.values, v)
}

// flush hands the rows collected so far to the file.
func (t *parquetTable) flush() error {
	writers := t.writer.ColumnWriters()
	for k := range t.columns {
		c := &t.columns[k]
		if _, err := writers[c.place].WriteRowValues(c.values); err != nil {
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
	said := newHourWords(in.Results.Hours)
	var zone []byte
	err := in.eachRow(rule, func(r *row) error {
		if r.zone != last {
			if t.rows > 0 {
				if err := t.flush(); err != nil {
					return err
				}
			}
			last, zone = r.zone, []byte(Harmless(rule.ID(r.zone)))
		}
		t.row(r.startUTC, said.local[r.hour], said.date[r.hour], zone, modelWords[r.model])
		t.number(0, in.Results.Hours.People[r.zone])
		for k, c := range all {
			if c.counted {
				t.number(1+k, float64(r.seconds[c.seconds])/3600)
			} else {
				t.number(1+k, float64(r.values[c.value]))
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
	said := newHourWords(rec)
	zones := make([][]byte, len(rec.ZoneIDs))
	for z := range zones {
		zones[z] = []byte(Harmless(rule.ID(z)))
	}
	words := map[string][]byte{}
	word := func(s string) []byte {
		if words[s] == nil {
			words[s] = []byte(s)
		}
		return words[s]
	}
	var failed error
	put := func(e exceedance.Hourly) {
		if failed != nil {
			return
		}
		t.row(rec.Hours[e.Hour].StartUTC, said.local[e.Hour], zones[e.Zone], word(e.Criterion), word(e.Model))
		for k, v := range [...]float32{e.OverH, e.UnderH, e.OverKh, e.UnderKh} {
			t.number(k, float64(v))
		}
		if t.rows >= 1<<16 {
			failed = t.flush()
		}
	}
	daily := byDay{list: in.Results.Hours.Hours, rule: rule, put: put}
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

// byDay adds the hours of a protected room up to local days, or weeks.
type byDay struct {
	list []hours.Hour
	rule privacy.Rule
	put  func(exceedance.Hourly)
	sum  exceedance.Hourly
	any  bool
}

func (d *byDay) add(e exceedance.Hourly) {
	list := d.list
	same := d.any && d.sum.Zone == e.Zone && d.sum.Criterion == e.Criterion && d.rule.SameSpan(e.Zone, list[d.sum.Hour].Date, list[e.Hour].Date)
	if !same {
		d.end()
		d.sum, d.any = exceedance.Hourly{Zone: e.Zone, Hour: e.Hour, Criterion: e.Criterion}, true
		for d.sum.Hour > 0 && d.rule.SameSpan(e.Zone, list[d.sum.Hour-1].Date, list[e.Hour].Date) {
			d.sum.Hour-- // the day begins at midnight, the week on Monday
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
