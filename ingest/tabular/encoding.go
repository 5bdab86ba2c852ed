package tabular

import (
	"bytes"
	"fmt"
	"io"
	"strings"
	"unicode/utf8"

	"golang.org/x/text/encoding/unicode"
	"golang.org/x/text/transform"
)

// charset is how a file's bytes spell characters.
type charset uint8

const (
	utf8Text charset = iota
	utf16LE
	utf16BE
	windows1252
)

func (c charset) String() string {
	return [...]string{"UTF-8", "UTF-16 little-endian", "UTF-16 big-endian", "Windows-1252"}[c]
}

// charsetOf finds the encoding of a file from its first bytes; given is the
// log's setting. note says how it was found.
func charsetOf(head []byte, given string) (c charset, note string, err error) {
	bom := func(s string) bool { return bytes.HasPrefix(head, []byte(s)) }
	switch key := strings.ToLower(strings.NewReplacer("-", "", "_", "", " ", "").Replace(given)); key {
	case "":
	case "utf8":
		return utf8Text, "UTF-8 (set)", nil
	case "utf16", "utf16le", "utf16be", "unicode":
		switch {
		case bom("\xfe\xff"), key == "utf16be" && !bom("\xff\xfe"), key != "utf16le" && !bom("\xff\xfe") && zeros(head, 0) > zeros(head, 1):
			return utf16BE, "UTF-16 big-endian (set)", nil
		}
		return utf16LE, "UTF-16 little-endian (set)", nil
	case "windows1252", "cp1252", "latin1", "iso88591", "iso885915", "ansi":
		return windows1252, "Windows-1252 (set)", nil
	default:
		return 0, "", fmt.Errorf("unknown encoding %q: utf-8, utf-16 or windows-1252", given)
	}
	switch {
	case bom("\xef\xbb\xbf"):
		return utf8Text, "UTF-8 with byte order mark", nil
	case bom("\xff\xfe"):
		return utf16LE, "UTF-16 little-endian", nil
	case bom("\xfe\xff"):
		return utf16BE, "UTF-16 big-endian", nil
	}
	even, odd, half := zeros(head, 0), zeros(head, 1), len(head)/2
	switch {
	case half >= 4 && odd > half*6/10 && even < half/20+1:
		return utf16LE, "UTF-16 little-endian (found by its zero bytes)", nil
	case half >= 4 && even > half*6/10 && odd < half/20+1:
		return utf16BE, "UTF-16 big-endian (found by its zero bytes)", nil
	}
	if i := bytes.IndexByte(head, 0); i >= 0 {
		return 0, "", fmt.Errorf("not a text file: a zero byte at offset %d; hint: export the log as CSV or XLSX", i)
	}
	if n := controls(head); n > len(head)/20+2 {
		return 0, "", fmt.Errorf("not a text file: %d control bytes among the first %d; hint: export the log as CSV or XLSX", n, len(head))
	}
	if i := invalidUTF8(head); i >= 0 {
		return windows1252, fmt.Sprintf("Windows-1252 (assumed: byte 0x%02X at offset %d is not UTF-8)", head[i], i), nil
	}
	return utf8Text, "UTF-8", nil
}

// zeros counts zero bytes at even (0) or odd (1) offsets.
func zeros(b []byte, from int) int {
	n := 0
	for i := from; i < len(b); i += 2 {
		if b[i] == 0 {
			n++
		}
	}
	return n
}

func controls(b []byte) int {
	n := 0
	for _, c := range b {
		if c < 0x20 && c != '\n' && c != '\r' && c != '\t' && c != '\f' && c != 0x1a {
			n++
		}
	}
	return n
}

// invalidUTF8 is the offset of the first byte that is not UTF-8, -1 when there
// is none; a character cut off by the end of b does not count.
func invalidUTF8(b []byte) int {
	for i := 0; i < len(b); {
		if b[i] < utf8.RuneSelf {
			i++
			continue
		}
		r, n := utf8.DecodeRune(b[i:])
		if r == utf8.RuneError && n <= 1 {
			if len(b)-i < utf8.UTFMax && !utf8.FullRune(b[i:]) {
				return -1
			}
			return i
		}
		i += n
	}
	return -1
}

// reader returns the text of a file: UTF-8 without byte order mark, or
// Windows-1252 as it is (its cells are decoded where they are not plain).
// Lines that end in a bare carriage return get a line feed.
func (c charset) reader(r io.Reader, bareCR bool) io.Reader {
	switch c {
	case utf16LE:
		r = transform.NewReader(r, unicode.UTF16(unicode.LittleEndian, unicode.UseBOM).NewDecoder())
	case utf16BE:
		r = transform.NewReader(r, unicode.UTF16(unicode.BigEndian, unicode.UseBOM).NewDecoder())
	default:
		r = &skipBOM{r: r}
	}
	if bareCR {
		r = crToLF{r}
	}
	return r
}

// skipBOM drops a UTF-8 byte order mark.
type skipBOM struct {
	r     io.Reader
	begun bool
}

func (s *skipBOM) Read(p []byte) (int, error) {
	if s.begun || len(p) < 3 {
		return s.r.Read(p)
	}
	s.begun = true
	n, err := io.ReadAtLeast(s.r, p, 3)
	if err == io.ErrUnexpectedEOF {
		err = io.EOF
	}
	if bytes.HasPrefix(p[:n], []byte("\xef\xbb\xbf")) {
		n = copy(p, p[3:n])
	}
	if n > 0 && err == io.EOF {
		err = nil
	}
	return n, err
}

type crToLF struct{ r io.Reader }

func (c crToLF) Read(p []byte) (int, error) {
	n, err := c.r.Read(p)
	for i, b := range p[:n] {
		if b == '\r' {
			p[i] = '\n'
		}
	}
	return n, err
}

// bareCR reports whether lines end in carriage returns alone.
func bareCR(text []byte) bool {
	return bytes.IndexByte(text, '\n') < 0 && bytes.IndexByte(text, '\r') >= 0
}
