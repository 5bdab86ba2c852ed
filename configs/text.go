package configs

import (
	"bytes"
	"unicode/utf8"

	"golang.org/x/text/encoding/charmap"
	"golang.org/x/text/encoding/unicode"
	"golang.org/x/text/transform"
)

// decoded is a file's content as UTF-8 without a byte order mark.
type decoded struct {
	text []byte
	// single is true when each character of the file is one byte
	// (Windows-1252), so that columns count characters.
	single bool
}

// toUTF8 decodes UTF-8, UTF-16 with a byte order mark, and Windows-1252,
// which is what spreadsheets write.
func toUTF8(raw []byte) decoded {
	switch {
	case bytes.HasPrefix(raw, []byte("\xef\xbb\xbf")):
		raw = raw[3:]
		if utf8.Valid(raw) {
			return decoded{text: raw}
		}
	case bytes.HasPrefix(raw, []byte("\xff\xfe")), bytes.HasPrefix(raw, []byte("\xfe\xff")):
		d := unicode.UTF16(unicode.LittleEndian, unicode.UseBOM).NewDecoder()
		if out, _, err := transform.Bytes(d, raw); err == nil {
			return decoded{text: out, single: true}
		}
	}
	if utf8.Valid(raw) {
		return decoded{text: raw}
	}
	out, err := charmap.Windows1252.NewDecoder().Bytes(raw)
	if err != nil {
		return decoded{text: bytes.ToValidUTF8(raw, []byte("\uFFFD"))}
	}
	return decoded{text: out, single: true}
}
