// Package table writes results for other programs: the hourly record, the
// comfort table, episodes, readings, and every figure as JSON. It computes no
// figure.
//
// Rooms the privacy rule protects stand in hours.csv, hours.parquet and
// comfort.parquet by local day instead of by hour (by week where their presence
// is measured), without counts and CO2, and not in episodes.csv; results.json holds their sums.
package table

import (
	"math"
	"strconv"
	"strings"
	"unicode"

	"sashlog/analyze"
	"sashlog/analyze/exceedance"
	"sashlog/analyze/hours"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
	"sashlog/ingest/reading"
	"sashlog/report/privacy"
	"sashlog/report/provenance"
)

// Input is what the tables are written from.
type Input struct {
	Site       *site.Site
	Criteria   criteria.Settings
	Grid       *grid.Grid
	Ledger     *reading.Ledger
	Results    *analyze.Results
	Provenance provenance.Provenance
}

// row is one row of the hourly record, or one day of a protected room.
type row struct {
	zone      int
	hour      int // its first, as an index into the record's hours
	startUTC  int64
	seconds   [hours.NumCols]uint32
	values    [hours.NumVals]float32
	model     exceedance.Model
	protected bool
}

// sums are the value columns that add up; the others are means.
var sums = map[hours.Val]bool{hours.VOverKh: true, hours.VUnderKh: true, hours.VPeopleH: true, hours.VPersonH: true,
	hours.VPersonOverH: true, hours.VPersonUnderH: true}

// hidden are the value columns a protected room does not show.
var hidden = map[hours.Val]bool{hours.VPeopleH: true, hours.VCO2PPM: true, hours.VOpenShare: true}

// eachRow yields the rows of the hourly record in order of zone and time; the
// row is used again for the next.
func (in *Input) eachRow(rule privacy.Rule, f func(*row) error) error {
	rec := in.Results.Hours
	var r row
	for z := range rec.ZoneIDs {
		protected := rule.Protected(z)
		for h := 0; h < len(rec.Hours); {
			to := h + 1
			for protected && to < len(rec.Hours) && rule.SameSpan(z, rec.Hours[h].Date, rec.Hours[to].Date) {
				to++
			}
			r.fill(rec, z, h, to)
			r.protected = protected
			if protected {
				for v := range hidden {
					r.values[v] = float32(math.NaN())
				}
			}
			if err := f(&r); err != nil {
				return err
			}
			h = to
		}
	}
	return nil
}

// fill adds up the hours [from, to) of a zone.
func (r *row) fill(rec *hours.Record, z, from, to int) {
	r.zone, r.hour, r.startUTC = z, from, rec.Hours[from].StartUTC
	k := rec.Row(z, from)
	if to == from+1 {
		for c := range r.seconds {
			r.seconds[c] = uint32(rec.Seconds[c][k])
		}
		for v := range r.values {
			r.values[v] = rec.Values[v][k]
		}
		r.model = exceedance.Model(rec.ComfortModel[k])
		return
	}
	for c := range r.seconds {
		r.seconds[c] = 0
		for i := k; i < k+to-from; i++ {
			r.seconds[c] += uint32(rec.Seconds[c][i])
		}
	}
	for v := range r.values {
		sum, n := 0.0, 0.0
		for i := k; i < k+to-from; i++ {
			if x := float64(rec.Values[v][i]); !math.IsNaN(x) {
				sum += x
				n++
			}
		}
		if !sums[hours.Val(v)] || n == 0 {
			sum /= n
		}
		r.values[v] = float32(sum)
	}
	r.model = exceedance.Model(rec.ComfortModel[k+to-from-1])
}

// appendText writes a text cell: harmless as a formula and on a terminal,
// quoted where it must be.
func appendText(b []byte, s string) []byte {
	s = Harmless(s)
	if !strings.ContainsAny(s, ",\"\n\r") && strings.TrimSpace(s) == s {
		return append(b, s...)
	}
	b = append(b, '"')
	b = append(b, strings.ReplaceAll(s, `"`, `""`)...)
	return append(b, '"')
}

// Harmless makes foreign text safe in a cell: control characters and marks
// that turn the direction of writing become spaces, and text that a
// spreadsheet would run as a formula is led by an apostrophe.
func Harmless(s string) string {
	s = strings.Map(func(r rune) rune {
		if unicode.IsControl(r) || unicode.Is(unicode.Cf, r) || r == '\u2028' || r == '\u2029' {
			return ' '
		}
		return r
	}, s)
	if t := strings.TrimLeft(s, " "); t != "" && strings.ContainsRune("=+-@＝＋－＠", []rune(t)[0]) {
		return "'" + s
	}
	return s
}

// appendHours writes seconds as hours with five decimals, exactly rounded.
func appendHours(b []byte, seconds uint32) []byte {
	if seconds == 0 {
		return append(b, "0.00000"...)
	}
	u := (uint64(seconds)*100000 + 1800) / 3600
	b = strconv.AppendUint(b, u/100000, 10)
	b = append(b, '.')
	f := u % 100000
	for _, d := range [...]uint64{10000, 1000, 100, 10, 1} {
		b = append(b, byte('0'+f/d%10))
	}
	return b
}

// appendNumber writes a value with so many decimals, nothing when unknown.
func appendNumber(b []byte, v float64, decimals int) []byte {
	if math.IsNaN(v) || math.IsInf(v, 0) {
		return b
	}
	if v == 0 {
		v = 0 // no minus sign before zero
	}
	return strconv.AppendFloat(b, v, 'f', decimals, 64)
}
