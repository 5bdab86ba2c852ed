package compare

import (
	"fmt"
	"math"

	"sashlog/analyze/exceedance"
	"sashlog/analyze/hours"
	"sashlog/analyze/running"
	"sashlog/configs/site"
)

// ratio is a part of a whole that days add up to.
type ratio struct{ part, whole float64 }

// day is one occupied day: its weather and, for the compared and the untouched
// zones, the ratios of the measures.
type day struct {
	date    site.Date
	after   bool
	alike   bool    // has enough counterparts of like weather
	tempC   float64 // mean outdoor temperature of occupied hours
	suitedH float64
	of      [2][NumMeasures]ratio // compared, untouched
}

func (s Span) holds(d site.Date) bool { return !d.Before(s.From) && !s.To.Before(d) }

// daysOf gathers the occupied days of both periods, in order of time.
func daysOf(in *Input, group [2][]int, outside [][]ratio) []day {
	var out []day
	rec := in.Record
	for h := 0; h < len(rec.Hours); {
		to := h + 1
		for to < len(rec.Hours) && rec.Hours[to].Date == rec.Hours[h].Date {
			to++
		}
		date := rec.Hours[h].Date
		if before, after := in.Before.holds(date), in.After.holds(date); before || after {
			d := day{date: date, after: after}
			if d.gather(in, group, outside, h, to) {
				out = append(out, d)
			}
		}
		h = to
	}
	return out
}

// gather fills a day from its hours; false when nobody was there or the
// weather is not known.
func (d *day) gather(in *Input, group [2][]int, outside [][]ratio, from, to int) bool {
	rec := in.Record
	var temp, known, occupied float64
	zones := 0.0
	for g, list := range group {
		for _, z := range list {
			w := WeightOf(in.Site, z)
			for h := from; h < to; h++ {
				row := rec.Row(z, h)
				sec := func(c hours.Col) float64 { return w * float64(rec.Seconds[c][row]) / 3600 }
				add := func(m Measure, part, whole float64) {
					d.of[g][m].part += part
					d.of[g][m].whole += whole
				}
				occ := sec(hours.COccupied)
				if occ == 0 {
					continue
				}
				add(AchievedShare, sec(hours.CAchieved), sec(hours.CAchieved)+sec(hours.CMissed))
				add(ClashShare, sec(hours.CBoth), occ-sec(hours.CUnknown))
				if v := rec.Values[hours.VCO2PPM][row]; !math.IsNaN(float64(v)) {
					add(StaleShare, sec(hours.CCO2Over), occ)
				}
				o := outside[z][h]
				add(OutsideShare, w*o.part, w*o.whole)
				if g == 0 {
					occupied += occ
					zones += w * float64(rec.Seconds[hours.CSuited][row]) / 3600
					if v := float64(rec.Values[hours.VOutdoorTempC][row]); !math.IsNaN(v) {
						temp += occ * v
						known += occ
					}
				}
			}
		}
	}
	if occupied == 0 || known < occupied/2 {
		return false
	}
	d.tempC = temp / known
	d.suitedH = zones
	return true
}

// WeightOf counts a zone by its people where given.
func WeightOf(s *site.Site, z int) float64 {
	if p := s.Zones[z].People; p > 0 {
		return p
	}
	return 1
}

// outsideHours counts, per zone and hour, occupied hours outside a comfort
// criterion that does not depend on the running state, of those that it
// applies to.
func outsideHours(in *Input) (out [][]ratio, words string) {
	out = make([][]ratio, len(in.Site.Zones))
	for z := range out {
		out[z] = make([]ratio, len(in.Record.Hours))
	}
	const id = "imac-mm-90"
	applies, days := 0, 0
	for d := range in.Outdoor.Days {
		if date := in.Outdoor.Days[d].Date; !in.Before.holds(date) && !in.After.holds(date) {
			continue
		}
		days++
		if m := in.Outdoor.Days[d].Mean30DaysC; m >= 13 && m <= 38.5 {
			applies++
		}
	}
	if days > 0 && 2*applies > days && in.Exceedance.EachHour != nil {
		// Occupied hours within the criterion's range come from the same walk as
		// the comfort table.
		in.Exceedance.EachHour(func(h exceedance.Hourly) {
			if h.Criterion == id {
				out[h.Zone][h.Hour].part += float64(h.OverH + h.UnderH)
			}
		})
		for z := range out {
			for h := range out[z] {
				row := in.Record.Row(z, h)
				m := in.Outdoor.Days[in.Outdoor.DayOf[in.Record.Hours[h].FromStep]].Mean30DaysC
				if m >= 13 && m <= 38.5 && !math.IsNaN(float64(in.Record.Values[hours.VTempC][row])) {
					out[z][h].whole = float64(in.Record.Seconds[hours.COccupied][row]) / 3600
				}
			}
		}
		words = "Indian mixed-mode model, 90 % acceptability (Manu et al. 2016), the same line in every running state"
		if applies < days {
			words += fmt.Sprintf("; %d of %d days lie beyond its range (a 30-day mean of 13 to 38.5 °C) and are left out", days-applies, days)
		}
		return out, words
	}
	const lowC, highC = 20, 26
	stepH := in.Grid.StepH()
	for z := range out {
		temp := in.Indoor[z].OperativeC
		if temp == nil {
			continue
		}
		for h := range out[z] {
			for i := in.Record.Hours[h].FromStep; i < in.Record.Hours[h].ToStep; i++ {
				t := float64(temp[i])
				if in.Running.Zones[z].Occupied[i] != running.Occupied || math.IsNaN(t) {
					continue
				}
				out[z][h].whole += stepH
				if t < lowC || t > highC {
					out[z][h].part += stepH
				}
			}
		}
	}
	return out, "a fixed 20 to 26 °C, since the outdoor temperatures lie outside the range of the mixed-mode model (our assumption; EN 16798-1 category II, low of heating and high of cooling)"
}
