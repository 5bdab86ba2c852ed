package clock

import (
	"math"
	"strconv"

	"sashlog/configs/site"
)

// date is a date as written: three numbers in the order met.
type date struct {
	a, b, c    int64
	na, nb, nc int  // digits of each
	sep        byte // between them; 0 for compact digits, 'm' for a month in words
}

// cutDate cuts a date from the front of b; rest is what follows it.
func cutDate(b []byte) (d date, rest []byte, ok bool) {
	if len(b) >= 8 && digits(b) == 8 { // 20250330
		d = date{a: atoi(b[:4]), b: atoi(b[4:6]), c: atoi(b[6:8]), na: 4, nb: 2, nc: 2}
		return d, b[8:], true
	}
	if m, n := monthWord(b); n > 0 { // Mar 12, 2025
		r := skip(b[n:], " .-/")
		d.nb = digits(r)
		if d.nb == 0 || d.nb > 2 {
			return d, nil, false
		}
		d.b = atoi(r[:d.nb])
		r = skip(r[d.nb:], " ,-/")
		d.nc = digits(r)
		if d.nc != 4 && d.nc != 2 {
			return d, nil, false
		}
		return date{a: d.b, b: m, c: atoi(r[:d.nc]), na: 2, nb: 2, nc: d.nc, sep: 'm'}, r[d.nc:], true
	}
	d.na = digits(b)
	if d.na == 0 || d.na > 4 || d.na == 3 || len(b) < d.na+4 {
		return d, nil, false
	}
	d.a = atoi(b[:d.na])
	r := b[d.na:]
	d.sep = r[0]
	if m, n := monthWord(skip(r, " .-/")); n > 0 { // 12-Mar-25, 12 March 2025
		r = skip(skip(r, " .-/")[n:], " .-/,")
		d.nc = digits(r)
		if d.nc != 4 && d.nc != 2 {
			return d, nil, false
		}
		d.b, d.nb, d.c, d.sep = m, 2, atoi(r[:d.nc]), 'm'
		return d, r[d.nc:], true
	}
	if d.sep != '-' && d.sep != '/' && d.sep != '.' {
		return d, nil, false
	}
	r = r[1:]
	d.nb = digits(r)
	if d.nb == 0 || d.nb > 2 || len(r) <= d.nb || r[d.nb] != d.sep {
		return d, nil, false
	}
	d.b = atoi(r[:d.nb])
	r = r[d.nb+1:]
	d.nc = digits(r)
	if d.nc == 0 || d.nc > 4 || d.nc == 3 || d.na == 4 && d.nc > 2 {
		return d, nil, false
	}
	d.c = atoi(r[:d.nc])
	return d, r[d.nc:], true
}

// day returns the date's midnight in seconds on the written clock.
func (d date) day(order site.DateOrder) (int64, Fault) {
	var y, m, dd int64
	var ny int
	switch {
	case d.na == 4:
		y, m, dd, ny = d.a, d.b, d.c, 4
	case d.sep == 'm':
		y, m, dd, ny = d.c, d.b, d.a, d.nc
	case d.nc == 1: // a year has two or four digits
		if order != site.YMD || d.na != 2 {
			return 0, Unreadable
		}
		y, m, dd, ny = d.a, d.b, d.c, d.na
	case order == site.DMY, order == site.ProveOrder && d.sep == '.':
		// Dates with points are written day first wherever they are used
		// (common practice); a log that breaks this is found by Prover.
		y, m, dd, ny = d.c, d.b, d.a, d.nc
	case order == site.MDY:
		y, m, dd, ny = d.c, d.a, d.b, d.nc
	case order == site.YMD && d.na == 2 && d.nc == 2:
		y, m, dd, ny = d.a, d.b, d.c, d.na
	case order == site.YMD:
		return 0, Unreadable
	case d.a == d.b:
		y, m, dd, ny = d.c, d.b, d.a, d.nc
	default:
		return 0, NoOrder
	}
	if ny == 2 { // as POSIX strptime: 69 to 99 are 1969 to 1999
		if y >= 69 {
			y += 1900
		} else {
			y += 2000
		}
	}
	if m < 1 || m > 12 || dd < 1 || dd > monthDays(y, m) || y < 1900 || y > 2200 {
		return 0, Unreadable
	}
	return daysFromCivil(y, m, dd) * 86400, Fine
}

func monthDays(y, m int64) int64 {
	switch m {
	case 4, 6, 9, 11:
		return 30
	case 2:
		if y%4 == 0 && (y%100 != 0 || y%400 == 0) {
			return 29
		}
		return 28
	}
	return 31
}

// months by their first letters, in English, German, French, Italian and
// Spanish; longer ones first where one begins another.
var months = []struct {
	word  string
	month int64
}{
	{"jan", 1}, {"gen", 1}, {"ene", 1}, {"feb", 2}, {"f\xc3\xa9v", 2}, {"fev", 2}, {"mar", 3}, {"m\xc3\xa4r", 3}, {"mrz", 3},
	{"apr", 4}, {"avr", 4}, {"abr", 4}, {"may", 5}, {"mai", 5}, {"mag", 5}, {"juin", 6}, {"juil", 7}, {"jun", 6}, {"giu", 6},
	{"jul", 7}, {"lug", 7}, {"aug", 8}, {"ao\xc3\xbb", 8}, {"aou", 8}, {"ago", 8}, {"sep", 9}, {"set", 9}, {"oct", 10}, {"okt", 10}, {"ott", 10},
	{"nov", 11}, {"dec", 12}, {"dez", 12}, {"d\xc3\xa9c", 12}, {"dic", 12},
}

// monthWord reads the name of a month at the front of b: its number and the
// bytes it takes, 0 when there is none.
func monthWord(b []byte) (month int64, n int) {
	if len(b) < 3 || !letter(b[0]) {
		return 0, 0
	}
	for n < len(b) && letter(b[n]) {
		n++
	}
	for _, m := range months {
		if len(m.word) <= n && foldEqual(b[:len(m.word)], m.word) {
			return m.month, n
		}
	}
	return 0, 0
}

// skipWeekday drops a leading word that is no month, such as "Mon ".
func skipWeekday(b []byte) []byte {
	if len(b) == 0 || !letter(b[0]) {
		return b
	}
	if _, n := monthWord(b); n > 0 {
		return b
	}
	n := 0
	for n < len(b) && letter(b[n]) {
		n++
	}
	if n > 10 || n == len(b) || b[n] != ' ' && b[n] != ',' && b[n] != '.' {
		return b
	}
	return skip(b[n:], " ,.")
}

// number reads a timestamp that is one number: unix time in seconds (ten
// digits), milli-, micro- or nanoseconds (13, 16, 19), compact dates of 12 or
// 14 digits, or a spreadsheet serial (five digits with or without fraction).
func (p *Parser) number(b []byte) (st Stamp, f Fault, isNumber bool) {
	n := digits(b)
	if n == 0 || n < len(b) && b[n] != '.' && b[n] != ',' {
		return st, Fine, false
	}
	if frac := len(b) - n - 1; frac >= 0 && digits(b[n+1:]) != frac {
		return st, Fine, false
	}
	if n != len(b) && n != 10 && n != 5 {
		return st, Unreadable, true
	}
	switch n {
	case 5:
		days, err := strconv.ParseFloat(string(commaToPoint(b)), 64)
		if err != nil || days < 20000 || days >= 80000 {
			return st, Unreadable, true
		}
		// Serial 25569 is 1970-01-01 (ECMA-376 part 1, 18.17.4); the epoch of
		// 1904 lies 1462 days later.
		if p.date1904 {
			days += 1462
		}
		return Stamp{WallS: int64(math.Round((days - 25569) * 86400))}, Fine, true
	case 8:
		return st, Fine, false
	case 10, 13, 16, 19:
		return Stamp{WallS: atoi(b[:10]), HasOffset: true}, Fine, true
	case 12, 14:
		d, rest, _ := cutDate8(b)
		day, f := d.day(site.YMD)
		s, ok := compactClock(rest)
		if f != Fine || !ok {
			return st, Unreadable, true
		}
		return Stamp{WallS: day + s}, Fine, true
	}
	return st, Unreadable, true
}

func cutDate8(b []byte) (date, []byte, bool) {
	return date{a: atoi(b[:4]), b: atoi(b[4:6]), c: atoi(b[6:8]), na: 4, nb: 2, nc: 2}, b[8:], true
}

// serial reports whether b is digits with at most one decimal mark.
func serial(b []byte) bool {
	n := digits(b)
	return n == len(b) && n > 0 || n > 0 && (b[n] == '.' || b[n] == ',') && digits(b[n+1:]) == len(b)-n-1
}

// dayFraction reads a spreadsheet time of day: the fraction of a serial.
func dayFraction(b []byte) (int64, bool) {
	v, err := strconv.ParseFloat(string(commaToPoint(b)), 64)
	if err != nil || v < 0 || v >= 1 {
		return 0, false
	}
	return int64(math.Round(v * 86400)), true
}

func commaToPoint(b []byte) []byte {
	c := append([]byte(nil), b...)
	for i := range c {
		if c[i] == ',' {
			c[i] = '.'
		}
	}
	return c
}

func digits(b []byte) int {
	n := 0
	for n < len(b) && b[n]-'0' <= 9 {
		n++
	}
	return n
}

func atoi(b []byte) int64 {
	var v int64
	for _, c := range b {
		v = v*10 + int64(c-'0')
	}
	return v
}

func letter(c byte) bool { return c|0x20 >= 'a' && c|0x20 <= 'z' || c >= 0x80 }

func skip(b []byte, set string) []byte {
	for len(b) > 0 {
		hit := false
		for i := 0; i < len(set); i++ {
			hit = hit || b[0] == set[i]
		}
		if !hit {
			break
		}
		b = b[1:]
	}
	return b
}

func foldEqual(b []byte, lower string) bool {
	if len(b) != len(lower) {
		return false
	}
	for i := range b {
		c := b[i]
		if c >= 'A' && c <= 'Z' {
			c |= 0x20
		}
		if c != lower[i] {
			return false
		}
	}
	return true
}
