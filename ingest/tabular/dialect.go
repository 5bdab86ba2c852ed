package tabular

import (
	"bytes"
	"fmt"
	"io"
	"strings"

	"sashlog/configs/site"
	"sashlog/ingest/cell"
)

// Dialect says how a text file is written.
type Dialect struct {
	Sep   byte
	Style cell.Style
	// Proven is true when a decimal mark was given or met.
	Proven bool
	Frame  Frame
	// Notes say in words what was found out.
	Notes []string

	// Doubts are assumptions that the user should confirm.
	Doubts []Doubt

	charset charset
	bareCR  bool
}

// Doubt is an assumption about a file and how to settle it.
type Doubt struct{ Text, Hint string }

// Unsettled is a log that could be read if its site file said more.
type Unsettled struct{ Cause error }

func (u Unsettled) Error() string { return u.Cause.Error() }

// Unwrap returns the cause.
func (u Unsettled) Unwrap() error { return u.Cause }

// NoLog is a text that holds neither times nor any of the names looked for.
type NoLog struct{ Why Unsettled }

func (n NoLog) Error() string { return n.Why.Error() }

// Unwrap returns why it is not taken as a log.
func (n NoLog) Unwrap() error { return n.Why }

// unsettled says why the head of a file is not taken as a log.
func unsettled(text []byte, latin bool, wanted []string, why error) error {
	names := map[string]bool{}
	for _, w := range wanted {
		names[cell.Fold(w)] = true
	}
	cells := strings.FieldsFunc(cell.Text(text, latin), func(r rune) bool { return strings.ContainsRune(";\t,|\"\r\n", r) })
	for _, c := range cells {
		if f := formOf(c); f == formStamp || f == formDate || f == formNumber && (unixLike(c) || serialLike(c)) || names[cell.Fold(c)] {
			return Unsettled{why}
		}
	}
	return NoLog{Unsettled{why}}
}

// NotSettled makes an Unsettled from a message.
func NotSettled(format string, args ...any) Unsettled {
	return Unsettled{fmt.Errorf(format, args...)}
}

// headSize is how much of a file is looked at.
const headSize = 256 << 10

// headRows is how many of its rows.
const headRows = 1000

// Look finds the dialect of a file from its first bytes, taken from r as
// stored (but expanded). wanted are the columns the points table names.
func Look(r io.Reader, log *site.Log, wanted []string) (d Dialect, rows []HeadRow, err error) {
	raw := make([]byte, headSize)
	n, err := io.ReadFull(r, raw)
	if err != nil && err != io.EOF && err != io.ErrUnexpectedEOF {
		return d, nil, err
	}
	raw = raw[:n]
	whole := n < headSize
	if len(raw) == 0 {
		return d, nil, fmt.Errorf("the file is empty")
	}
	var note string
	if d.charset, note, err = charsetOf(raw, log.Encoding); err != nil {
		return d, nil, err
	}
	d.Notes = append(d.Notes, note)
	d.Style.Latin = d.charset == windows1252
	if d.Style.Latin && log.Encoding == "" {
		d.Doubts = append(d.Doubts, Doubt{"read as " + note, "if names or words look wrong, set encoding"})
	}
	text, err := io.ReadAll(d.charset.reader(bytes.NewReader(raw), false))
	if err != nil && whole {
		return d, nil, fmt.Errorf("cannot read it as %s: %w", d.charset, err)
	}
	if bareCR(text) {
		d.bareCR = true
		text = bytes.ReplaceAll(text, []byte("\r"), []byte("\n"))
		d.Notes = append(d.Notes, "lines end in carriage returns")
	}
	if !whole { // drop the row that is cut off
		if i := bytes.LastIndexByte(text, '\n'); i >= 0 {
			text = text[:i+1]
		}
	}
	if len(bytes.TrimSpace(text)) == 0 {
		return d, nil, fmt.Errorf("the file holds no text")
	}
	if log.Encoding != "" && d.charset == utf8Text {
		if i := invalidUTF8(text[:min(len(text), 4096)]); i >= 0 {
			return d, nil, fmt.Errorf("byte 0x%02X at offset %d is not UTF-8; hint: set encoding to windows-1252 or leave it out", text[i], i)
		}
	}
	if err := d.findSep(text, log, whole); err != nil {
		return d, nil, unsettled(text, d.Style.Latin, wanted, err)
	}
	rows = splitHead(text, d.Sep, d.Style.Latin, whole)
	if d.Frame, err = FrameOf(rows, log, wanted); err != nil {
		return d, rows, unsettled(text, d.Style.Latin, wanted, err)
	}
	for i, n := range d.Frame.Names {
		if strings.ContainsRune(n, '\ufffd') {
			d.Doubts = append(d.Doubts, Doubt{fmt.Sprintf("the name of column %d holds a replacement character: the export lost a letter", i+1), "export again as UTF-8"})
		}
	}
	d.findDecimal(rows, log)
	d.Notes = append(d.Notes, d.Frame.Notes...)
	return d, rows, nil
}

// splitHead cuts the head of a file into rows of decoded cells.
func splitHead(text []byte, sep byte, latin, whole bool) []HeadRow {
	s := splitter{sep: sep}
	var rows []HeadRow
	line := int64(0)
	for len(text) > 0 && len(rows) < headRows {
		n, ok := s.next(text, whole)
		if n == 0 && !ok {
			break
		}
		text = text[n:]
		line += int64(s.lines)
		if !ok {
			continue
		}
		r := HeadRow{Line: line}
		for _, f := range s.fields {
			r.Cells = append(r.Cells, cell.Text(f, latin))
		}
		rows = append(rows, r)
	}
	return rows
}

var sepWords = map[byte]string{',': "comma", ';': "semicolon", '\t': "tab", '|': "vertical bar", ' ': "space"}

// findSep finds the separator: the one that cuts most rows into the same
// number of cells, most of which are numbers, times or empty.
func (d *Dialect) findSep(text []byte, log *site.Log, whole bool) error {
	if log.Separator != 0 {
		if log.Separator > 0x7e || log.Separator == '"' || log.Separator == '\n' || log.Separator == '\r' {
			return fmt.Errorf("separator %q cannot be used: one ASCII character other than a quote", log.Separator)
		}
		d.Sep = byte(log.Separator)
		d.Notes = append(d.Notes, "separator "+sepName(d.Sep)+" (set)")
		return nil
	}
	head := bytes.TrimLeft(text, "\r\n ")
	if bytes.HasPrefix(head, []byte("sep=")) && len(head) > 5 && (head[5] == '\r' || head[5] == '\n') {
		d.Sep = head[4]
		d.Notes = append(d.Notes, "separator "+sepName(d.Sep)+" (the file says so)")
		return nil
	}
	best, score := byte(0), 0.0
	for _, sep := range []byte{';', '\t', ',', '|'} {
		if s := sepScore(splitHead(text, sep, d.Style.Latin, whole)); s > score {
			best, score = sep, s
		}
	}
	if best == 0 {
		return fmt.Errorf("no separator (comma, semicolon, tab or vertical bar) cuts its rows into columns; hint: set separator, or check that this is a log")
	}
	d.Sep = best
	d.Notes = append(d.Notes, "separator "+sepName(best))
	return nil
}

func sepName(b byte) string {
	if w, ok := sepWords[b]; ok {
		return w
	}
	return fmt.Sprintf("%q", string(rune(b)))
}

func sepScore(rows []HeadRow) float64 {
	if len(rows) > 200 {
		rows = rows[len(rows)-200:]
	}
	counts := map[int]int{}
	for _, r := range rows {
		counts[len(r.Cells)]++
	}
	mode, most := 0, 0
	for n, c := range counts {
		if n >= 2 && (c > most || c == most && n > mode) {
			mode, most = n, c
		}
	}
	if mode == 0 {
		return 0
	}
	good, all, stamps := 0, 0, 0
	for _, r := range rows {
		if len(r.Cells) != mode {
			continue
		}
		for _, c := range r.Cells {
			all++
			switch formOf(c) {
			case formWord:
				if !strings.ContainsAny(c, ";\t|,") {
					good++
				}
			case formStamp, formDate:
				stamps++
				good++
			default:
				good++
			}
		}
	}
	share := float64(good) / float64(all)
	s := share * share * float64(most) / float64(len(rows))
	if stamps > 0 {
		s *= 2
	}
	return s * (1 + float64(min(mode, 100))/1000)
}

// findDecimal finds the decimal mark from the cells of the head.
func (d *Dialect) findDecimal(rows []HeadRow, log *site.Log) {
	if log.Decimal != 0 {
		d.Style.Mark, d.Style.Declared, d.Proven = byte(log.Decimal), true, true
		d.Notes = append(d.Notes, fmt.Sprintf("decimal mark %q (set)", log.Decimal))
		return
	}
	points, commas := 0, 0
	for _, r := range rows {
		if r.Line < d.Frame.DataLine {
			continue
		}
		for i, c := range r.Cells {
			if i == d.Frame.Time || i == d.Frame.Date || i == d.Frame.Clock {
				continue
			}
			switch decimalIn(c) {
			case '.':
				points++
			case ',':
				commas++
			}
		}
	}
	d.Style.Mark = '.'
	switch {
	case commas > points:
		d.Style.Mark, d.Proven = ',', true
		d.Notes = append(d.Notes, "decimal comma")
	case points > 0:
		d.Proven = true
		d.Notes = append(d.Notes, "decimal point")
	default:
		d.Notes = append(d.Notes, "no decimals among the first rows: decimal point assumed")
	}
	if points > 0 && commas > 0 {
		d.Doubts = append(d.Doubts, Doubt{fmt.Sprintf("both decimal marks among the first rows: %d points, %d commas", points, commas), "set decimal of the log"})
	}
}

// decimalIn is the decimal mark a cell proves, 0 when it proves none: three
// digits after a single mark could be a group of thousands.
func decimalIn(s string) byte {
	s = strings.TrimSpace(s)
	if s == "" || !strings.ContainsAny(s, "0123456789") || strings.ContainsAny(s, ":/") {
		return 0
	}
	p, c := strings.LastIndexByte(s, '.'), strings.LastIndexByte(s, ',')
	if p < 0 && c < 0 || strings.Count(s, ".") > 1 && c < 0 || strings.Count(s, ",") > 1 && p < 0 {
		return 0
	}
	at, mark := p, byte('.')
	if c > p {
		at, mark = c, ','
	}
	if at == 0 {
		return 0
	}
	after := 0
	for after < len(s)-at-1 && s[at+1+after]-'0' <= 9 {
		after++
	}
	before := strings.TrimLeft(s[:at], "+-")
	if after == 0 || len(before) == 0 || before[0]-'0' > 9 || s[at-1]-'0' > 9 {
		return 0
	}
	if p >= 0 && c >= 0 || after != 3 || before[0] == '0' || len(before) > 3 {
		return mark
	}
	return 0
}
