// Package words turns results into plain words: numbers with their units and
// bounds, durations, and the sentences of page one and of the terminal. It
// computes no figure; it rounds, divides by the days of the period, and says
// what a figure means.
package words

import (
	"math"
	"strconv"
	"strings"
	"unicode"
	"unicode/utf8"
)

// Dash stands for a figure that is not known.
const Dash = "–"

// nbsp keeps a number and its unit on one line.
const nbsp = "\u00a0"

func known(v float64) bool { return !math.IsNaN(v) && !math.IsInf(v, 0) }

// Number writes a figure with a comma between thousands and a true minus
// sign; Dash when it is not known.
func Number(v float64, decimals int) string {
	if !known(v) {
		return Dash
	}
	s := strconv.FormatFloat(math.Abs(v), 'f', decimals, 64)
	whole, frac, _ := strings.Cut(s, ".")
	for i := len(whole) - 3; i > 0; i -= 3 {
		whole = whole[:i] + "," + whole[i:]
	}
	if frac != "" {
		whole += "." + frac
	}
	if v < 0 && strings.Trim(s, "0.") != "" {
		whole = "\u2212" + whole
	}
	return whole
}

// Count writes a whole number.
func Count(n int64) string { return Number(float64(n), 0) }

// Unit writes a figure with its unit; Dash alone when it is not known.
func Unit(v float64, decimals int, unit string) string {
	if !known(v) {
		return Dash
	}
	return Number(v, decimals) + nbsp + unit
}

// HoursNumber writes hours without the unit: whole from 10 on, one decimal below.
func HoursNumber(h float64) string {
	switch {
	case !known(h):
		return Dash
	case h == 0 || math.Abs(h) >= 9.95:
		return Number(h, 0)
	case math.Abs(h) < 0.05:
		return "<0.1"
	}
	return Number(h, 1)
}

// Hours writes hours with the unit.
func Hours(h float64) string {
	if !known(h) {
		return Dash
	}
	return HoursNumber(h) + nbsp + "h"
}

// Between writes a figure no finer than its bounds allow, with the bounds in
// brackets, rounded outwards so that they still hold: 217.34 between 180 and
// 260 is "220 h (180 to 260)". Bounds that do not differ at the printed
// precision are left out.
func Between(v, low, high float64, unit string) string {
	return between(v, low, high, unit, leastStep)
}

// leastStep is the finest rounding of a figure without bounds: tenths below
// 10, whole above.
func leastStep(v float64) float64 {
	if math.Abs(v) < 9.95 {
		return 0.1
	}
	return 1
}

func between(v, low, high float64, unit string, least func(float64) float64) string {
	if unit != "" {
		unit = nbsp + unit
	}
	if !known(low) || !known(high) || high < low {
		low, high = v, v
	}
	if !known(v) {
		if !known(low) {
			return Dash
		}
		step := roundingStep(high-low, least(high))
		return at(math.Floor(low/step+1e-9)*step, step) + " to " + at(math.Ceil(high/step-1e-9)*step, step) + unit
	}
	step := roundingStep(high-low, least(math.Max(math.Abs(v), math.Abs(high))))
	value := at(math.Round(v/step)*step, step)
	if v > 0 && math.Round(v/step) == 0 {
		value = "under " + at(step, step)
	}
	lo := at(math.Floor(low/step+1e-9)*step, step)
	hi := at(math.Ceil(high/step-1e-9)*step, step)
	if lo == hi || high-low < step/2 {
		return value + unit
	}
	return value + unit + " (" + lo + " to " + hi + ")"
}

// roundingStep is the power of ten below half the width of the bounds, at
// least the given one.
func roundingStep(width, least float64) float64 {
	if !(width > 0) {
		return least
	}
	return math.Max(least, math.Pow(10, math.Floor(math.Log10(width/2)+1e-9)))
}

func at(v, step float64) string {
	if step < 0.95 && v != 0 {
		return Number(v, 1)
	}
	return Number(v, 0)
}

// HoursBetween writes hours with their bounds.
func HoursBetween(v, low, high float64) string { return Between(v, low, high, "h") }

// Share writes a share (0 to 1) in per cent.
func Share(v float64) string {
	switch {
	case !known(v):
		return Dash
	case v > 0 && v < 0.005:
		return "under 1" + nbsp + "%"
	case v < 1 && v > 0.995:
		return "over 99" + nbsp + "%"
	}
	return Number(v*100, 0) + nbsp + "%"
}

// ShareNumber writes a share in per cent without the sign, for narrow tables.
func ShareNumber(v float64) string {
	switch {
	case !known(v):
		return Dash
	case v > 0 && v < 0.005:
		return "<1"
	case v < 1 && v > 0.995:
		return ">99"
	}
	return Number(v*100, 0)
}

// ShareBetween writes a share with its bounds.
func ShareBetween(v, low, high float64) string {
	low, high = math.Max(0, low), math.Min(1, high)
	return between(v*100, low*100, high*100, "%", func(float64) float64 { return 1 })
}

// Plural writes a count with its noun.
func Plural(n int, one, many string) string {
	if n == 1 {
		return "1" + nbsp + one
	}
	return Count(int64(n)) + nbsp + many
}

// Zones writes a number of zones.
func Zones(n int) string { return Plural(n, "zone", "zones") }

// People writes a number of people, "number of people not given" when unknown.
func People(n float64) string {
	if !known(n) {
		return "number of people not given"
	}
	if math.Abs(n-math.Round(n)) < 0.05 {
		return Plural(int(math.Round(n)), "person", "people")
	}
	return Number(n, 1) + nbsp + "people"
}

// List joins words: "a, b and c"; more than most are counted instead:
// "a, b and 3 more".
func List(items []string, most int) string {
	if most > 0 && len(items) > most {
		items = append(append([]string(nil), items[:most]...), Count(int64(len(items)-most))+" more")
	}
	switch len(items) {
	case 0:
		return ""
	case 1:
		return items[0]
	}
	return strings.Join(items[:len(items)-1], ", ") + " and " + items[len(items)-1]
}

// Clean makes foreign text harmless on one line: line breaks and control
// characters become spaces, marks that turn the writing direction and
// characters XML forbids are dropped.
func Clean(s string) string {
	var b strings.Builder
	for _, r := range s {
		switch {
		case Harmful(r):
		case unicode.IsControl(r), r == 0x2028, r == 0x2029:
			b.WriteByte(' ')
		default:
			b.WriteRune(r)
		}
	}
	return strings.TrimSpace(b.String())
}

// Harmful reports whether a character may turn the text around it or has no
// place in a document.
func Harmful(r rune) bool {
	return r == utf8.RuneError || r == 0xFFFE || r == 0xFFFF || r == 0xFEFF ||
		r >= 0x202A && r <= 0x202E || r >= 0x2066 && r <= 0x2069 || r == 0x200E || r == 0x200F || r == 0x061C
}

// Sentence gives a text a capital and a full stop.
func Sentence(s string) string {
	s = Clean(s)
	if s == "" {
		return ""
	}
	r, n := utf8.DecodeRuneInString(s)
	second, _ := utf8.DecodeRuneInString(s[n:])
	if !unicode.IsUpper(second) && !unicode.IsDigit(second) {
		s = string(unicode.ToUpper(r)) + s[n:]
	}
	if strings.ContainsRune(".!?", rune(s[len(s)-1])) {
		return s
	}
	return s + "."
}
