package tabular

import (
	"bytes"
	"compress/gzip"
	"context"
	"errors"
	"fmt"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"reflect"
	"strings"
	"testing"
	"time"
	_ "time/tzdata"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"
	"golang.org/x/text/encoding/charmap"
	"golang.org/x/text/encoding/unicode"
	"pgregory.net/rapid"

	"sashlog/configs/site"
	"sashlog/ingest/logfile"
	"sashlog/ingest/reading"
)

type event struct {
	Point  int
	At     int64
	Value  float64
	Reason reading.Reason
	Line   int64
	Text   string
}

type record struct {
	events []event
	issues []string
	cols   []int
}

func (r *record) Reading(p int, at int64, v float64) {
	r.events = append(r.events, event{Point: p, At: at, Value: v})
}

func (r *record) Reject(p int, why reading.Reason, at reading.Where, text string) {
	r.events = append(r.events, event{Point: p, Reason: why, Line: at.Line, Text: text})
	r.cols = append(r.cols, at.Col)
}

func (r *record) Issue(i reading.Issue) { r.issues = append(r.issues, i.Text) }

func (r *record) accepted() (n int) {
	for _, e := range r.events {
		if e.Reason == reading.Accepted {
			n++
		}
	}
	return n
}

func zurich(t testing.TB) *time.Location {
	loc, err := time.LoadLocation("Europe/Zurich")
	if err != nil {
		t.Fatal(err)
	}
	return loc
}

// openBytes opens a file of the text with points for the columns named, all in
// one log.
func openBytes(t testing.TB, name string, text []byte, log site.Log, points []site.Point) (*File, error) {
	t.Helper()
	dir := t.TempDir()
	if err := os.WriteFile(filepath.Join(dir, name), text, 0o644); err != nil {
		t.Fatal(err)
	}
	files, bad := logfile.Find(dir, name)
	if len(bad) > 0 {
		t.Fatal(bad)
	}
	s := &site.Site{Location: zurich(t), Dir: dir, Points: points}
	var wanted []string
	for _, p := range points {
		wanted = append(wanted, p.Column)
	}
	f, err := Open(s, &log, files[0], wanted)
	if err != nil {
		return nil, err
	}
	var ms []Match
	for i, p := range points {
		switch f.Frame().Layout {
		case site.Wide:
			if c := f.Frame().Column(p.Column); c >= 0 {
				ms = append(ms, Match{i, c})
			}
		case site.PerPoint:
			ms = append(ms, Match{i, f.Frame().Values[0]})
		default:
			ms = append(ms, Match{i, -1})
		}
	}
	f.SetMatches(ms)
	o, w := log.DateOrder, ""
	if o == "" {
		o, w, _ = f.Prover().Proven()
	}
	f.Settle(o, w)
	return f, nil
}

func read(t testing.TB, name string, text []byte, log site.Log, points []site.Point) *record {
	t.Helper()
	f, err := openBytes(t, name, text, log, points)
	if err != nil {
		t.Fatal(err)
	}
	var r record
	if err := f.Read(context.Background(), &r); err != nil {
		t.Fatal(err)
	}
	var again record
	if err := f.Read(context.Background(), &again); err != nil {
		t.Fatal(err)
	}
	if d := cmp.Diff(r.events, again.events); d != "" {
		t.Fatalf("a second pass differs: %s", d)
	}
	return &r
}

var wideHeader = []string{"Time", "A", "B", "W", "S"}

func widePoints() []site.Point {
	return []site.Point{
		{Source: "x", Column: "A", Quantity: site.AirTemp, Unit: "degC"},
		{Source: "x", Column: "B", Quantity: site.CO2, Unit: "ppm", Logging: site.COV},
		{Source: "x", Column: "W", Quantity: site.Window, Logging: site.COV},
		{Source: "x", Column: "S", Quantity: site.PlantStatus},
		{Source: "x", Column: "A", Quantity: site.OperativeTemp, Unit: "degC"}, // a column of two points
	}
}

// A file and the same file with every cell quoted (which takes the slow way
// through the splitter) give the same readings and rejects.
func TestPlainLinesAreLikeQuoted(t *testing.T) {
	cells := []string{"", "21.5", "-3", "400", "Open", "Closed", "1", "0", "On", "Off", "bad", "x", "-999", "1,5", "21.5 \u00b0C", "NaN", "999999999999999999", " 20 ", "20.", ".5", "2", "\u2212 4"}
	accepted := 0
	rapid.Check(t, func(rt *rapid.T) {
		start := time.Date(2025, 10, 25, 22, 0, 0, 0, time.UTC)
		n := rapid.IntRange(1, 30).Draw(rt, "rows")
		timeAt := rapid.IntRange(0, 4).Draw(rt, "time column")
		perm := append(append(append([]string{}, wideHeader[1:1+timeAt]...), "Time"), wideHeader[1+timeAt:]...)
		rows := [][]string{perm}
		for i := 0; i < n; i++ {
			ts := start.Add(time.Duration(i) * 20 * time.Minute).In(zurich(t)).Format("2006-01-02 15:04")
			if rapid.IntRange(0, 15).Draw(rt, "bad time") == 0 {
				ts = "?"
			}
			var row []string
			for c := range perm {
				if c == timeAt {
					row = append(row, ts)
					continue
				}
				row = append(row, rapid.SampledFrom(cells).Draw(rt, "cell"))
			}
			if rapid.IntRange(0, 9).Draw(rt, "short") == 0 {
				row = row[:rapid.IntRange(1, len(row)).Draw(rt, "cells")]
			}
			if len(row) == 1 && row[0] == "" {
				row[0] = "z" // a blank line is no row
			}
			rows = append(rows, row)
		}
		eol := rapid.SampledFrom([]string{"\n", "\r\n"}).Draw(rt, "line end")
		var plain, quoted bytes.Buffer
		for _, row := range rows {
			plain.WriteString(strings.Join(row, ";") + eol)
			quoted.WriteString("\"" + strings.Join(row, "\";\"") + "\"" + eol)
		}
		text := plain.Bytes()
		if rapid.Bool().Draw(rt, "no last line end") {
			text = bytes.TrimRight(text, "\r\n")
		}
		log := site.Log{Name: "x", Separator: ';', Decimal: '.', TimeColumn: "Time", HeaderRow: 1}
		a, b := read(t, "a.csv", text, log, widePoints()), read(t, "b.csv", quoted.Bytes(), log, widePoints())
		if d := cmp.Diff(a.events, b.events); d != "" {
			rt.Fatalf("plain and quoted differ:\n%s\n%s", plain.String(), d)
		}
		if !reflect.DeepEqual(a.issues, b.issues) {
			rt.Fatalf("issues differ: %q and %q", a.issues, b.issues)
		}
		accepted += a.accepted()
	})
	if accepted == 0 {
		t.Error("nothing was accepted in any of the runs")
	}
}

// blockRecord takes blocks, and hands them on reading by reading.
type blockRecord struct {
	record
	blocks int
}

func (r *blockRecord) Gap(p int, at int64) {
	r.events = append(r.events, event{Point: p, At: at, Value: math.NaN()})
}

func (r *blockRecord) Block(b *reading.Block) *reading.Block {
	r.blocks++
	for i, p := range b.Points {
		for k, v := range b.Column(i) {
			if math.IsNaN(v) {
				r.Gap(p, b.UnixS[k])
			} else if v != reading.Nothing {
				r.Reading(p, b.UnixS[k], v)
			}
		}
	}
	return reading.NewBlock(b.Points)
}

// ungrouped takes the same without blocks.
type ungrouped struct{ record }

func (r *ungrouped) Gap(p int, at int64) {
	r.events = append(r.events, event{Point: p, At: at, Value: math.NaN()})
}

// Rows taken as blocks hold, point by point, the readings, silences and
// rejects of rows taken one by one, in the same order: with empty and bad
// cells, bad times, short and quoted rows, and a repeated hour in between.
func TestBlocksAreLikeRows(t *testing.T) {
	cells := []string{"", "21.5", "-3", "400", "bad", "-999", "20.", "2"}
	states := []string{"Open", "Closed", "1", "0", "", "---"}
	blocks, held := 0, 0
	rapid.Check(t, func(rt *rapid.T) {
		start := time.Date(2025, 10, 25, 22, 0, 0, 0, time.UTC)
		text := []byte("Time;A;B;W\n")
		for i := range rapid.IntRange(1, 200).Draw(rt, "rows") {
			ts := start.Add(time.Duration(i) * 5 * time.Minute).In(zurich(t)).Format("2006-01-02 15:04")
			kind := rapid.IntRange(0, 40).Draw(rt, "kind")
			if kind == 0 {
				ts = "?"
			}
			row := fmt.Sprintf("%s;%s;%s;%s", ts, rapid.SampledFrom(cells).Draw(rt, "a"), rapid.SampledFrom(cells).Draw(rt, "b"), rapid.SampledFrom(states).Draw(rt, "w"))
			switch kind {
			case 1:
				row = ts + ";7"
			case 2:
				row = "\"" + strings.ReplaceAll(row, ";", "\";\"") + "\""
			}
			text = append(text, row+"\n"...)
		}
		points := []site.Point{{Column: "A", Quantity: site.AirTemp, Unit: "degC"}, {Column: "B", Quantity: site.CO2, Unit: "ppm", Logging: site.COV}, {Column: "W", Quantity: site.Window, Logging: site.COV}}
		f, err := openBytes(t, "x.csv", text, site.Log{Separator: ';', Decimal: '.', TimeColumn: "Time", HeaderRow: 1}, points)
		if err != nil {
			rt.Skip(err)
		}
		var grouped blockRecord
		var single ungrouped
		if err := errors.Join(f.Read(context.Background(), &grouped), f.Read(context.Background(), &single)); err != nil {
			rt.Fatal(err)
		}
		for p := range points {
			of := func(all []event, rejects bool) (out []event) {
				for _, e := range all {
					if e.Point == p && (e.Reason != reading.Accepted) == rejects {
						out = append(out, e)
					}
				}
				return out
			}
			for _, rejects := range []bool{false, true} {
				if d := cmp.Diff(of(single.events, rejects), of(grouped.events, rejects), cmpopts.EquateNaNs()); d != "" {
					rt.Fatalf("point %d, rejects %v: blocks differ from rows:\n%s", p, rejects, d)
				}
			}
		}
		if !reflect.DeepEqual(single.issues, grouped.issues) {
			rt.Fatalf("issues differ: %q and %q", single.issues, grouped.issues)
		}
		blocks += grouped.blocks
		held += int(bytes.Count(text, []byte("2025-10-26 02:30")))
	})
	if blocks == 0 || held == 0 {
		t.Errorf("%d blocks, %d rows of the repeated hour: nothing was tried", blocks, held)
	}
}

const sample = "Zeit;Temp. \u00b0C;CO2;Fenster\n2025-07-01 00:00;21,5;430;Ge\u00f6ffnet\n2025-07-01 00:10;21,7 \u00b0C;440;Zu\n2025-07-01 00:20;;x\u00e4;Zu\n"

func samplePoints() []site.Point {
	return []site.Point{
		{Column: "Temp. \u00b0C", Quantity: site.AirTemp, Unit: "degC"},
		{Column: "CO2", Quantity: site.CO2, Unit: "ppm"},
		{Column: "Fenster", Quantity: site.Window},
	}
}

// The same text in every encoding gives the same readings and rejects.
func TestEncodings(t *testing.T) {
	want := read(t, "utf8.csv", []byte(sample), site.Log{}, samplePoints())
	if want.accepted() != 7 || len(want.events) != 9 {
		t.Fatalf("the plain file gives %d accepted of %d", want.accepted(), len(want.events))
	}
	enc := func(b []byte, err error) []byte {
		if err != nil {
			t.Fatal(err)
		}
		return b
	}
	u16 := func(e unicode.Endianness, bom unicode.BOMPolicy) []byte {
		return enc(unicode.UTF16(e, bom).NewEncoder().Bytes([]byte(sample)))
	}
	var zipped bytes.Buffer
	z := gzip.NewWriter(&zipped)
	z.Write([]byte(sample))
	z.Close()
	for name, text := range map[string][]byte{
		"bom.csv":        []byte("\ufeff" + sample),
		"le.csv":         u16(unicode.LittleEndian, unicode.UseBOM),
		"be.csv":         u16(unicode.BigEndian, unicode.UseBOM),
		"le-bare.csv":    u16(unicode.LittleEndian, unicode.IgnoreBOM),
		"be-bare.csv":    u16(unicode.BigEndian, unicode.IgnoreBOM),
		"windows.csv":    enc(charmap.Windows1252.NewEncoder().Bytes([]byte(sample))),
		"crlf.csv":       []byte(strings.ReplaceAll(sample, "\n", "\r\n")),
		"cr.csv":         []byte(strings.ReplaceAll(sample, "\n", "\r")),
		"gzip-in-csv":    zipped.Bytes(),
		"no-end.csv":     []byte(strings.TrimSpace(sample)),
		"blank-line.csv": []byte(strings.Replace(sample, "2025-07-01 00:10", "\n\n2025-07-01 00:10", 1)),
		"sep-line.csv":   []byte("sep=;\n" + sample),
	} {
		got := read(t, name, text, site.Log{}, samplePoints())
		for i := range got.events {
			if d := want.events[min(i, len(want.events)-1)].Line; strings.HasPrefix(name, "blank") || strings.HasPrefix(name, "sep") {
				got.events[i].Line = d
			}
		}
		if d := cmp.Diff(want.events, got.events); d != "" {
			t.Errorf("%s: %s", name, d)
		}
	}
}

func TestBadFilesAreRefusedPlainly(t *testing.T) {
	for name, c := range map[string]struct {
		text []byte
		want string
	}{
		"empty":       {nil, "the file is empty"},
		"blank":       {[]byte("\n \n"), "holds no text"},
		"bom only":    {[]byte("\xff\xfe"), "holds no text"},
		"binary":      {append([]byte("\x7fELF"), make([]byte, 300)...), "not a text file"},
		"controls":    {bytes.Repeat([]byte{1, 2, 'a'}, 100), "not a text file"},
		"prose":       {[]byte("Dear all\nplease find attached\n"), "no separator"},
		"no time":     {[]byte("a,b\n1,2\n3,4\n"), "no column that holds the time"},
		"header only": {[]byte("a,b\n"), "no column that holds the time"},
	} {
		_, err := openBytes(t, "f.csv", c.text, site.Log{}, widePoints())
		if err == nil || !strings.Contains(err.Error(), c.want) || !strings.HasPrefix(err.Error(), "f.csv: ") {
			t.Errorf("%s: %v, want %q", name, err, c.want)
		}
	}
}

// A line of ten megabytes is one row, rejected or read as any other.
func TestLongLine(t *testing.T) {
	text := "Time,A,B,W,S\n2025-07-01 00:00,21,400,Open,On\n2025-07-01 00:10," + strings.Repeat("x", 10<<20) + ",410,Open,On\n2025-07-01 00:20,22,420,Open,On\n"
	r := read(t, "long.csv", []byte(text), site.Log{}, widePoints())
	if r.accepted() != 13 || len(r.events) != 15 {
		t.Errorf("%d accepted of %d", r.accepted(), len(r.events))
	}
	f, err := openBytes(t, "endless.csv", append([]byte("Time,A\n2025-07-01 00:00,1\n"), bytes.Repeat([]byte("x"), maxRow+10)...), site.Log{}, widePoints())
	if err != nil {
		t.Fatal(err)
	}
	if err := f.Read(context.Background(), &record{}); err == nil || !strings.Contains(err.Error(), "line 3 is longer than 64 MB") {
		t.Errorf("got %v", err)
	}
}

func TestTruncatedGzip(t *testing.T) {
	var b bytes.Buffer
	z := gzip.NewWriter(&b)
	rng := rand.New(rand.NewPCG(1, 2))
	fmt.Fprintln(z, "Time,A")
	for i := 0; i < 200000; i++ {
		fmt.Fprintf(z, "%s,%d\n", time.Unix(int64(1751328000+60*i), 0).UTC().Format("2006-01-02 15:04"), rng.IntN(100))
	}
	z.Close()
	f, err := openBytes(t, "t.csv.gz", b.Bytes()[:b.Len()*9/10], site.Log{}, widePoints())
	if err != nil {
		t.Fatal(err)
	}
	var r record
	err = f.Read(context.Background(), &r)
	if err == nil || !strings.Contains(err.Error(), "t.csv.gz: the compressed data end too early") {
		t.Errorf("got %v", err)
	}
}

func TestCancelled(t *testing.T) {
	f, err := openBytes(t, "c.csv", []byte(sample), site.Log{}, samplePoints())
	if err != nil {
		t.Fatal(err)
	}
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if err := f.Read(ctx, &record{}); err != context.Canceled {
		t.Errorf("got %v", err)
	}
}

// The conversion is taken at the time of the pass.
func TestSecondPassWithAnotherConversion(t *testing.T) {
	f, err := openBytes(t, "c.csv", []byte("Time,A\n2025-07-01 00:00,68\n"), site.Log{}, []site.Point{{Column: "A", Quantity: site.AirTemp, Conversion: site.Conversion{Factor: 1}}})
	if err != nil {
		t.Fatal(err)
	}
	var r record
	f.Read(context.Background(), &r)
	f.site.Points[0].Conversion = site.Conversion{Factor: 5.0 / 9, Offset: -160.0 / 9}
	f.Read(context.Background(), &r)
	if len(r.events) != 2 || r.events[0].Value != 68 || r.events[1].Value < 19.999 || r.events[1].Value > 20.001 {
		t.Errorf("%+v", r.events)
	}
}

// Whatever a file holds, reading it does not panic, and plain rows mean what
// they mean when they are taken the general way.
func FuzzRead(f *testing.F) {
	f.Add([]byte(sample))
	f.Add([]byte("Time,A,B,W,S\n2025-10-26 02:30,21,400,Open,On\n\"2025-10-26 02:30\",21\n"))
	f.Add([]byte("\xff\xfeT\x00,\x00A\x00\n\x00"))
	f.Add([]byte("Time,A,V\n2025-10-26T02:30:00Z,A,21.25\n2025-10-26T02:31:00Z,B,-400\n2025-10-26T02:31:10Z,W,Open\n2025-10-26T02:32:10Z,W,Open\n,S,On\n"))
	f.Add([]byte("Time;A;V\r\n2025-10-26 02:30;A;21,25\r\n2025-10-26 02:31;B;400,\r\n2025-10-26 02:31;W\r\n2025-10-26 02:32;w;Closed;x"))
	f.Fuzz(func(t *testing.T, text []byte) {
		for _, log := range []site.Log{{}, {Layout: site.Long, KeyColumns: []string{"A"}}, {Layout: site.Long, KeyColumns: []string{"A"}, ValueColumns: []string{"V"}},
			{Layout: site.PerPoint, HeaderRow: -1, Separator: ','}} {
			src, err := openBytes(t, "f.csv", text, log, widePoints())
			if err != nil {
				continue
			}
			var plain, general record
			perr := src.Read(context.Background(), &plain)
			if src, err = openBytes(t, "f.csv", text, log, widePoints()); err != nil {
				t.Fatal(err)
			}
			src.general = true
			gerr := src.Read(context.Background(), &general)
			if fmt.Sprint(perr) != fmt.Sprint(gerr) {
				t.Fatalf("plain: %v, general: %v", perr, gerr)
			}
			if d := cmp.Diff(general.events, plain.events, cmpopts.EquateNaNs()); d != "" {
				t.Fatalf("layout %q: plain rows differ:\n%s", log.Layout, d)
			}
		}
	})
}
