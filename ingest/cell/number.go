// Package cell turns the text of one cell into a reading of one point: it
// knows the written forms of numbers, the markers of a missing value and the
// words for states, and hands over canonical units. Every kind of reader uses
// it, so that a cell means the same in a text file and in a workbook.
package cell

import (
	"bytes"
	"encoding/binary"
	"math/bits"
	"strconv"
)

// powers of ten that a float64 holds exactly.
var pow10 = [...]float64{1, 1e1, 1e2, 1e3, 1e4, 1e5, 1e6, 1e7, 1e8, 1e9, 1e10, 1e11,
	1e12, 1e13, 1e14, 1e15, 1e16, 1e17, 1e18, 1e19, 1e20, 1e21, 1e22}

// Short reads a plain decimal (sign, digits, mark, digits) from the front of b
// and returns how many bytes it took. n is 0 when b begins otherwise or the
// number has more than 15 digits; then Number decides. The result is the
// nearest float64, as strconv gives: a whole number below 1e15 divided by an
// exact power of ten rounds once.
//
// Numbers of up to seven characters, nearly all of a log, are read as one word
// of eight bytes without a branch per digit.
func Short(b []byte, mark byte) (v float64, n int) {
	if len(b) < 8 {
		return short(b, mark)
	}
	if v, n = Word(binary.LittleEndian.Uint64(b), mark); n == 0 {
		return short(b, mark)
	}
	return v, n
}

// Word is Short for the number at the front of eight bytes, the first in the
// lowest byte; n is at most 7. n is 0 for everything else: a sign, a number that
// may go on behind the eight bytes, no number.
func Word(w uint64, mark byte) (v float64, n int) {
	// Digits become 0 to 9, every other byte 10 or more.
	x := w ^ 0x3030303030303030
	other := ((x&0x7f7f7f7f7f7f7f7f + 0x7676767676767676) | x) & 0x8080808080808080
	n = bits.TrailingZeros64(other) >> 3
	if n == 0 || n == 8 {
		return 0, 0
	}
	if byte(w>>(8*n)) != mark {
		return float64(eight(x, n)), n
	}
	other &= other - 1
	digits := bits.TrailingZeros64(other)>>3 - 1
	if other == 0 || digits == n { // goes on, or nothing after the mark
		return 0, 0
	}
	whole := uint64(1)<<(8*n) - 1
	return float64(eight(x&whole|x>>8&^whole, digits)) / pow10[(digits-n)&7], digits + 1
}

// eight is the number that the first digits of a word spell, the first in its
// lowest byte: zeros go in front, then twos, fours and eights are joined.
func eight(x uint64, digits int) uint64 {
	x <<= 64 - 8*digits
	x = (x*10 + x>>8) & 0x00ff00ff00ff00ff
	x = (x*100 + x>>16) & 0x0000ffff0000ffff
	return (x*10000 + x>>32) & 0x00000000ffffffff
}

// short is Short digit by digit.
func short(b []byte, mark byte) (v float64, n int) {
	i, neg := 0, false
	if len(b) > 0 && b[0] == '-' {
		neg, i = true, 1
	}
	start := i
	var m uint64
	for i < len(b) {
		c := b[i] - '0'
		if c > 9 {
			break
		}
		m = m*10 + uint64(c)
		i++
	}
	digits := i - start
	if digits == 0 || digits > 15 {
		return 0, 0
	}
	v = float64(m)
	if i < len(b) && b[i] == mark {
		i++
		start = i
		for i < len(b) {
			c := b[i] - '0'
			if c > 9 {
				break
			}
			m = m*10 + uint64(c)
			i++
		}
		frac := i - start
		if frac == 0 || digits+frac > 15 {
			return 0, 0
		}
		v = float64(m) / pow10[frac]
	}
	if neg {
		v = -v
	}
	return v, i
}

// Style is how a log writes numbers.
type Style struct {
	// Mark is the decimal mark, '.' or ','.
	Mark byte
	// Declared is true when the user gave the mark; then the other of the two,
	// between groups of three digits, is a thousands mark. Otherwise a single
	// group ("1,234") is refused, because it could be either.
	Declared bool
	// Latin is true for Windows-1252 bytes.
	Latin bool
}

// Number reads a number as people and loggers write it. rest is what follows
// it in the cell (a unit, a percent sign), trimmed. ok is false when the cell
// does not begin with a number that has one meaning.
func (s Style) Number(b []byte) (v float64, rest []byte, ok bool) {
	b = trim(b)
	var buf [64]byte
	out := buf[:0]
	if r, n := minus(b, s.Latin); n > 0 {
		if r {
			out = append(out, '-')
		}
		b = trim(b[n:])
	}
	other := byte(',')
	if s.Mark == ',' {
		other = '.'
	}
	var groups, intDigits, group int // thousands groups closed; digits met; digits since the last mark
	var mark byte                    // the thousands mark in use
	i := 0
	for i < len(b) && len(out) < 40 {
		c := b[i]
		if c-'0' <= 9 {
			out = append(out, c)
			intDigits++
			group++
			i++
			continue
		}
		m, n := thousands(b[i:], other)
		if n == 0 || i+n >= len(b) || b[i+n]-'0' > 9 || intDigits == 0 || intDigits-group > 0 && group != 3 || group > 3 || mark != 0 && m != mark {
			break
		}
		if digitsAt(b[i+n:]) < 3 { // not a group of three: a unit such as "21 5m"
			break
		}
		mark = m
		groups++
		group = 0
		i += n
	}
	if intDigits == 0 && (i >= len(b) || b[i] != s.Mark) || groups > 0 && group != 3 {
		return 0, nil, false
	}
	frac := 0
	if i < len(b) && b[i] == s.Mark {
		j := i + 1
		frac = digitsAt(b[j:])
		if frac+intDigits == 0 || len(out)+frac > 60 {
			return 0, nil, false
		}
		out = append(append(out, '.'), b[j:j+frac]...)
		i = j + frac
	}
	if groups == 1 && mark == other && frac == 0 && !s.Declared {
		return 0, nil, false // "1,234" may be either
	}
	if i < len(b) && b[i]|0x20 == 'e' {
		j := i + 1
		if j < len(b) && (b[j] == '+' || b[j] == '-') {
			j++
		}
		if k := digitsAt(b[j:]); k > 0 && k < 4 {
			out = append(out, b[i:j+k]...)
			i = j + k
		}
	}
	v, err := strconv.ParseFloat(string(out), 64)
	if err != nil {
		return 0, nil, false
	}
	rest = trim(b[i:])
	if len(rest) > 0 && (rest[0]-'0' <= 9 || rest[0] == '.' || rest[0] == ',' || rest[0] == ':' || rest[0] == '-' || rest[0] == '/') {
		return 0, nil, false
	}
	return v, rest, true
}

func digitsAt(b []byte) int {
	n := 0
	for n < len(b) && b[n]-'0' <= 9 {
		n++
	}
	return n
}

// minus reads a sign: '+', '-', U+2212, an en dash, or the Windows-1252 dash.
func minus(b []byte, latin bool) (negative bool, n int) {
	switch {
	case len(b) == 0:
	case b[0] == '-':
		return true, 1
	case b[0] == '+':
		return false, 1
	case bytes.HasPrefix(b, []byte("\u2212")), bytes.HasPrefix(b, []byte("\u2013")):
		return true, 3
	case latin && b[0] == 0x96:
		return true, 1
	}
	return false, 0
}

// thousands reads a thousands mark: the mark that is not the decimal one, an
// apostrophe, a space or a no-break space, narrow or not.
func thousands(b []byte, other byte) (mark byte, n int) {
	switch c := b[0]; {
	case c == other:
		return other, 1
	case c == '\'':
		return '\'', 1
	case c == ' ' || c == 0xA0:
		return ' ', 1
	case bytes.HasPrefix(b, []byte("\u00a0")):
		return ' ', 2
	case bytes.HasPrefix(b, []byte("\u202f")), bytes.HasPrefix(b, []byte("\u2009")):
		return ' ', 3
	case bytes.HasPrefix(b, []byte("\u2019")):
		return '\'', 3
	}
	return 0, 0
}

// trim drops spaces, tabs, line ends and no-break spaces around b.
func trim(b []byte) []byte {
	for len(b) > 0 {
		switch {
		case b[0] <= ' ' || b[0] == 0xA0:
			b = b[1:]
			continue
		case len(b) > 1 && b[0] == 0xC2 && b[1] == 0xA0:
			b = b[2:]
			continue
		case bytes.HasPrefix(b, []byte("\u202f")), bytes.HasPrefix(b, []byte("\ufeff")):
			b = b[3:]
			continue
		}
		break
	}
	for len(b) > 0 {
		n := len(b)
		switch {
		case b[n-1] <= ' ':
			b = b[:n-1]
			continue
		case n > 1 && b[n-2] == 0xC2 && b[n-1] == 0xA0:
			b = b[:n-2]
			continue
		case n > 2 && bytes.HasSuffix(b, []byte("\u202f")):
			b = b[:n-3]
			continue
		case n > 1 && b[n-1] == 0xA0 && b[n-2] < 0x80: // Windows-1252
			b = b[:n-1]
			continue
		}
		break
	}
	return b
}
