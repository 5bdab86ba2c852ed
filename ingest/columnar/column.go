package columnar

import (
	"encoding/binary"
	"encoding/json"
	"fmt"
	"math"
	"math/big"
	"strconv"
	"strings"
	"time"
	"unicode/utf8"

	"github.com/parquet-go/parquet-go"
	"github.com/parquet-go/parquet-go/format"
)

// column is one column that holds at most one value per row.
type column struct {
	name  string
	leaf  int // its place among the leaves of the schema
	write func(to []byte, v parquet.Value) []byte
	// when says what kind of time it holds; flagged that its times are
	// universal time by the file's own word.
	when    bool
	flagged bool
	unit    string // of its values, by the file's metadata; empty when not said
	what    string // its type in words
}

// columnsOf lists the columns that can be read and, in words, those that
// cannot.
func columnsOf(f *parquet.File) (cols []column, left []string) {
	elements := leafElements(f.Metadata())
	units := unitsOf(f.Metadata())
	for _, c := range f.Root().Columns() {
		if !c.Leaf() || c.Repeated() || c.MaxRepetitionLevel() > 0 {
			left = append(left, fmt.Sprintf("%q", strings.Join(c.Path(), ".")))
			continue
		}
		i := c.Index()
		if i < 0 || i >= len(elements) || elements[i].Name != c.Name() {
			left = append(left, fmt.Sprintf("%q", c.Name()))
			continue
		}
		col := column{name: c.Name(), leaf: i, unit: strings.TrimSpace(units[c.Name()])}
		if !col.typed(c, elements[i]) {
			left = append(left, fmt.Sprintf("%q", c.Name()))
			continue
		}
		cols = append(cols, col)
	}
	return cols, left
}

func leafElements(m *format.FileMetaData) []*format.SchemaElement {
	var out []*format.SchemaElement
	for i := range m.Schema {
		if m.Schema[i].Type.Valid {
			out = append(out, &m.Schema[i])
		}
	}
	return out
}

// typed chooses how values are written as text; false for types that hold no
// log values.
func (c *column) typed(col *parquet.Column, e *format.SchemaElement) bool {
	var logical any
	if l := col.Type().LogicalType(); l != nil {
		logical = l.Value
	}
	if l, ok := e.LogicalType.Value.(*format.Float16Type); ok {
		logical = l
	}
	kind := col.Type().Kind()
	switch t := logical.(type) {
	case *format.TimestampType:
		perS := int64(1000)
		c.what = "milliseconds"
		switch t.Unit.Value.(type) {
		case *format.MicroSeconds:
			perS, c.what = 1e6, "microseconds"
		case *format.NanoSeconds:
			perS, c.what = 1e9, "nanoseconds"
		}
		c.when, c.flagged = true, t.IsAdjustedToUTC
		c.write = func(to []byte, v parquet.Value) []byte { return instant(to, floor(v.Int64(), perS), c.flagged) }
		return kind == parquet.Int64
	case *format.DateType:
		c.when = true
		c.what = "dates"
		c.write = func(to []byte, v parquet.Value) []byte {
			return time.Unix(int64(v.Int32())*86400, 0).UTC().AppendFormat(to, time.DateOnly)
		}
		return kind == parquet.Int32
	case *format.TimeType:
		perS := int64(1000)
		switch t.Unit.Value.(type) {
		case *format.MicroSeconds:
			perS = 1e6
		case *format.NanoSeconds:
			perS = 1e9
		}
		c.write = func(to []byte, v parquet.Value) []byte {
			n := v.Int64()
			if kind == parquet.Int32 {
				n = int64(v.Int32())
			}
			return time.Unix(floor(n, perS), 0).UTC().AppendFormat(to, time.TimeOnly)
		}
		return kind == parquet.Int32 || kind == parquet.Int64
	case *format.DecimalType:
		return c.decimal(kind, t.Scale)
	case *format.Float16Type:
		c.write = func(to []byte, v parquet.Value) []byte {
			if b := v.ByteArray(); len(b) == 2 {
				return number(to, float16(binary.LittleEndian.Uint16(b)), 32)
			}
			return to
		}
		return kind == parquet.FixedLenByteArray
	case *format.IntType:
		if !t.IsSigned {
			c.write = func(to []byte, v parquet.Value) []byte {
				if kind == parquet.Int32 {
					return strconv.AppendUint(to, uint64(uint32(v.Int32())), 10)
				}
				return strconv.AppendUint(to, uint64(v.Int64()), 10)
			}
			return kind == parquet.Int32 || kind == parquet.Int64
		}
	case *format.MapType, *format.ListType, *format.BsonType, *format.GeometryType, *format.GeographyType, *format.VariantType, *format.NullType:
		return false
	}
	switch kind {
	case parquet.Boolean:
		c.write = func(to []byte, v parquet.Value) []byte { return strconv.AppendBool(to, v.Boolean()) }
	case parquet.Int32:
		c.write = func(to []byte, v parquet.Value) []byte { return strconv.AppendInt(to, int64(v.Int32()), 10) }
	case parquet.Int64:
		c.write = func(to []byte, v parquet.Value) []byte { return strconv.AppendInt(to, v.Int64(), 10) }
	case parquet.Int96:
		c.when, c.what = true, "nanoseconds of the old kind (INT96)"
		c.write = func(to []byte, v parquet.Value) []byte {
			i := v.Int96()
			const julianOf1970 = 2440588
			days, ns := int64(i[2])-julianOf1970, int64(uint64(i[1])<<32|uint64(i[0]))
			return instant(to, days*86400+floor(ns, 1e9), false)
		}
	case parquet.Float:
		c.write = func(to []byte, v parquet.Value) []byte { return number(to, float64(v.Float()), 32) }
	case parquet.Double:
		c.write = func(to []byte, v parquet.Value) []byte { return number(to, v.Double(), 64) }
	case parquet.ByteArray, parquet.FixedLenByteArray:
		c.write = func(to []byte, v parquet.Value) []byte { return words(to, v.ByteArray()) }
	default:
		return false
	}
	return true
}

// decimal reads whole numbers with a scale.
func (c *column) decimal(kind parquet.Kind, scale int32) bool {
	if scale < 0 || scale > 38 {
		return false
	}
	c.write = func(to []byte, v parquet.Value) []byte {
		var n big.Int
		switch kind {
		case parquet.Int32:
			n.SetInt64(int64(v.Int32()))
		case parquet.Int64:
			n.SetInt64(v.Int64())
		default: // big-endian two's complement
			b := v.ByteArray()
			if len(b) == 0 || len(b) > 16 {
				return to
			}
			n.SetBytes(b)
			if b[0]&0x80 != 0 {
				n.Sub(&n, new(big.Int).Lsh(big.NewInt(1), uint(8*len(b))))
			}
		}
		if n.Sign() < 0 {
			to = append(to, '-')
		}
		s := n.Abs(&n).String()
		if pad := int(scale) + 1 - len(s); pad > 0 {
			s = strings.Repeat("0", pad) + s
		}
		to = append(to, s[:len(s)-int(scale)]...)
		if scale > 0 {
			to = append(append(to, '.'), s[len(s)-int(scale):]...)
		}
		return to
	}
	return kind == parquet.Int32 || kind == parquet.Int64 || kind == parquet.ByteArray || kind == parquet.FixedLenByteArray
}

// floor divides downwards, so that fractions before 1970 are cut like others.
func floor(n, by int64) int64 {
	q := n / by
	if n%by < 0 {
		q--
	}
	return q
}

// instant writes seconds since 1970 as a timestamp, with Z when they are
// universal time.
func instant(to []byte, s int64, utc bool) []byte {
	const first, last = -62135596800, 253402300799 // years 1 to 9999
	if s < first || s > last {
		return append(strconv.AppendInt(append(to, "time out of range: "...), s, 10), " s"...)
	}
	to = time.Unix(s, 0).UTC().AppendFormat(to, "2006-01-02T15:04:05")
	if utc {
		to = append(to, 'Z')
	}
	return to
}

// number writes the shortest text that reads back as the same number; not a
// number is a missing value and stays empty.
func number(to []byte, x float64, bits int) []byte {
	switch a := math.Abs(x); {
	case math.IsNaN(x):
		return to
	case a != 0 && (a < 1e-6 || a >= 1e15):
		return strconv.AppendFloat(to, x, 'g', -1, bits)
	}
	return strconv.AppendFloat(to, x, 'f', -1, bits)
}

// float16 is a half-precision number (IEEE 754-2019, binary16).
func float16(h uint16) float64 {
	sign, exp, frac := float64(1), int(h>>10&31), float64(h&1023)
	if h>>15 == 1 {
		sign = -1
	}
	switch exp {
	case 0:
		return sign * math.Ldexp(frac, -24)
	case 31:
		if frac != 0 {
			return math.NaN()
		}
		return math.Inf(int(sign))
	}
	return sign * math.Ldexp(1024+frac, exp-25)
}

// cellMost bounds the text of one cell.
const cellMost = 4096

// words copies text; bytes that are no text are shown as such.
func words(to, b []byte) []byte {
	if len(b) > cellMost {
		b = b[:cellMost]
		for n := 0; n < utf8.UTFMax && !utf8.Valid(b[len(b)-utf8.UTFMax:]); n++ {
			b = b[:len(b)-1]
		}
	}
	if !utf8.Valid(b) {
		return strconv.AppendQuoteToASCII(to, string(b))
	}
	return append(to, b...)
}

// unitsOf finds units of columns where writers put them: beside a column's
// data ("unit" or "units"), or in the file's metadata as "NAME.unit",
// "unit:NAME" or a table of names and units called "units", also among the
// attributes of a data frame.
func unitsOf(m *format.FileMetaData) map[string]string {
	units := map[string]string{}
	isUnit := func(k string) bool { k = strings.ToLower(k); return k == "unit" || k == "units" }
	table := func(text []byte) {
		var t map[string]any
		if json.Unmarshal(text, &t) != nil {
			return
		}
		for name, u := range t {
			if s, ok := u.(string); ok {
				units[name] = s
			}
		}
	}
	for _, kv := range m.KeyValueMetadata {
		name, isDot := cutSuffixFold(kv.Key, ".unit")
		switch {
		case isUnit(kv.Key):
			table([]byte(kv.Value))
		case kv.Key == "pandas":
			var frame struct {
				Attributes map[string]json.RawMessage `json:"attributes"`
			}
			if json.Unmarshal([]byte(kv.Value), &frame) == nil {
				for k, v := range frame.Attributes {
					if isUnit(k) {
						table(v)
					}
				}
			}
		case isDot:
			units[name] = kv.Value
		case strings.HasPrefix(strings.ToLower(kv.Key), "unit:"):
			units[kv.Key[len("unit:"):]] = kv.Value
		}
	}
	if len(m.RowGroups) > 0 {
		for _, c := range m.RowGroups[0].Columns {
			for _, kv := range c.MetaData.KeyValueMetadata {
				if isUnit(kv.Key) && len(c.MetaData.PathInSchema) == 1 {
					units[c.MetaData.PathInSchema[0]] = kv.Value
				}
			}
		}
	}
	for name, u := range units {
		if len(u) > 40 || !utf8.ValidString(u) {
			delete(units, name)
		}
	}
	return units
}

func cutSuffixFold(s, suffix string) (string, bool) {
	if n := len(s) - len(suffix); n > 0 && strings.EqualFold(s[n:], suffix) {
		return s[:n], true
	}
	return s, false
}
