package clock

// clockOf reads what follows a date: nothing (midnight), or a time of day with
// an optional half of the day and an optional offset.
func clockOf(b []byte) (secs, off int64, has bool, f Fault) {
	if len(b) == 0 {
		return 0, 0, false, Fine
	}
	switch b[0] {
	case ' ', 'T', 't', ',', '_', 0xA0, 0xC2, ':':
		b = trim(skip(b, " Tt,_:"))
	default:
		return 0, 0, false, Unreadable
	}
	if len(b) == 0 {
		return 0, 0, false, Unreadable
	}
	h, b, ok := two(b)
	if !ok {
		return compactTail(b)
	}
	var m, s int64
	sep := byte(0)
	if len(b) > 0 && (b[0] == ':' || b[0] == '.' || b[0] == 'h') {
		sep = b[0]
		if m, b, ok = two(b[1:]); !ok || m > 59 {
			return 0, 0, false, Unreadable
		}
		if sep == 'h' && len(b) > 0 && b[0] == 'm' || sep != 'h' && len(b) > 0 && b[0] == sep {
			if s, b, ok = two(b[1:]); !ok || s > 60 {
				return 0, 0, false, Unreadable
			}
			if s == 60 { // a leap second is the next minute's first
				s = 59
			}
			if len(b) > 1 && (b[0] == '.' || b[0] == ',') && b[1]-'0' <= 9 {
				b = b[1+digits(b[1:]):]
			}
		}
	} else if len(b) == 0 || b[0] != ' ' {
		return 0, 0, false, Unreadable
	}
	b = trim(b)
	b, half := halfDay(b)
	switch {
	case half == 0 && sep == 0:
		return 0, 0, false, Unreadable // a bare number is no time of day
	case half != 0 && (h < 1 || h > 12):
		return 0, 0, false, Unreadable
	case half == 'p' && h < 12:
		h += 12
	case half == 'a' && h == 12:
		h = 0
	}
	if h > 24 || h == 24 && (m != 0 || s != 0) {
		return 0, 0, false, Unreadable
	}
	off, has, f = offset(trim(b))
	return h*3600 + m*60 + s, off, has, f
}

// two reads one or two digits.
func two(b []byte) (v int64, rest []byte, ok bool) {
	n := digits(b)
	if n == 0 || n > 2 {
		return 0, b, false
	}
	return atoi(b[:n]), b[n:], true
}

// compactTail reads hhmm or hhmmss after a date, with an optional offset.
func compactTail(b []byte) (secs, off int64, has bool, f Fault) {
	n := digits(b)
	if n != 4 && n != 6 {
		return 0, 0, false, Unreadable
	}
	s, ok := compactClock(b[:n])
	if !ok {
		return 0, 0, false, Unreadable
	}
	b = b[n:]
	if len(b) > 1 && (b[0] == '.' || b[0] == ',') {
		b = b[1+digits(b[1:]):]
	}
	off, has, f = offset(trim(b))
	return s, off, has, f
}

func compactClock(b []byte) (int64, bool) {
	if len(b) != 4 && len(b) != 6 || digits(b) != len(b) {
		return 0, false
	}
	h, m, s := atoi(b[:2]), atoi(b[2:4]), atoi(b[4:])
	return h*3600 + m*60 + s, m < 60 && s < 60 && (h < 24 || h == 24 && m+s == 0)
}

// halfDay reads AM or PM, with or without points.
func halfDay(b []byte) (rest []byte, half byte) {
	if len(b) < 2 {
		return b, 0
	}
	c := b[0] | 0x20
	if c != 'a' && c != 'p' {
		return b, 0
	}
	r := skip(b[1:], ".")
	if len(r) == 0 || r[0]|0x20 != 'm' || len(r) > 1 && letter(r[1]) {
		return b, 0
	}
	return skip(r[1:], "."), c
}

// offset reads what may follow a time of day: Z, UTC, GMT, or a signed number
// of hours and minutes, with or without colon; a zone name in brackets after
// it is passed over.
func offset(b []byte) (off int64, has bool, f Fault) {
	if len(b) == 0 {
		return 0, false, Fine
	}
	named := false
	if letter(b[0]) {
		n := 0
		for n < len(b) && letter(b[n]) {
			n++
		}
		if !foldEqual(b[:n], "z") && !foldEqual(b[:n], "utc") && !foldEqual(b[:n], "gmt") {
			return 0, false, Abbreviation
		}
		named = true
		b = b[n:]
		if len(b) == 0 {
			return 0, true, Fine
		}
	}
	sign := int64(1)
	switch b[0] {
	case '+':
	case '-':
		sign = -1
	case '[':
		return 0, named, bracket(b, named)
	default:
		return 0, false, Unreadable
	}
	b = b[1:]
	n := digits(b)
	var h, m int64
	switch n {
	case 1, 2:
		h = atoi(b[:n])
		b = b[n:]
		if len(b) >= 3 && b[0] == ':' && digits(b[1:]) == 2 {
			m = atoi(b[1:3])
			b = b[3:]
		}
	case 4:
		h, m, b = atoi(b[:2]), atoi(b[2:4]), b[4:]
	default:
		return 0, false, Unreadable
	}
	if h > 15 || m > 59 {
		return 0, false, Unreadable
	}
	if len(b) > 0 && b[0] == '[' {
		f = bracket(b, true)
	} else if len(b) > 0 {
		f = Unreadable
	}
	return sign * (h*3600 + m*60), true, f
}

func bracket(b []byte, known bool) Fault {
	if known && b[len(b)-1] == ']' {
		return Fine
	}
	return Unreadable
}
