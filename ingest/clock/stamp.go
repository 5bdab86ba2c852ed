package clock

import (
	"errors"
	"strings"
	"time"

	"sashlog/configs/site"
)

// Stamp is a timestamp as written: seconds on the written clock since
// 1970-01-01 00:00, and the offset from universal time when one was written.
// Fractions of a second are cut off (spreadsheet serials are rounded, since
// they cannot hold whole seconds exactly).
type Stamp struct {
	WallS     int64
	OffsetS   int64
	HasOffset bool
}

// Fault says why a timestamp could not be read.
type Fault uint8

// Faults.
const (
	Fine         Fault = iota
	Unreadable         // no known form, or an impossible date or time
	Abbreviation       // a zone abbreviation such as CEST, which names no offset
	NoOrder            // day and month cannot be told apart
)

// Hint says what a user can do about a fault.
func (f Fault) Hint() string {
	switch f {
	case Abbreviation:
		return "abbreviations such as CEST or EST name no certain offset: export times with a numeric offset, or without one and set the log's clock"
	case NoOrder:
		return "set date_order of the log to dmy or mdy"
	case Unreadable:
		return "if times are written in an unusual form, set time_format of the log"
	}
	return ""
}

// Parser reads timestamps. It remembers the date read last, so rows of one
// day cost a comparison and a few digits. Not safe for concurrent use.
type Parser struct {
	order    site.DateOrder
	layout   string
	zoned    bool
	date1904 bool

	date  [24]byte // text of the date read last
	dateN int
	dayS  int64 // its midnight

	joined []byte // scratch of ParseSplit
}

// NewParser returns a parser for an order of day and month (empty means that
// dates which need one are refused) and, when not empty, a reference-time
// layout that is tried before the known forms. date1904 sets the epoch of
// spreadsheet serial numbers.
func NewParser(order site.DateOrder, layout string, date1904 bool) (*Parser, error) {
	if strings.Contains(layout, "MST") {
		return nil, errors.New("time_format reads a zone abbreviation (MST), which names no certain offset: use -0700 or leave it out")
	}
	return &Parser{order: order, layout: layout, date1904: date1904,
		zoned: strings.Contains(layout, "07")}, nil
}

// Parse reads one timestamp. It allocates nothing for the known forms.
func (p *Parser) Parse(b []byte) (Stamp, Fault) {
	// The same day as before, then "hh:mm" or "hh:mm:ss", perhaps with Z.
	if n := p.dateN; n > 0 && len(b) > n+5 && (b[n] == ' ' || b[n] == 'T') && string(b[:n]) == string(p.date[:n]) {
		rest := b[n+1:]
		utc := rest[len(rest)-1] == 'Z'
		if utc {
			rest = rest[:len(rest)-1]
		}
		if s, ok := plainClock(rest); ok {
			return Stamp{WallS: p.dayS + s, HasOffset: utc}, Fine
		}
	}
	return p.parse(b)
}

// plainClock reads hh:mm or hh:mm:ss.
func plainClock(b []byte) (int64, bool) {
	if len(b) != 5 && len(b) != 8 || b[2] != ':' {
		return 0, false
	}
	h1, h2, m1, m2 := b[0]-'0', b[1]-'0', b[3]-'0', b[4]-'0'
	if h1 > 2 || h2 > 9 || m1 > 5 || m2 > 9 {
		return 0, false
	}
	h := int64(h1)*10 + int64(h2)
	s := h*3600 + (int64(m1)*10+int64(m2))*60
	if len(b) == 8 {
		s1, s2 := b[6]-'0', b[7]-'0'
		if b[5] != ':' || s1 > 5 || s2 > 9 {
			return 0, false
		}
		s += int64(s1)*10 + int64(s2)
	}
	return s, h < 24
}

func (p *Parser) parse(b []byte) (Stamp, Fault) {
	b = trim(b)
	if len(b) == 0 {
		return Stamp{}, Unreadable
	}
	if p.layout != "" {
		if t, err := time.ParseInLocation(p.layout, string(b), time.UTC); err == nil {
			_, off := t.Zone()
			return Stamp{t.Unix() + int64(off), int64(off), p.zoned}, Fine
		}
	}
	if st, f, isNumber := p.number(b); isNumber {
		return st, f
	}
	b = skipWeekday(b)
	d, rest, ok := cutDate(b)
	if !ok {
		return Stamp{}, Unreadable
	}
	day, f := d.day(p.order)
	if f != Fine {
		return Stamp{}, f
	}
	if n := len(b) - len(rest); p.layout == "" && n <= len(p.date) {
		p.dateN, p.dayS = copy(p.date[:], b[:n]), day
	}
	secs, off, has, f := clockOf(rest)
	if f != Fine {
		return Stamp{}, f
	}
	return Stamp{day + secs, off, has}, Fine
}

// ParseSplit reads a date and a time of day from two columns.
func (p *Parser) ParseSplit(date, clock []byte) (Stamp, Fault) {
	date, clock = trim(date), trim(clock)
	if serial(date) && serial(clock) {
		d, f1, ok1 := p.number(date)
		c, ok2 := dayFraction(clock)
		if ok1 && ok2 && f1 == Fine {
			return Stamp{WallS: d.WallS + c}, Fine
		}
	}
	if len(date) == 0 || len(clock) == 0 {
		return Stamp{}, Unreadable
	}
	p.joined = append(append(append(p.joined[:0], date...), ' '), clock...)
	return p.Parse(p.joined)
}

// trim drops spaces, no-break spaces and a byte order mark around b.
func trim(b []byte) []byte {
	for len(b) > 0 {
		switch {
		case b[0] == ' ' || b[0] == '\t' || b[0] == '\r' || b[0] == '\n' || b[0] == 0xA0:
			b = b[1:]
		case len(b) > 1 && b[0] == 0xC2 && b[1] == 0xA0:
			b = b[2:]
		case len(b) > 2 && b[0] == 0xEF && b[1] == 0xBB && b[2] == 0xBF:
			b = b[3:]
		default:
			goto end
		}
	}
end:
	for len(b) > 0 {
		n := len(b)
		switch {
		case b[n-1] == ' ' || b[n-1] == '\t' || b[n-1] == '\r' || b[n-1] == '\n':
			b = b[:n-1]
		case n > 1 && b[n-2] == 0xC2 && b[n-1] == 0xA0:
			b = b[:n-2]
		default:
			return b
		}
	}
	return b
}
