package site

import (
	"fmt"
	"strings"
)

// InfluxRead is how readings come out of a database.
type InfluxRead string

// Ways of reading.
const (
	// InfluxMeans lets the server average sampled numbers over the grid's
	// steps wherever that gives what the readings themselves would give; the
	// rest is read as logged.
	InfluxMeans InfluxRead = "means"
	// InfluxRaw reads everything as logged.
	InfluxRaw InfluxRead = "raw"
)

// Influx is a log kept in an InfluxDB. A reading is a field of a measurement
// whose tag PointTag names the point.
type Influx struct {
	// Address is the server's, with scheme and port, without credentials.
	Address string
	// Organisation may be empty on a server that knows none; Bucket is the
	// database, or database/retention, on an InfluxDB 1.8.
	Organisation, Bucket string
	// TokenEnv names the environment variable the token comes from; Token is
	// empty when it was not set.
	TokenEnv string
	Token    Secret
	// Measurement, PointTag and Field say where readings are; a point's column
	// may name another measurement and field, see Series.
	Measurement, PointTag, Field string
	// TimeOutS is how long one answer may take, seconds.
	TimeOutS int
	Read     InfluxRead
}

// Series resolves the column of a point: the value of the tag that names it,
// or measurement|field|value where it lies elsewhere than the log says; an
// empty measurement or field means the log's. Only the first two bars part.
func (f *Influx) Series(column string) (measurement, field, value string) {
	part := strings.SplitN(column, "|", 3)
	if len(part) < 3 {
		return f.Measurement, f.Field, column
	}
	measurement, field = part[0], part[1]
	if measurement == "" {
		measurement = f.Measurement
	}
	if field == "" {
		field = f.Field
	}
	return measurement, field, part[2]
}

// Secret is a text that shows itself only when asked by Reveal; printing or
// encoding it gives stars.
type Secret struct{ text string }

// NewSecret hides a text.
func NewSecret(text string) Secret { return Secret{text} }

// Reveal returns the hidden text.
func (s Secret) Reveal() string { return s.text }

// IsEmpty reports whether nothing is hidden.
func (s Secret) IsEmpty() bool { return s.text == "" }

const stars = "***"

func (s Secret) String() string { return stars }

// Format implements fmt.Formatter for every verb.
func (s Secret) Format(f fmt.State, _ rune) { _, _ = f.Write([]byte(stars)) }

// MarshalText implements encoding.TextMarshaler.
func (s Secret) MarshalText() ([]byte, error) { return []byte(stars), nil }
