package columnar

import (
	"context"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"
	_ "time/tzdata"

	"github.com/google/go-cmp/cmp"
	"github.com/parquet-go/parquet-go"
	"github.com/parquet-go/parquet-go/compress"
	"github.com/parquet-go/parquet-go/deprecated"

	"sashlog/configs/site"
	"sashlog/ingest/columnar/columnartest"
	"sashlog/ingest/logfile"
	"sashlog/ingest/reading"
	"sashlog/ingest/tabular"
)

type record struct{ lines, issues []string }

func (r *record) Reading(p int, at int64, v float64) {
	r.lines = append(r.lines, fmt.Sprintf("%s %d = %v", time.Unix(at, 0).UTC().Format("2006-01-02 15:04:05"), p, v))
}
func (r *record) Reject(p int, why reading.Reason, at reading.Where, text string) {
	r.lines = append(r.lines, fmt.Sprintf("row %d: %d %s %q", at.Line, p, why, text))
}
func (r *record) Issue(i reading.Issue) { r.issues = append(r.issues, i.Text) }

var points = []site.Point{
	{Source: "x", Column: "temp", Quantity: site.AirTemp, Unit: "degC", Logging: site.Sampled},
	{Source: "x", Column: "window", Quantity: site.Window, Logging: site.COV},
	{Source: "x", Column: "co2", Quantity: site.CO2, Unit: "ppm", Logging: site.Sampled},
}

type source interface {
	reading.Source
	Frame() *tabular.Frame
	SetMatches([]tabular.Match)
	Settle(site.DateOrder, string)
}

func theSite(t testing.TB, dir string) *site.Site {
	t.Helper()
	loc, err := time.LoadLocation("Europe/Zurich")
	if err != nil {
		t.Fatal(err)
	}
	return &site.Site{Location: loc, Dir: dir, Points: points}
}

func openBytes(t testing.TB, b []byte, log site.Log) (*File, error) {
	t.Helper()
	dir := t.TempDir()
	if err := os.WriteFile(filepath.Join(dir, "x.parquet"), b, 0o644); err != nil {
		t.Fatal(err)
	}
	files, bad := logfile.Find(dir, "x.parquet")
	if len(bad) > 0 || files[0].Kind != logfile.Parquet {
		t.Fatal(bad, files)
	}
	return Open(theSite(t, dir), &log, files[0], nil)
}

func readAll(t testing.TB, f source) *record {
	t.Helper()
	var ms []tabular.Match
	for i, p := range points {
		if f.Frame().Layout == site.Long {
			ms = append(ms, tabular.Match{Point: i, Column: -1})
		} else if c := f.Frame().Column(p.Column); c >= 0 {
			ms = append(ms, tabular.Match{Point: i, Column: c})
		}
	}
	f.SetMatches(ms)
	f.Settle("", "")
	var r record
	for range 2 { // a second pass gives the same
		var again record
		if err := f.Read(context.Background(), &again); err != nil {
			t.Fatal(err)
		}
		if len(r.lines) > 0 && !cmp.Equal(r.lines, again.lines) {
			t.Fatal("a second pass differs")
		}
		r = again
	}
	return &r
}

func write(t testing.TB, group int, cols []columnartest.Column, options ...parquet.WriterOption) []byte {
	t.Helper()
	b, err := columnartest.Write(cols, group, options...)
	if err != nil {
		t.Fatal(err)
	}
	return b
}

var (
	number64 = parquet.Optional(parquet.Leaf(parquet.DoubleType))
	number32 = parquet.Optional(parquet.Leaf(parquet.FloatType))
	truth    = parquet.Optional(parquet.Leaf(parquet.BooleanType))
	coded    = parquet.Encoded(parquet.Optional(parquet.String()), &parquet.RLEDictionary)
)

// The unit and the flag of universal time are the file's; a wall clock is the
// site's, and so is a flag that the site file overrules. 30 March 2025, 01:00
// universal time, is when the clocks of Zurich went from 2 to 3.
func TestTimes(t *testing.T) {
	wall := []time.Time{time.Date(2025, 3, 30, 0, 30, 0, 0, time.UTC), time.Date(2025, 3, 30, 1, 30, 0, 600e6, time.UTC), time.Date(2025, 3, 30, 4, 0, 0, 0, time.UTC)}
	temps := []any{20.5, 21.0, 21.25}
	utc := []string{"2025-03-30 00:30:00 0 = 20.5", "2025-03-30 01:30:00 0 = 21", "2025-03-30 04:00:00 0 = 21.25"}
	local := []string{"2025-03-29 23:30:00 0 = 20.5", "2025-03-30 00:30:00 0 = 21", "2025-03-30 02:00:00 0 = 21.25"}
	iso := func(layout string) (out []any) {
		for _, w := range wall {
			out = append(out, w.Format(layout))
		}
		return out
	}
	var i96, seconds []any
	for _, w := range wall {
		ns := uint64(w.Hour()*3600+w.Minute()*60)*1e9 + uint64(w.Nanosecond())
		i96 = append(i96, deprecated.Int96{uint32(ns), uint32(ns >> 32), uint32(w.Unix()/86400 + 2440588)})
		seconds = append(seconds, w.Unix())
	}
	for _, c := range []struct {
		name   string
		node   parquet.Node
		values []any
		clock  site.Clock
		want   []string
		note   string
	}{
		{"ms utc", parquet.TimestampAdjusted(parquet.Millisecond, true), columnartest.Times(wall, 1e3), site.Clock{}, utc, "milliseconds of universal time, by the file's flag"},
		{"us utc", parquet.TimestampAdjusted(parquet.Microsecond, true), columnartest.Times(wall, 1e6), site.Clock{}, utc, "microseconds of universal time"},
		{"ns utc", parquet.TimestampAdjusted(parquet.Nanosecond, true), columnartest.Times(wall, 1e9), site.Clock{}, utc, "nanoseconds of universal time"},
		{"us wall", parquet.TimestampAdjusted(parquet.Microsecond, false), columnartest.Times(wall, 1e6), site.Clock{}, local, "the log's clock decides"},
		{"ns wall, clock utc", parquet.TimestampAdjusted(parquet.Nanosecond, false), columnartest.Times(wall, 1e9), site.Clock{Kind: site.ClockUTC}, utc, "the log's clock decides"},
		{"us utc overruled", parquet.TimestampAdjusted(parquet.Microsecond, true), columnartest.Times(wall, 1e6), site.Clock{Kind: site.ClockLocal, OverruleOffset: true}, local, "the site file overrules"},
		{"int96", parquet.Leaf(parquet.Int96Type), i96, site.Clock{}, local, "INT96"},
		{"text", parquet.String(), iso("2006-01-02 15:04:05"), site.Clock{}, local, "found by looking"},
		{"text with offset", parquet.String(), iso("2006-01-02T15:04:05Z"), site.Clock{}, utc, "found by looking"},
		{"unix seconds", parquet.Leaf(parquet.Int64Type), seconds, site.Clock{}, utc, "found by looking"},
	} {
		b := write(t, 2, []columnartest.Column{{Name: "temp", Node: number64, Values: temps}, {Name: "when", Node: c.node, Values: c.values}})
		f, err := openBytes(t, b, site.Log{Name: "x", Clock: c.clock})
		if err != nil {
			t.Errorf("%s: %v", c.name, err)
			continue
		}
		if d := cmp.Diff(c.want, readAll(t, f).lines); d != "" {
			t.Errorf("%s: %s", c.name, d)
		}
		if notes := strings.Join(f.Describe().Dialect, "; "); !strings.Contains(notes, c.note) {
			t.Errorf("%s: %s", c.name, notes)
		}
	}
}

// Every kind of value gives what its text would.
func TestValues(t *testing.T) {
	at := func(n int) time.Time { return time.Date(2025, 7, 1, 10, n, 0, 0, time.UTC) }
	when := columnartest.Column{Name: "when", Node: parquet.Timestamp(parquet.Millisecond), Values: columnartest.Times([]time.Time{at(0), at(1), at(2), at(3)}, 1e3)}
	for _, c := range []struct {
		name         string
		temp, window columnartest.Column
		want         string
	}{
		{"double, boolean", columnartest.Column{Node: number64, Values: []any{20.1, nil, math.NaN(), 1e-7}}, columnartest.Column{Node: truth, Values: []any{true, false, nil, true}},
			`0 = 20.1|1 = 1|0 missing ""|1 = 0|0 missing ""|0 = 1e-07|1 = 1`},
		{"float, words", columnartest.Column{Node: number32, Values: []any{float32(20.1), float32(21.7), nil, float32(math.Inf(1))}}, columnartest.Column{Node: coded, Values: []any{"Open", "Closed", nil, "ajar"}},
			`0 = 20.1|1 = 1|0 = 21.7|1 = 0|0 missing ""|0 not a number "+Inf"|1 unknown word "ajar"`},
		{"decimal, numbers", columnartest.Column{Node: parquet.Optional(parquet.Decimal(2, 6, parquet.Int32Type)), Values: []any{int32(2010), int32(-5), int32(7), nil}}, columnartest.Column{Node: parquet.Optional(parquet.Int(8)), Values: []any{int32(1), int32(0), int32(1), nil}},
			`0 = 20.1|1 = 1|0 = -0.05|1 = 0|0 = 0.07|1 = 1|0 missing ""`},
		{"text, unsigned", columnartest.Column{Node: parquet.Optional(parquet.String()), Values: []any{"20.1", "", "n/a", "warm"}}, columnartest.Column{Node: parquet.Optional(parquet.Uint(32)), Values: []any{uint32(1), uint32(math.MaxUint32), uint32(0), uint32(0)}},
			`0 = 20.1|1 = 1|0 missing ""|1 unknown word "4294967295"|0 missing "n/a"|1 = 0|0 not a number "warm"|1 = 0`},
	} {
		c.temp.Name, c.window.Name = "temp", "window"
		f, err := openBytes(t, write(t, 3, []columnartest.Column{when, c.temp, c.window}), site.Log{Name: "x"})
		if err != nil {
			t.Errorf("%s: %v", c.name, err)
			continue
		}
		var got []string
		for _, l := range readAll(t, f).lines {
			l = strings.TrimPrefix(l, "2025-07-01 10:0")
			_, l, _ = strings.Cut(l, " ")
			if rest, ok := strings.CutPrefix(l, "2: "); ok {
				l = rest
			}
			if i := strings.Index(l, ": "); i >= 0 && i < 3 {
				l = l[i+2:]
			}
			got = append(got, l)
		}
		if g := strings.Join(got, "|"); g != c.want {
			t.Errorf("%s:\n%s\nwant\n%s", c.name, g, c.want)
		}
	}
	for h, want := range map[uint16]float64{0x3c00: 1, 0xc000: -2, 0x7bff: 65504, 0x0001: math.Ldexp(1, -24), 0x3555: 0.333251953125} { // IEEE 754-2019, binary16
		if got := float16(h); got != want {
			t.Errorf("binary16 %#x: %v, want %v", h, got, want)
		}
	}
}

// A table with names in a column, over several row groups, in any order of
// rows, is like its text.
func TestLong(t *testing.T) {
	var when []time.Time
	var name, value []any
	text := "when,point,value\n"
	for n := range 3000 {
		w := time.Date(2025, 7, 1, 0, n/3, 0, 0, time.UTC)
		k, v := []string{"temp", "co2", "spare"}[n%3], 400+float64(n%70)/4
		when, name, value = append(when, w), append(name, k), append(value, v)
		text += fmt.Sprintf("%s,%s,%v\n", w.Format("2006-01-02T15:04:05Z"), k, v)
	}
	b := write(t, 700, []columnartest.Column{{Name: "point", Node: parquet.Encoded(parquet.String(), &parquet.RLEDictionary), Values: name},
		{Name: "value", Node: number64, Values: value}, {Name: "when", Node: parquet.Timestamp(parquet.Nanosecond), Values: columnartest.Times(when, 1e9)}})
	log := site.Log{Name: "x", Layout: site.Long, KeyColumns: []string{"point"}, ValueColumns: []string{"value"}}
	f, err := openBytes(t, b, log)
	if err != nil {
		t.Fatal(err)
	}
	dir := t.TempDir()
	if err := os.WriteFile(filepath.Join(dir, "x.csv"), []byte(text), 0o644); err != nil {
		t.Fatal(err)
	}
	files, _ := logfile.Find(dir, "x.csv")
	c, err := tabular.Open(theSite(t, dir), &log, files[0], nil)
	if err != nil {
		t.Fatal(err)
	}
	got, want := readAll(t, f), readAll(t, c)
	if d := cmp.Diff(want.lines, got.lines); d != "" || len(got.lines) != 3000 {
		t.Errorf("%d lines: %s", len(got.lines), d)
	}
	if f.Describe().Rows != 3000 {
		t.Errorf("%+v", f.Describe())
	}
}

// Every kind of compression gives the values written, however well they pack;
// LZ4, which the library misreads, is refused.
func TestCodecs(t *testing.T) {
	var when []time.Time
	var tight, loose []any
	x := uint64(1)
	for n := range 5000 {
		when = append(when, time.Date(2025, 7, 1, 0, n, 0, 0, time.UTC))
		x = x*6364136223846793005 + 1442695040888963407
		tight, loose = append(tight, 400+float64(n/1000)), append(loose, 10+float64(x>>11)/float64(1<<53)*20)
	}
	for _, codec := range []compress.Codec{&parquet.Uncompressed, &parquet.Snappy, &parquet.Gzip, &parquet.Brotli, &parquet.Zstd, &parquet.Lz4Raw} {
		for _, version := range []int{1, 2} {
			pack := func(n parquet.Node) parquet.Node {
				return parquet.Compressed(parquet.Encoded(n, &parquet.Plain), codec)
			}
			b := write(t, 3000, []columnartest.Column{{Name: "when", Node: pack(parquet.Timestamp(parquet.Millisecond)), Values: columnartest.Times(when, 1e3)},
				{Name: "temp", Node: pack(number64), Values: loose}, {Name: "co2", Node: pack(number64), Values: tight}}, parquet.DataPageVersion(version), parquet.PageBufferSize(9000))
			f, err := openBytes(t, b, site.Log{Name: "x"})
			if codec == &parquet.Lz4Raw {
				if err == nil || !strings.Contains(err.Error(), "packed with LZ4, which is not read; hint: write it with Snappy or Zstandard") {
					t.Error(err)
				}
				continue
			}
			if err != nil {
				t.Errorf("%v, pages %d: %v", codec, version, err)
				continue
			}
			r := readAll(t, f)
			for n := range when {
				at := when[n].Format("2006-01-02 15:04:05")
				if want := fmt.Sprintf("%s 0 = %v", at, loose[n]); r.lines[2*n+1] != want {
					t.Errorf("%v, pages %d: %s, want %s", codec, version, r.lines[2*n+1], want)
					break
				}
				if want := fmt.Sprintf("%s 2 = %v", at, tight[n]); r.lines[2*n] != want {
					t.Errorf("%v, pages %d: %s, want %s", codec, version, r.lines[2*n], want)
					break
				}
			}
		}
	}
}

// Units are found where writers put them, and one that contradicts the points
// table is said.
func TestUnits(t *testing.T) {
	cols := []columnartest.Column{{Name: "when", Node: parquet.Timestamp(parquet.Millisecond), Values: []any{int64(1751364000000)}},
		{Name: "temp", Node: number64, Values: []any{70.0}}, {Name: "co2", Node: number64, Values: []any{500.0}}}
	for _, o := range [][]parquet.WriterOption{
		{parquet.KeyValueMetadata("temp.unit", "degF"), parquet.KeyValueMetadata("unit:co2", "ppm")},
		{parquet.KeyValueMetadata("units", `{"temp": "degF", "co2": "ppm"}`)},
		{parquet.KeyValueMetadata("pandas", `{"attributes": {"units": {"temp": "degF", "co2": "ppm"}}, "columns": []}`)},
	} {
		f, err := openBytes(t, write(t, 10, cols, o...), site.Log{Name: "x"})
		if err != nil {
			t.Fatal(err)
		}
		if d := cmp.Diff(map[string]string{"temp": "degF", "co2": "ppm"}, f.Units()); d != "" {
			t.Error(d)
		}
		if r := readAll(t, f); len(r.issues) != 1 || r.issues[0] != `column "temp" is in "degF" by the file's metadata, the points table says "degC"` {
			t.Errorf("%q", r.issues)
		}
	}
}

// Groups and lists are left out and named.
func TestNestedColumnsAreLeftOut(t *testing.T) {
	type inner struct {
		A float64 `parquet:"a"`
	}
	type row struct {
		When time.Time `parquet:"when,timestamp(microsecond)"`
		Temp float64   `parquet:"temp"`
		List []float64 `parquet:"list"`
		In   inner     `parquet:"in"`
	}
	p := filepath.Join(t.TempDir(), "n.parquet")
	if err := parquet.WriteFile(p, []row{{time.Unix(1751364000, 0), 20.5, []float64{1, 2}, inner{1}}, {time.Unix(1751364600, 0), 21.5, nil, inner{1}}}); err != nil {
		t.Fatal(err)
	}
	b, _ := os.ReadFile(p)
	f, err := openBytes(t, b, site.Log{Name: "x"})
	if err != nil {
		t.Fatal(err)
	}
	r := readAll(t, f)
	if d := cmp.Diff([]string{"2025-07-01 10:00:00 0 = 20.5", "2025-07-01 10:10:00 0 = 21.5"}, r.lines); d != "" {
		t.Error(d)
	}
	if notes := strings.Join(f.Describe().Dialect, "; "); !strings.Contains(notes, `left out: "list", "in"`) {
		t.Error(notes)
	}
}

func sample(t testing.TB) []byte {
	var when []time.Time
	var temp, window, co2 []any
	for n := range 2000 {
		when = append(when, time.Date(2025, 7, 1, 0, n, 0, 0, time.UTC))
		temp, window, co2 = append(temp, 20+float64(n%40)/8), append(window, []any{"Open", "Closed", nil}[n%3]), append(co2, any(float32(400+n%300)))
	}
	return write(t, 900, []columnartest.Column{{Name: "when", Node: parquet.Compressed(parquet.Timestamp(parquet.Microsecond), &parquet.Zstd), Values: columnartest.Times(when, 1e6)},
		{Name: "temp", Node: parquet.Compressed(number64, &parquet.Snappy), Values: temp}, {Name: "window", Node: coded, Values: window}, {Name: "co2", Node: parquet.Compressed(number32, &parquet.Gzip), Values: co2}}, parquet.PageBufferSize(2000))
}

// A file cut anywhere is an error that names it, not a panic and not fewer
// readings.
func TestCutOff(t *testing.T) {
	whole := sample(t)
	for n := 4; n < len(whole); n += 1 + len(whole)/200 {
		if f, err := openBytes(t, whole[:n], site.Log{Name: "x"}); err == nil {
			t.Errorf("%d of %d bytes: opened as %v", n, len(whole), f.Describe())
		} else if !strings.HasPrefix(err.Error(), "x.parquet: Parquet file: ") {
			t.Error(err)
		}
	}
}

// Bytes changed anywhere give an error or readings; checksums are optional in
// the format, so values may change unseen.
func TestFlippedBytes(t *testing.T) {
	whole := sample(t)
	refused := 0
	for n := 0; n < len(whole); n += 1 + len(whole)/400 {
		b := append([]byte(nil), whole...)
		b[n] ^= 0xff
		if string(b[:4]) != "PAR1" {
			continue
		}
		if err := readSafely(t, b); err != nil {
			refused++
		}
	}
	if refused < 50 {
		t.Errorf("only %d refused", refused)
	}
}

// readSafely reads what can be read.
func readSafely(t testing.TB, b []byte) error {
	f, err := openBytes(t, b, site.Log{Name: "x"})
	if err != nil {
		return err
	}
	var ms []tabular.Match
	for i, p := range points {
		if c := f.Frame().Column(p.Column); c >= 0 {
			ms = append(ms, tabular.Match{Point: i, Column: c})
		}
	}
	f.SetMatches(ms)
	f.Settle("", "")
	return f.Read(context.Background(), &record{})
}

// FuzzRead: no file panics or asks for a machine's memory.
func FuzzRead(f *testing.F) {
	f.Add(sample(f))
	f.Add(write(f, 10, []columnartest.Column{{Name: "when", Node: parquet.Leaf(parquet.Int96Type), Values: []any{deprecated.Int96{1, 2, 2460000}}}, {Name: "temp", Node: number64, Values: []any{1.5}}}))
	f.Add([]byte("PAR1\x15\x00\x00\x00\x00\x04\x00\x00\x00PAR1"))
	f.Fuzz(func(t *testing.T, b []byte) {
		if len(b) < 4 || string(b[:4]) != "PAR1" {
			return
		}
		_ = readSafely(t, b)
	})
}
