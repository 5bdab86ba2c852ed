package sources

import (
	"archive/zip"
	"bytes"
	"context"
	"errors"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
	"time"

	"sashlog/configs/site"
	"sashlog/ingest/logfile"
)

// Files that lie beside logs are passed over by name; a log that cannot be
// used is not.
func TestForeignFilesArePassedOver(t *testing.T) {
	log := "Time,T1\n2025-01-01 00:00,20.5\n2025-01-01 00:05,20.6\n"
	others := map[string]string{
		"readme.txt": "Read me first\n\nExported by hand; see the manual.\nNothing else; really.\n",
		"notes.md":   "# Notes\n\nroom, sensor, remark\nnorth, new, none\n",
		"plan.pdf":   "%PDF-1.4\n",
	}
	for _, tc := range []struct {
		name   string
		more   map[string]string
		source string
		refuse string // the file that must be refused
	}{
		{name: "beside others", more: others, source: "f"},
		{name: "log without a time column", more: map[string]string{"b.csv": "When,T1\nyesterday,20.5\ntoday,21\n"}, source: "f", refuse: "b.csv"},
		{name: "named by a point", more: map[string]string{"readme.txt": others["readme.txt"]}, source: "readme.txt", refuse: "readme.txt"},
	} {
		for _, packed := range []bool{false, true} {
			dir := t.TempDir()
			path := "logs"
			files := map[string]string{"a.csv": log}
			for n, text := range tc.more {
				files[n] = text
			}
			if packed {
				path = "logs.zip"
				var b bytes.Buffer
				z := zip.NewWriter(&b)
				for n, text := range files {
					w, err := z.Create(n)
					if err != nil {
						t.Fatal(err)
					}
					w.Write([]byte(text))
				}
				if err := errors.Join(z.Close(), os.WriteFile(filepath.Join(dir, path), b.Bytes(), 0o644)); err != nil {
					t.Fatal(err)
				}
			} else {
				for n, text := range files {
					if err := errors.Join(os.MkdirAll(filepath.Join(dir, path), 0o755), os.WriteFile(filepath.Join(dir, path, n), []byte(text), 0o644)); err != nil {
						t.Fatal(err)
					}
				}
			}
			s := &site.Site{Location: time.UTC, Dir: dir, Logs: []site.Log{{Path: path, Name: "f"}},
				Points: []site.Point{{Source: "f", Column: "T1", Quantity: site.AirTemp, Unit: "degC"}}}
			if tc.source != "f" {
				s.Points = append(s.Points, site.Point{Source: tc.source, Column: "T2", Quantity: site.AirTemp, Unit: "degC"})
			}
			set, err := Open(context.Background(), s)
			if err != nil {
				t.Fatal(err)
			}
			var over []string
			refused := ""
			for _, p := range set.Problems {
				var f logfile.Failure
				switch {
				case p.Kind == PassedOver:
					over = append(over, p.Where.File)
				case p.Kind.Fatal() && errors.As(p.Err, &f):
					refused += f.Name
				}
			}
			want := 0
			if tc.refuse == "" {
				want = len(tc.more)
			}
			if len(over) != want || tc.refuse == "" != (refused == "") || !strings.HasSuffix(refused, tc.refuse) || len(set.Sources) != 1 {
				slices.Sort(over)
				t.Errorf("%s, packed %v: passed over %q, refused %q, %d sources", tc.name, packed, over, refused, len(set.Sources))
			}
		}
	}
}
