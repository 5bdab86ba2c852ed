package sheet

import (
	"archive/zip"
	"bytes"
	"context"
	"io"
	"os"
	"path/filepath"
	"testing"
	"time"

	"sashlog/configs/site"
	"sashlog/ingest/logfile"
	"sashlog/ingest/tabular"
)

// FuzzParts changes the parts of a workbook one by one, inside an archive that
// stays whole, so that the changes reach the reader. Whatever they hold, the
// reader answers with readings, rejects or an error.
func FuzzParts(f *testing.F) {
	rows := [][]any{{"Readings of room 1", nil, nil}, {"Time", "Temp", "Window", "CO2"},
		{time.Date(2025, 3, 1, 0, 0, 0, 0, time.UTC), 20.5, "Open", 400}, {time.Date(2025, 3, 1, 1, 0, 0, 0, time.UTC), "21,5", "Closed", nil}}
	parts := map[string][]byte{}
	var names []string
	packed, err := os.ReadFile(workbook(f, false, rows))
	if err != nil {
		f.Fatal(err)
	}
	z, err := zip.NewReader(bytes.NewReader(packed), int64(len(packed)))
	if err != nil {
		f.Fatal(err)
	}
	for _, m := range z.File {
		r, err := m.Open()
		if err != nil {
			f.Fatal(err)
		}
		b, err := io.ReadAll(r)
		r.Close()
		if err != nil {
			f.Fatal(err)
		}
		parts[m.Name] = b
		names = append(names, m.Name)
	}
	for i, n := range names {
		f.Add(byte(i), parts[n])
	}
	f.Fuzz(func(t *testing.T, which byte, with []byte) {
		changed := names[int(which)%len(names)]
		var out bytes.Buffer
		w := zip.NewWriter(&out)
		for _, n := range names {
			p, err := w.Create(n)
			if err != nil {
				t.Fatal(err)
			}
			if b := parts[n]; n != changed {
				p.Write(b)
			} else {
				p.Write(with)
			}
		}
		if err := w.Close(); err != nil {
			t.Fatal(err)
		}
		path := filepath.Join(t.TempDir(), "book.xlsx")
		if err := os.WriteFile(path, out.Bytes(), 0o644); err != nil {
			t.Fatal(err)
		}
		files, _ := logfile.Find(filepath.Dir(path), "book.xlsx")
		if len(files) != 1 || files[0].Kind != logfile.Workbook {
			return
		}
		if _, err := Names(files[0]); err != nil {
			return
		}
		s := &site.Site{Location: time.UTC, Points: points}
		b, err := Open(s, &site.Log{Name: "x", Sheet: "Data"}, files[0], []string{"Temp", "Window", "CO2"})
		if err != nil {
			return
		}
		var ms []tabular.Match
		for i, pt := range points {
			if c := b.Frame().Column(pt.Column); c >= 0 {
				ms = append(ms, tabular.Match{Point: i, Column: c})
			}
		}
		b.SetMatches(ms)
		b.Settle("", "")
		var r record
		_ = b.Read(context.Background(), &r)
	})
}
