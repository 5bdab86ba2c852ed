package demo

import (
	"math"
	"math/rand/v2"
	"strconv"
)

// sensor reads a true value with an offset of its own, noise and a resolution.
type sensor struct {
	rng         *rand.Rand
	bias, noise float64
	step        float64
}

func (b *building) sensor(name string, biasSD, noise, resolution float64) sensor {
	rng := stream(b.options.Seed, "sensor/"+name)
	return sensor{rng, biasSD * rng.NormFloat64(), noise, resolution}
}

func (s *sensor) read(x float64) float64 {
	return math.Round((x+s.bias+s.noise*s.rng.NormFloat64())/s.step) * s.step
}

// wallSensorC is what a sensor on the wall feels: mostly air, partly the
// surfaces around it, hence close to the operative temperature.
func (z *ZoneTruth) wallSensorC(i int) float64 {
	a := float64(z.AirC[i])
	return a + 0.8*(float64(z.OperativeC[i])-a)
}

// appendFixed appends x with so many decimals, rounded half away from zero.
func appendFixed(buf []byte, x float64, digits int, decimal byte) []byte {
	scale := 1.0
	for range digits {
		scale *= 10
	}
	v := int64(math.Round(x * scale))
	if v < 0 {
		buf = append(buf, '-')
		v = -v
	}
	if digits == 0 {
		return strconv.AppendInt(buf, v, 10)
	}
	whole, part := v/int64(scale), v%int64(scale)
	buf = append(strconv.AppendInt(buf, whole, 10), decimal)
	for f := int64(scale) / 10; f > 0; f /= 10 {
		buf = append(buf, byte('0'+part/f%10))
	}
	return buf
}

// civil is a wall-clock day with its date written ready.
type civil struct {
	day int64 // since 1970 in local time, +1
	dmy [10]byte
	ymd [10]byte
}

// at brings the date up to a local time in seconds since 1970.
func (c *civil) at(localS int64) {
	d := localS / 86400
	if d+1 == c.day {
		return
	}
	c.day = d + 1
	// Days to date: Hinnant's civil_from_days, from memory.
	z := d + 719468
	era := z / 146097
	doe := z - era*146097
	yoe := (doe - doe/1460 + doe/36524 - doe/146096) / 365
	doy := doe - (365*yoe + yoe/4 - yoe/100)
	mp := (5*doy + 2) / 153
	day, month, year := doy-(153*mp+2)/5+1, mp+3, yoe+era*400
	if month > 12 {
		month -= 12
		year++
	}
	two := func(x int64) (byte, byte) { return byte('0' + x/10), byte('0' + x%10) }
	d1, d0 := two(day)
	m1, m0 := two(month)
	y3, y2 := two(year / 100)
	y1, y0 := two(year % 100)
	c.dmy = [10]byte{d1, d0, '.', m1, m0, '.', y3, y2, y1, y0}
	c.ymd = [10]byte{y3, y2, y1, y0, '-', m1, m0, '-', d1, d0}
}

// appendClock appends hh:mm, and :ss where asked.
func appendClock(buf []byte, localS int64, seconds bool) []byte {
	s := localS % 86400
	h, m := s/3600, s/60%60
	buf = append(buf, byte('0'+h/10), byte('0'+h%10), ':', byte('0'+m/10), byte('0'+m%10))
	if seconds {
		buf = append(buf, ':', byte('0'+s%60/10), byte('0'+s%10))
	}
	return buf
}

// appendYMD appends "2025-03-30 02:05:00" with the given separator.
func (c *civil) appendYMD(buf []byte, localS int64, sep byte) []byte {
	c.at(localS)
	buf = append(append(buf, c.ymd[:]...), sep)
	return appendClock(buf, localS, true)
}
