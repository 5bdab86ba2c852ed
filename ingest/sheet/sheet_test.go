package sheet

import (
	"context"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"
	_ "time/tzdata"

	"github.com/google/go-cmp/cmp"
	"github.com/xuri/excelize/v2"

	"sashlog/configs/site"
	"sashlog/ingest/logfile"
	"sashlog/ingest/reading"
	"sashlog/ingest/tabular"
)

type record struct {
	lines  []string
	issues []string
}

func (r *record) Reading(p int, at int64, v float64) {
	r.lines = append(r.lines, fmt.Sprintf("%s %d = %.6g", time.Unix(at, 0).UTC().Format("2006-01-02 15:04:05"), p, v))
}
func (r *record) Reject(p int, why reading.Reason, at reading.Where, text string) {
	r.lines = append(r.lines, fmt.Sprintf("row %d: %d %s %q", at.Line, p, why, text))
}
func (r *record) Issue(i reading.Issue) { r.issues = append(r.issues, i.Text) }

var points = []site.Point{
	{Source: "x", Column: "Temp", Quantity: site.AirTemp, Unit: "degC", Logging: site.Sampled},
	{Source: "x", Column: "Window", Quantity: site.Window, Logging: site.COV},
	{Source: "x", Column: "CO2", Quantity: site.CO2, Unit: "ppm", Logging: site.Sampled},
}

// workbook writes rows from row 1 of a sheet into a new workbook, beside a
// sheet of notes; times become real dates.
func workbook(t testing.TB, date1904 bool, rows [][]any) string {
	t.Helper()
	x := excelize.NewFile()
	defer x.Close()
	if date1904 {
		if err := x.SetWorkbookProps(&excelize.WorkbookPropsOptions{Date1904: &date1904}); err != nil {
			t.Fatal(err)
		}
	}
	if _, err := x.NewSheet("Data"); err != nil {
		t.Fatal(err)
	}
	x.SetCellValue("Sheet1", "A1", "Notes")
	for i, row := range rows {
		cell, _ := excelize.CoordinatesToCellName(1, i+1)
		if err := x.SetSheetRow("Data", cell, &row); err != nil {
			t.Fatal(err)
		}
	}
	p := filepath.Join(t.TempDir(), "book.xlsx")
	if err := x.SaveAs(p); err != nil {
		t.Fatal(err)
	}
	return p
}

func openAt(t testing.TB, p string, log site.Log) (*Book, error) {
	t.Helper()
	loc, err := time.LoadLocation("Europe/Zurich")
	if err != nil {
		t.Fatal(err)
	}
	files, bad := logfile.Find(filepath.Dir(p), filepath.Base(p))
	if len(bad) > 0 {
		t.Fatal(bad)
	}
	if files[0].Kind != logfile.Workbook {
		t.Fatalf("kind %d", files[0].Kind)
	}
	s := &site.Site{Location: loc, Dir: filepath.Dir(p), Points: points}
	b, err := Open(s, &log, files[0], []string{"Temp", "Window", "CO2"})
	if err != nil {
		return nil, err
	}
	var ms []tabular.Match
	for i, pt := range points {
		if c := b.Frame().Column(pt.Column); c >= 0 {
			ms = append(ms, tabular.Match{Point: i, Column: c})
		}
	}
	b.SetMatches(ms)
	b.Settle("", "")
	return b, nil
}

func readAll(t testing.TB, b *Book) *record {
	t.Helper()
	var r, again record
	if err := b.Read(context.Background(), &r); err != nil {
		t.Fatal(err)
	}
	if err := b.Read(context.Background(), &again); err != nil {
		t.Fatal(err)
	}
	if d := cmp.Diff(r, again, cmp.AllowUnexported(record{})); d != "" {
		t.Fatal("a second pass differs", d)
	}
	return &r
}

func at(s string) time.Time {
	t, err := time.Parse("2006-01-02 15:04", s)
	if err != nil {
		panic(err)
	}
	return t
}

func TestWorkbook(t *testing.T) {
	rows := [][]any{
		{"Trend export, building A"},
		{},
		{"Time", "Temp", "Window", "CO2", "Spare"},
		{at("2025-03-29 23:45"), 20.5, "Open", 400, 1},
		{at("2025-03-30 01:45"), "21.5", nil, -999},
		{at("2025-03-30 02:15"), 22.5, true, 410},
		{at("2025-03-30 03:00"), 23.5, "Zu"},
		{"yesterday", 24.5, "Open", 420},
		{at("2025-07-01 12:00"), "#N/A", "ajar", "n/a"},
		{"2025-07-01 12:05", 25.5, false, 1234.5},
	}
	want := []string{
		"2025-03-29 22:45:00 0 = 20.5", "2025-03-29 22:45:00 1 = 1", "2025-03-29 22:45:00 2 = 400",
		"2025-03-30 00:45:00 0 = 21.5", "row 5: 2 missing \"\"",
		"row 6: 0 skipped local hour \"\"", "row 6: 1 skipped local hour \"\"", "row 6: 2 skipped local hour \"\"",
		"2025-03-30 01:00:00 0 = 23.5", "2025-03-30 01:00:00 1 = 0", "row 7: 2 missing \"\"",
		"row 8: 0 unreadable time \"yesterday\"", "row 8: 1 unreadable time \"yesterday\"", "row 8: 2 unreadable time \"yesterday\"",
		"row 9: 0 missing \"#N/A\"", "row 9: 1 unknown word \"ajar\"", "row 9: 2 missing \"n/a\"",
		"2025-07-01 10:05:00 0 = 25.5", "2025-07-01 10:05:00 1 = 0", "2025-07-01 10:05:00 2 = 1234.5",
	}
	for _, date1904 := range []bool{false, true} {
		p := workbook(t, date1904, rows)
		b, err := openAt(t, p, site.Log{Name: "x", Sheet: "data"})
		if err != nil {
			t.Fatal(err)
		}
		r := readAll(t, b)
		if d := cmp.Diff(want, r.lines); d != "" {
			t.Errorf("1904 %v: %s", date1904, d)
		}
		l := b.Describe()
		n, sha, err := logfile.SumFile(p)
		if err != nil || l.Bytes != n || l.SHA256 != sha || l.Rows != 7 || l.Path != "book.xlsx" {
			t.Errorf("%+v", l)
		}
		if n := b.ClockNotes(); len(n) != 1 || n[0].Skipped != 3 {
			t.Errorf("%+v", n)
		}
	}
}

// The same cells as a text file give the same readings.
func TestWorkbookIsLikeText(t *testing.T) {
	loc, _ := time.LoadLocation("Europe/Zurich")
	rows := [][]any{{"Time", "Temp", "Window", "CO2"}}
	text := "Time,Temp,Window,CO2\n"
	start := time.Date(2025, 10, 25, 12, 0, 0, 0, loc)
	for i := 0; i < 200; i++ {
		wall := start.Add(time.Duration(i) * 10 * time.Minute).Format("2006-01-02 15:04")
		w := []string{"Open", "Closed", ""}[i%3]
		rows = append(rows, []any{at(wall), float64(i%80) / 4, w, 400 + i})
		text += fmt.Sprintf("%s,%v,%s,%d\n", wall, float64(i%80)/4, w, 400+i)
	}
	b, err := openAt(t, workbook(t, false, rows), site.Log{Name: "x", Sheet: "Data"})
	if err != nil {
		t.Fatal(err)
	}
	book := readAll(t, b)

	dir := t.TempDir()
	if err := os.WriteFile(filepath.Join(dir, "t.csv"), []byte(text), 0o644); err != nil {
		t.Fatal(err)
	}
	files, _ := logfile.Find(dir, "t.csv")
	s := &site.Site{Location: loc, Dir: dir, Points: points}
	f, err := tabular.Open(s, &site.Log{Name: "x"}, files[0], nil)
	if err != nil {
		t.Fatal(err)
	}
	f.Settle("", "")
	f.SetMatches([]tabular.Match{{Point: 0, Column: 1}, {Point: 1, Column: 2}, {Point: 2, Column: 3}})
	var plain record
	if err := f.Read(context.Background(), &plain); err != nil {
		t.Fatal(err)
	}
	if d := cmp.Diff(plain.lines, book.lines); d != "" {
		t.Error(d)
	}
	if n := b.ClockNotes(); len(book.lines) < 500 || len(n) != 1 || n[0].Repeated == 0 {
		t.Errorf("%d lines, %+v", len(book.lines), n)
	}
}

func TestDecimalCommaInTextCells(t *testing.T) {
	rows := [][]any{{"Datum", "Temp"}, {at("2025-07-01 12:00"), "21,5"}, {at("2025-07-01 12:05"), 21.75}}
	b, err := openAt(t, workbook(t, false, rows), site.Log{Name: "x", Sheet: "Data", Decimal: ','})
	if err != nil {
		t.Fatal(err)
	}
	want := []string{"2025-07-01 10:00:00 0 = 21.5", "2025-07-01 10:05:00 0 = 21.75"}
	if d := cmp.Diff(want, readAll(t, b).lines); d != "" {
		t.Error(d)
	}
}

func TestWorkbookRefused(t *testing.T) {
	p := workbook(t, false, [][]any{{"Time", "Temp"}})
	for _, c := range []struct{ sheet, want string }{
		{"Nope", `sheet "Nope" is not in the workbook, which has ["Sheet1" "Data"]`},
		{"Sheet1", "no column that holds the time"},
	} {
		if _, err := openAt(t, p, site.Log{Name: "x", Sheet: c.sheet}); err == nil || !strings.Contains(err.Error(), c.want) || !strings.HasPrefix(err.Error(), "book.xlsx: ") {
			t.Errorf("%s: %v", c.sheet, err)
		}
	}
	raw, err := os.ReadFile(p)
	if err != nil {
		t.Fatal(err)
	}
	cut := filepath.Join(t.TempDir(), "cut.xlsx")
	if err := os.WriteFile(cut, raw[:len(raw)/2], 0o644); err != nil {
		t.Fatal(err)
	}
	if _, bad := logfile.Find(filepath.Dir(cut), "cut.xlsx"); len(bad) != 1 || !strings.Contains(bad[0].Error(), "cut.xlsx: damaged zip archive") {
		t.Errorf("%v", bad)
	}
}
