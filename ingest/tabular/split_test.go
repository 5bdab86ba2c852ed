package tabular

import (
	"bytes"
	"encoding/csv"
	"errors"
	"io"
	"reflect"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

// ours cuts text in blocks of a size, as the reader does, and returns its rows.
func ours(text []byte, sep byte, block int) (rows [][]string, lines int, stray int64) {
	s := splitter{sep: sep}
	var buf []byte
	for pos := 0; ; {
		n := min(block, len(text)-pos)
		buf = append(buf, text[pos:pos+n]...)
		pos += n
		final := pos == len(text)
		for len(buf) > 0 {
			n, ok := s.next(buf, final)
			if n == 0 {
				break
			}
			lines += s.lines
			if ok {
				row := []string{}
				for _, f := range s.fields {
					row = append(row, string(f))
				}
				rows = append(rows, row)
			}
			buf = buf[n:]
		}
		if final {
			return rows, lines, s.stray
		}
	}
}

// theirs cuts text by encoding/csv; strict reports whether it is well formed.
func theirs(text []byte, sep byte) (rows [][]string, strict bool) {
	read := func(lazy bool) (rows [][]string, err error) {
		r := csv.NewReader(bytes.NewReader(text))
		r.Comma, r.LazyQuotes, r.FieldsPerRecord = rune(sep), lazy, -1
		for {
			row, err := r.Read()
			if errors.Is(err, io.EOF) {
				return rows, nil
			}
			if err != nil {
				return nil, err
			}
			rows = append(rows, row)
		}
	}
	_, err := read(false)
	rows, lazyErr := read(true)
	if lazyErr != nil {
		return nil, false
	}
	return rows, err == nil
}

func compare(t interface{ Fatalf(string, ...any) }, text []byte, sep byte, block int) {
	want, strict := theirs(text, sep)
	got, lines, stray := ours(text, sep, block)
	if stray > 0 {
		if strict {
			t.Fatalf("%q: a quote called stray in well-formed text", text)
		}
		return // a quote that is never closed: we keep the rows after it
	}
	if !reflect.DeepEqual(got, want) {
		t.Fatalf("%q in blocks of %d:\n got %q\nwant %q", text, block, got, want)
	}
	if n := bytes.Count(text, []byte("\n")); lines != n && lines != n+1 {
		t.Fatalf("%q: %d lines, counted %d", text, n, lines)
	}
}

// Rows are those of encoding/csv, whatever the blocks they come in.
func TestSplitIsEncodingCSV(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		parts := rapid.SliceOf(rapid.SampledFrom([]string{",", ";", "\"", "\"\"", "\n", "\r\n", "\r", "a", "21.5", " ", "", "\u00e9", "\",\"", "\"\n"})).Draw(t, "parts")
		sep := rapid.SampledFrom([]byte{',', ';'}).Draw(t, "separator")
		compare(t, []byte(strings.Join(parts, "")), sep, rapid.IntRange(1, 40).Draw(t, "block"))
	})
}

// What encoding/csv writes comes back.
func TestSplitReadsWhatCSVWrites(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		rows := rapid.SliceOfN(rapid.SliceOfN(rapid.StringOf(rapid.SampledFrom([]rune("ab,;\"\n 1.5\u00e9"))), 2, 6), 1, 8).Draw(t, "rows")
		var b bytes.Buffer
		w := csv.NewWriter(&b)
		w.UseCRLF = rapid.Bool().Draw(t, "crlf")
		if err := w.WriteAll(rows); err != nil {
			t.Fatal(err)
		}
		got, _, stray := ours(b.Bytes(), ',', rapid.IntRange(1, 60).Draw(t, "block"))
		if stray > 0 || !reflect.DeepEqual(got, rows) {
			t.Fatalf("wrote %q as %q, read %q", rows, b.String(), got)
		}
	})
}

func TestSplitStrayQuote(t *testing.T) {
	got, lines, stray := ours([]byte("a,\"b\n1,2\n3,4\n"), ',', 1000)
	want := [][]string{{"a", "\"b"}, {"1", "2"}, {"3", "4"}}
	if !reflect.DeepEqual(got, want) || stray != 1 || lines != 3 {
		t.Errorf("got %q, %d lines, %d stray", got, lines, stray)
	}
}

func FuzzSplit(f *testing.F) {
	for _, s := range []string{"a,b\n1,2\n", "\"a\"\"b\",c\r\n", "\"a\nb\",c", "a\"b,\"c\"d\"\n", ",\n\n,", "\"\r", "\"a\r\nb\"\n"} {
		f.Add([]byte(s), 7)
	}
	f.Fuzz(func(t *testing.T, text []byte, block int) {
		compare(t, text, ',', max(1, block))
	})
}
