package sources

import (
	"bytes"
	"context"
	"flag"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"
	"go.yaml.in/yaml/v3"

	"sashlog/configs/site"
	"sashlog/ingest/reading"
)

var update = flag.Bool("update", false, "write want.txt of every case anew")

// A case is a folder of testdata/ingest: case.yaml says how the logs are
// mapped, want.txt what must come of them. A new case needs no Go.
type caseFile struct {
	About  string
	Zone   string
	Logs   []caseLog
	Points []casePoint
}

type caseLog struct {
	Path, Name, Layout, Sheet, Encoding string
	Keys, Values, Missing               []string
	TimeColumn                          string `yaml:"time_column"`
	DateColumn                          string `yaml:"date_column"`
	ClockColumn                         string `yaml:"clock_column"`
	HeaderRow                           int    `yaml:"header_row"`
	DateOrder                           string `yaml:"date_order"`
	TimeFormat                          string `yaml:"time_format"`
	Clock                               string
	OffsetS                             int `yaml:"offset_s"`
	Overrule                            bool
}

type casePoint struct {
	Source, Column, Quantity, Unit, Logging string
	Factor, Offset                          float64
	OpenValue                               string `yaml:"open_value"`
	Values                                  map[string]string
}

func siteOf(t *testing.T, dir string, c caseFile) *site.Site {
	t.Helper()
	loc, err := time.LoadLocation(c.Zone)
	if err != nil {
		t.Fatal(err)
	}
	s := &site.Site{Location: loc, TimeZone: c.Zone, Dir: dir}
	for _, l := range c.Logs {
		s.Logs = append(s.Logs, site.Log{Path: l.Path, Name: l.Name, Layout: site.Layout(l.Layout), Sheet: l.Sheet, Encoding: l.Encoding,
			KeyColumns: l.Keys, ValueColumns: l.Values, Missing: l.Missing, TimeColumn: l.TimeColumn, DateColumn: l.DateColumn, ClockColumn: l.ClockColumn,
			HeaderRow: l.HeaderRow, DateOrder: site.DateOrder(l.DateOrder), TimeFormat: l.TimeFormat,
			Clock: site.Clock{Kind: site.ClockKind(l.Clock), OffsetS: l.OffsetS, OverruleOffset: l.Overrule}})
	}
	for i, p := range c.Points {
		logging := site.Logging(p.Logging)
		if logging == "" {
			logging = site.Sampled
		}
		s.Points = append(s.Points, site.Point{Source: p.Source, Column: p.Column, Quantity: site.Quantity(p.Quantity), Unit: p.Unit, Logging: logging,
			Conversion: site.Conversion{Factor: p.Factor, Offset: p.Offset}, OpenValue: p.OpenValue, Values: p.Values, Line: i + 2})
	}
	return s
}

// teller writes down what a source hands over, one line each.
type teller struct {
	b    *strings.Builder
	site *site.Site
}

func (k teller) name(p int) string {
	if p < 0 {
		return "-"
	}
	return k.site.Points[p].Column
}

func (k teller) Reading(p int, at int64, v float64) {
	fmt.Fprintf(k.b, "  %s %s = %.6g\n", time.Unix(at, 0).UTC().Format("2006-01-02T15:04:05Z"), k.name(p), v)
}

func (k teller) Reject(p int, r reading.Reason, at reading.Where, text string) {
	fmt.Fprintf(k.b, "  rejected line %d, byte %d: %s: %s %q\n", at.Line, at.Col, k.name(p), r, text)
}

func (k teller) Issue(i reading.Issue) {
	fmt.Fprintf(k.b, "  issue %s: %s; hint: %s\n", k.name(i.Point), i.Text, i.Hint)
}

func tell(t *testing.T, s *site.Site) string {
	t.Helper()
	set, err := Open(context.Background(), s)
	if err != nil {
		t.Fatal(err)
	}
	var b strings.Builder
	for _, p := range set.Problems {
		fmt.Fprintf(&b, "problem %d (fatal %v) %s:%d: %s", p.Kind, p.Kind.Fatal(), p.Where.File, p.Where.Line, p.Text)
		if p.Hint != "" {
			fmt.Fprintf(&b, "; hint: %s", p.Hint)
		}
		b.WriteByte('\n')
	}
	for _, src := range set.Sources {
		fmt.Fprintf(&b, "source %s\n", src.Name())
		if err := src.Read(context.Background(), teller{&b, s}); err != nil {
			fmt.Fprintf(&b, "  error: %v\n", err)
		}
		l := src.(Source).Describe()
		fmt.Fprintf(&b, "  %d rows; %s\n", l.Rows, strings.Join(l.Dialect, "; "))
		for _, n := range src.(Source).ClockNotes() {
			fmt.Fprintf(&b, "  clock: %s\n", n.Text)
		}
	}
	return b.String()
}

func TestCases(t *testing.T) {
	dirs, err := filepath.Glob("../../testdata/ingest/*/case.yaml")
	if err != nil || len(dirs) == 0 {
		t.Fatal("no cases", err)
	}
	for _, p := range dirs {
		dir := filepath.Dir(p)
		t.Run(filepath.Base(dir), func(t *testing.T) {
			raw, err := os.ReadFile(p)
			if err != nil {
				t.Fatal(err)
			}
			var c caseFile
			d := yaml.NewDecoder(bytes.NewReader(raw))
			d.KnownFields(true)
			if err := d.Decode(&c); err != nil {
				t.Fatal(err)
			}
			got := tell(t, siteOf(t, dir, c))
			want := filepath.Join(dir, "want.txt")
			if *update {
				if err := os.WriteFile(want, []byte(got), 0o644); err != nil {
					t.Fatal(err)
				}
			}
			text, err := os.ReadFile(want)
			if err != nil {
				t.Fatal(err)
			}
			if d := cmp.Diff(string(text), got); d != "" {
				t.Error(d)
			}
		})
	}
}
