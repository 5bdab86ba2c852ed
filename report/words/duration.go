package words

import "math"

// Duration writes hours as hours and minutes: to the minute below an hour, to
// five minutes below ten hours, to whole hours above.
func Duration(h float64) string {
	if !known(h) {
		return Dash
	}
	step := 1.0
	switch {
	case h >= 10:
		step = 60
	case h >= 1:
		step = 5
	}
	return minutes(h*60, step)
}

// DurationBetween writes a duration no finer than its bounds allow, with the
// bounds in brackets, rounded outwards.
func DurationBetween(v, low, high float64) string {
	if !known(low) || !known(high) || high < low {
		return Duration(v)
	}
	width := (high - low) * 60
	step := 1.0
	switch {
	case width >= 120 || v >= 10:
		step = 30
	case width >= 40:
		step = 10
	case width >= 10 || v >= 1:
		step = 5
	}
	lo := minutes(math.Floor(low*60/step+1e-9)*step, step)
	hi := minutes(math.Ceil(high*60/step-1e-9)*step, step)
	if !known(v) {
		return lo + " to " + hi
	}
	value := minutes(v*60, step)
	if lo == hi || width < step/2 {
		return value
	}
	return value + " (" + lo + " to " + hi + ")"
}

// minutes writes minutes rounded to a step.
func minutes(m, step float64) string {
	if m > 0 && math.Round(m/step) == 0 {
		return "under " + minutes(step, step)
	}
	n := int64(math.Round(m/step) * step)
	h, rest := n/60, n%60
	switch {
	case h == 0:
		return Count(rest) + nbsp + "min"
	case rest == 0:
		return Count(h) + nbsp + "h"
	}
	return Count(h) + nbsp + "h" + nbsp + Count(rest) + nbsp + "min"
}
