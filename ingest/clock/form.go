package clock

// Form is what kind of time a text looks like.
type Form uint8

// Forms.
const (
	FormNone  Form = iota
	FormStamp      // date and time of day
	FormDate       // a date alone
	FormClock      // a time of day alone
)

// FormOf says what kind of time a text looks like, whatever the order of day
// and month. Plain numbers are none.
func FormOf(b []byte) Form {
	b = trim(b)
	if len(b) == 0 || serial(b) && len(b) != 12 && len(b) != 14 {
		return FormNone
	}
	d, rest, ok := cutDate(skipWeekday(b))
	if ok && (d.na == 4 || d.sep == 'm' || d.a <= 31 && d.b <= 31) {
		if len(rest) == 0 {
			return FormDate
		}
		if _, _, _, f := clockOf(rest); f == Fine || f == Abbreviation {
			return FormStamp
		}
		if _, ok := compactClock(rest); ok {
			return FormStamp
		}
		return FormNone
	}
	if len(b) >= 4 && b[0]-'0' <= 9 {
		if _, _, _, f := clockOf(append([]byte{' '}, b...)); f == Fine && digits(b) <= 2 {
			return FormClock
		}
	}
	return FormNone
}

// OffsetIn finds an offset from universal time in the name of a time column,
// such as "Time, GMT+01:00".
func OffsetIn(name string) (written string, ok bool) {
	for i := 0; i+4 < len(name); i++ {
		if w := []byte(name[i : i+3]); !foldEqual(w, "gmt") && !foldEqual(w, "utc") {
			continue
		}
		n := i + 4
		for n < len(name) && (name[n] >= '0' && name[n] <= '9' || name[n] == ':') {
			n++
		}
		if _, has, f := offset([]byte(name[i:n])); f == Fine && has && n > i+4 {
			return name[i+3 : n], true
		}
	}
	return "", false
}
