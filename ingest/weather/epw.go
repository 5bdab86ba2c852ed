// Package weather reads weather files that are not logs: hourly typical years
// in the EPW format. Measured weather comes as ordinary mapped logs.
package weather

import (
	"bufio"
	"errors"
	"fmt"
	"io"
	"math"
	"strconv"
	"strings"

	"sashlog/ingest/grid"
)

// Fields of a data line, counted from 0, and the markers of a missing value,
// after the EnergyPlus Auxiliary Programs manual, "EnergyPlus Weather File
// (EPW) Data Dictionary" (US Department of Energy). A value at or above the
// marker is missing.
const (
	fieldMonth, fieldDay, fieldHour = 1, 2, 3
	fieldTemp, missingTemp          = 6, 99.9
	fieldDew, missingDew            = 7, 99.9
	fieldRH, missingRH              = 8, 999
	fieldGlobal, missingGlobal      = 13, 9999
	fieldDir, missingDir            = 20, 999
	fieldWind, missingWind          = 21, 999
	fieldsLeast                     = 22
)

const (
	headerLines = 8
	hoursOfYear = 8760
	lineMost    = 1 << 16
	lowestTempC = -70 // the dictionary's least valid dry bulb and dew point
)

var daysBefore = [...]int{0, 31, 59, 90, 120, 151, 181, 212, 243, 273, 304, 334}
var daysOf = [...]int{31, 28, 31, 30, 31, 30, 31, 31, 30, 31, 30, 31}

// ReadEPW reads a typical year. Hour k of the result (k from 0) is the hour
// that ends k+1 hours after the year's beginning in the file's standard time;
// the 29th of February is left out. Missing values are NaN. The name is for
// messages. Errors name file and line.
func ReadEPW(r io.Reader, name string) (*grid.TypicalYear, error) {
	sc := bufio.NewScanner(r)
	sc.Buffer(make([]byte, 0, 4096), lineMost)
	y := &grid.TypicalYear{Source: name}
	for _, c := range []*[]float32{&y.TempC, &y.DewPointC, &y.RHPct, &y.WindMS, &y.WindDirDeg, &y.GlobalWm2} {
		*c = make([]float32, hoursOfYear)
		for i := range *c {
			(*c)[i] = float32(math.NaN())
		}
	}
	seen := make([]bool, hoursOfYear)
	hours, line := 0, 0
	for sc.Scan() {
		line++
		text := strings.TrimSpace(sc.Text())
		if line <= headerLines {
			if line == 1 {
				if err := location(y, strings.TrimPrefix(text, "\ufeff")); err != nil {
					return nil, fmt.Errorf("%s:1: %w", name, err)
				}
			}
			continue
		}
		if text == "" {
			continue
		}
		k, err := hour(y, strings.Split(text, ","), seen)
		if err != nil {
			return nil, fmt.Errorf("%s:%d: %w", name, line, err)
		}
		if k >= 0 {
			hours++
		}
	}
	if err := sc.Err(); err != nil {
		if errors.Is(err, bufio.ErrTooLong) {
			err = fmt.Errorf("a line is longer than %d bytes; this is no EPW file", lineMost)
		}
		return nil, fmt.Errorf("%s:%d: %w", name, line+1, err)
	}
	if hours != hoursOfYear {
		return nil, fmt.Errorf("%s: %d hours, want %d: the file is cut short or holds no whole year", name, hours, hoursOfYear)
	}
	return y, nil
}

// location reads the first header line: place, coordinates, time zone.
func location(y *grid.TypicalYear, text string) error {
	f := strings.Split(text, ",")
	if !strings.EqualFold(f[0], "LOCATION") || len(f) < 9 {
		return fmt.Errorf("not an EPW file: it begins %.40q, want LOCATION and 9 fields", text)
	}
	h, err := strconv.ParseFloat(strings.TrimSpace(f[8]), 64)
	if err != nil || !(h >= -12 && h <= 14) {
		return fmt.Errorf("time zone %.40q in field 9, want hours from UTC between -12 and 14", f[8])
	}
	y.Name, y.OffsetH = strings.TrimSpace(f[1]), h
	return nil
}

// hour stores one data line and returns its place, -1 for the leap day.
func hour(y *grid.TypicalYear, f []string, seen []bool) (int, error) {
	if len(f) < fieldsLeast {
		return 0, fmt.Errorf("%d fields, want at least %d", len(f), fieldsLeast)
	}
	month, err1 := strconv.Atoi(strings.TrimSpace(f[fieldMonth]))
	day, err2 := strconv.Atoi(strings.TrimSpace(f[fieldDay]))
	h, err3 := strconv.Atoi(strings.TrimSpace(f[fieldHour]))
	if err1 != nil || err2 != nil || err3 != nil || month < 1 || month > 12 || day < 1 || h < 1 || h > 24 {
		return 0, fmt.Errorf("month, day, hour are %.40q, want 1 to 12, 1 to 31, 1 to 24", strings.Join(f[fieldMonth:fieldHour+1], ","))
	}
	if month == 2 && day == 29 {
		return -1, nil
	}
	if day > daysOf[month-1] {
		return 0, fmt.Errorf("day %d of month %d", day, month)
	}
	k := (daysBefore[month-1]+day-1)*24 + h - 1
	if seen[k] {
		return 0, fmt.Errorf("month %d, day %d, hour %d comes twice", month, day, h)
	}
	seen[k] = true
	for _, c := range []struct {
		to         []float32
		field      int
		low, below float64
	}{
		{y.TempC, fieldTemp, lowestTempC, missingTemp},
		{y.DewPointC, fieldDew, lowestTempC, missingDew},
		{y.RHPct, fieldRH, 0, missingRH},
		{y.GlobalWm2, fieldGlobal, 0, missingGlobal},
		{y.WindDirDeg, fieldDir, 0, missingDir},
		{y.WindMS, fieldWind, 0, missingWind},
	} {
		text := strings.TrimSpace(f[c.field])
		if text == "" {
			continue
		}
		v, err := strconv.ParseFloat(text, 64)
		if err != nil {
			return 0, fmt.Errorf("%.40q in field %d is no number", text, c.field+1)
		}
		if v >= c.low && v < c.below {
			c.to[k] = float32(v)
		}
	}
	return k, nil
}
