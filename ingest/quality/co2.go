package quality

import (
	"fmt"
	"math"
	"slices"

	"sashlog/configs/site"
	"sashlog/ingest/grid"
	"sashlog/ingest/reading"
)

// Baselines of CO2 sensors: usual ones are accurate
// to 50 ppm + 3 % of reading (typical data-sheet figure); the rolling minimum
// of seven days shows the baseline; outdoor air is about 425 ppm (global mean
// 2024 about 423 ppm, from memory).
const (
	outdoorDefaultPPM = 425
	belowOutdoorPPM   = 45
	driftLimitPPM     = 75 // 50 ppm + 3 % of 425 ppm, and the like again for the reference, combined: our assumption
	highBaselinePPM   = 500
	baselineDays      = 7
	startDays         = 14 // whose median is where the sensor began
	driftDays         = 14 // a drift lasts at least so long
	hoursOfDayLeast   = 12
	siblingsLeast     = 3
)

// co2Baselines warns about sensors that read below outdoor air and takes out
// what a sensor says after its baseline drifted.
func co2Baselines(r *run) {
	var ps []int
	r.each(func(i int, p *site.Point, _ *grid.Column) {
		if p.Owner == site.OwnerZone {
			ps = append(ps, i)
		}
	}, site.CO2)
	outdoor, source := r.outdoorCO2()
	base := make([][]float64, len(ps))
	for k, p := range ps {
		base[k] = r.baseline(&r.grid.Columns[p], r.betweenSwaps(p))
	}
	for k, p := range ps {
		excess := make([]float64, len(r.days))
		for d := range excess {
			excess[d] = base[k][d] - outdoor[d]
		}
		if r.drift(p, base, k, excess) {
			continue
		}
		low, high, n := math.NaN(), 0, 0
		for d, e := range excess {
			if math.IsNaN(e) {
				continue
			}
			n++
			if e < -belowOutdoorPPM && (math.IsNaN(low) || e < low) {
				low = e
			}
			if base[k][d] > highBaselinePPM {
				high++
			}
		}
		zone := zoneOf(r.site, p)
		if !math.IsNaN(low) {
			below, least := 0, math.Inf(1)
			for d, e := range excess {
				if e < -belowOutdoorPPM {
					below++
				}
				if base[k][d] < least {
					least = base[k][d]
				}
			}
			r.add(warn(reading.CheckCO2Low, zone, []int{p},
				fmt.Sprintf("on %s the least hourly mean within a week is more than %d ppm below outdoor air (%s); the least is %.0f ppm", count(below, "day", "days"), belowOutdoorPPM, source, least),
				"set the sensor to outdoor air in fresh air, or switch its self-adjustment off if the zone is never empty; the CO2 above outdoors is understated"))
		}
		if n >= startDays && high*2 > n {
			r.add(warn(reading.CheckCO2Drift, zone, []int{p},
				fmt.Sprintf("on %d of %d days the least hourly mean within a week stays above %d ppm", high, n, highBaselinePPM),
				"either the zone is never flushed with outdoor air, nights and weekends included, or the sensor reads too high: hold it in outdoor air"))
		}
	}
}

// outdoorCO2 is the outdoor level per day and where it comes from.
func (r *run) outdoorCO2() (perDay []float64, source string) {
	level := float64(outdoorDefaultPPM)
	source = fmt.Sprintf("taken as %.0f ppm, from memory", level)
	if v := r.site.OutdoorCO2PPM; v > 0 {
		level, source = v, fmt.Sprintf("%.0f ppm by the site file", v)
	}
	perDay = make([]float64, len(r.days))
	for d := range perDay {
		perDay[d] = level
	}
	r.each(func(i int, p *site.Point, c *grid.Column) {
		if p.Owner != site.OwnerSite {
			return
		}
		source = "measured"
		b := r.baseline(c, r.betweenSwaps(i))
		for d := range perDay {
			if !math.IsNaN(b[d]) {
				perDay[d] = b[d]
			}
		}
	}, site.OutdoorCO2)
	return perDay, source
}

// baseline is, per local day, the least hourly mean of the seven days around
// it that belong to the same sensor; NaN where fewer than two of them hold half
// a day of readings.
func (r *run) baseline(c *grid.Column, parts [][2]int) []float64 {
	least := make([]float64, len(r.days))
	per := max(int(hourS/r.grid.StepS), 1)
	for d := range r.days {
		least[d] = math.NaN()
		hours := 0
		for h := r.days[d].from; h+per <= r.days[d].to; h += per {
			sum, n := 0.0, 0
			for k := h; k < h+per; k++ {
				if known(c.Mean[k]) {
					sum, n = sum+float64(c.Mean[k]), n+1
				}
			}
			if 2*n < per {
				continue
			}
			hours++
			if v := sum / float64(n); math.IsNaN(least[d]) || v < least[d] {
				least[d] = v
			}
		}
		if hours < hoursOfDayLeast {
			least[d] = math.NaN()
		}
	}
	out := make([]float64, len(least))
	for _, part := range parts {
		for d := part[0]; d < part[1]; d++ {
			out[d] = math.NaN()
			n := 0
			for k := max(d-baselineDays/2, part[0]); k <= min(d+baselineDays/2, part[1]-1); k++ {
				if math.IsNaN(least[k]) {
					continue
				}
				n++
				if math.IsNaN(out[d]) || least[k] < out[d] {
					out[d] = least[k]
				}
			}
			if n < 2 {
				out[d] = math.NaN()
			}
		}
	}
	return out
}

// drift compares a sensor's baseline with where it began, less what the other
// sensors of the building did meanwhile, and takes out the days after it moved
// too far. A sensor swap in the diary begins anew.
func (r *run) drift(point int, base [][]float64, mine int, excess []float64) bool {
	moved := make([]float64, len(excess))
	others := 0
	for d := range moved {
		var sib []float64
		for k := range base {
			if k != mine && !math.IsNaN(base[k][d]) {
				sib = append(sib, base[k][d])
			}
		}
		moved[d] = excess[d]
		if len(sib) >= siblingsLeast {
			moved[d] = base[mine][d] - median(sib)
			others = max(others, len(sib))
		}
	}
	var n int64
	var worst float64
	var bad []int // days
	for _, part := range r.betweenSwaps(point) {
		var begin []float64
		for d := part[0]; d < part[1] && len(begin) < startDays; d++ {
			if !math.IsNaN(moved[d]) {
				begin = append(begin, moved[d])
			}
		}
		if len(begin) < startDays {
			continue
		}
		from := median(begin)
		off := func(d int) bool {
			m := moved[d] - from
			up := m > driftLimitPPM && excess[d] > driftLimitPPM
			down := m < -driftLimitPPM && excess[d] < -belowOutdoorPPM
			return up || down
		}
		for d := part[0]; d < part[1]; d++ {
			end := d
			for end < part[1] && (off(end) || math.IsNaN(moved[end])) {
				end++
			}
			if end-d >= driftDays && off(d) {
				for k := d; k < end; k++ {
					bad = append(bad, k)
					if m := moved[k] - from; math.Abs(m) > math.Abs(worst) {
						worst = m
					}
				}
			}
			d = max(d, end)
		}
	}
	if len(bad) == 0 {
		return false
	}
	for _, d := range bad {
		n += r.built.Tally.Void(point, r.days[d].from, r.days[d].to, reading.Drifted)
	}
	against := "outdoor air"
	if others > 0 {
		against = fmt.Sprintf("%d other sensors", others)
	}
	fromUTC, toUTC := r.at(r.days[bad[0]].from), r.at(r.days[bad[len(bad)-1]].to)
	r.add(reading.Check{Kind: reading.CheckCO2Drift, Points: []int{point}, Zone: zoneOf(r.site, point), Effect: reading.EffectRemoved,
		FromUTC: fromUTC, ToUTC: toUTC, Readings: n,
		Evidence: fmt.Sprintf("the least hourly mean within a week moved by up to %+.0f ppm against %s since the sensor's first %d days; %s beyond %d ppm %s are left out",
			worst, against, startDays, count(len(bad), "day", "days"), driftLimitPPM, span(fromUTC, toUTC, r.grid.Loc)),
		DoNext: "set or change the sensor, and note the day in the diary as sensor_swap"})
	return true
}

// betweenSwaps parts the days of a point at the diary's sensor swaps.
func (r *run) betweenSwaps(point int) (parts [][2]int) {
	zone := zoneOf(r.site, point)
	cuts := []int{0, len(r.days)}
	for _, e := range r.site.Diary {
		if e.Kind != site.EventSensorSwap || zone < 0 || (len(e.Zones) > 0 && !slices.Contains(e.Zones, r.site.Zones[zone].ID)) {
			continue
		}
		if i := r.grid.Index(e.FromUTC); i > 0 && i < r.grid.N && r.dayOf[i] > 0 {
			cuts = append(cuts, int(r.dayOf[i]))
		}
	}
	slices.Sort(cuts)
	cuts = slices.Compact(cuts)
	for k := 1; k < len(cuts); k++ {
		parts = append(parts, [2]int{cuts[k-1], cuts[k]})
	}
	return parts
}
