package influx

import (
	"fmt"
	"strconv"
	"strings"
	"time"
)

// fluxString writes a string literal. Beside the quote and the backslash, $
// must be escaped: with a brace it would begin an expression. It is written
// as a code, because old servers misread \$ after other backslashes.
func fluxString(s string) string {
	var b strings.Builder
	b.WriteByte('"')
	for i := 0; i < len(s); i++ {
		switch c := s[i]; {
		case c == '"' || c == '\\':
			b.WriteByte('\\')
			b.WriteByte(c)
		case c == '$' || c < ' ' || c == 0x7f:
			fmt.Fprintf(&b, `\x%02x`, c)
		default:
			b.WriteByte(c)
		}
	}
	b.WriteByte('"')
	return b.String()
}

// fluxFloat writes a number as old servers read it: no exponent, always with a
// decimal point.
func fluxFloat(v float64) string {
	s := strconv.FormatFloat(v, 'f', -1, 64)
	if !strings.Contains(s, ".") {
		s += ".0"
	}
	return s
}

func fluxTime(unixS int64) string { return time.Unix(unixS, 0).UTC().Format(time.RFC3339) }

// fluxStop is the end of a range [from, to). Old servers take the stop as
// included, newer ones do not: the last nanosecond before it suits both.
func fluxStop(unixS int64) string {
	return time.Unix(unixS, -1).UTC().Format(time.RFC3339Nano)
}

// place is a measurement's field, from which series are taken.
type place struct{ measurement, field string }

// source is the beginning of a query: the readings of the tag values in
// [fromS, toS); no values means every series.
func (c *conn) source(pl place, values []string, fromS, toS int64) string {
	var b strings.Builder
	fmt.Fprintf(&b, "from(bucket: %s)\n |> range(start: %s, stop: %s)\n", fluxString(c.in.Bucket), fluxTime(fromS), fluxStop(toS))
	fmt.Fprintf(&b, " |> filter(fn: (r) => r._measurement == %s and r._field == %s", fluxString(pl.measurement), fluxString(pl.field))
	for i, v := range values {
		if i == 0 {
			b.WriteString(" and (")
		} else {
			b.WriteString(" or ")
		}
		fmt.Fprintf(&b, "r[%s] == %s", fluxString(c.in.PointTag), fluxString(v))
	}
	if len(values) > 0 {
		b.WriteByte(')')
	}
	b.WriteString(")\n")
	return b.String()
}

// columns keeps the tag and what else is named, and nothing more on the wire.
func (c *conn) columns(names ...string) string {
	var b strings.Builder
	b.WriteString(" |> keep(columns: [" + fluxString(c.in.PointTag))
	for _, n := range names {
		b.WriteString(", " + fluxString(n))
	}
	b.WriteString("])\n")
	return b.String()
}
