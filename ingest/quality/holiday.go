package quality

import (
	"fmt"
	"math"
	"strings"

	"sashlog/configs/site"
	"sashlog/ingest/grid"
	"sashlog/ingest/reading"
)

// A working day looks like a holiday when nearly every zone's CO2 rises by
// less than a part of what it usually does and no presence sensor saw anyone.
// The limits are our assumption.
const (
	flatPart       = 0.4
	flatZones      = 0.85
	riseLeastPPM   = 60 // a zone whose usual rise is smaller tells nothing
	evidenceZones  = 3
	usualDaysLeast = 10
	presenceMost   = 0.01 // of the scheduled time
	datesShown     = 12
)

// undeclaredHolidays warns about working days on which nobody seems to come.
func undeclaredHolidays(r *run) {
	rises := map[int][]float64{} // zone -> rise per day, NaN unknown
	var zones []int
	for z := range r.site.Zones {
		if co2 := r.zoneMean(z, site.CO2); co2 != nil {
			zones = append(zones, z)
			rises[z] = r.rise(z, co2)
		}
	}
	usual := map[int]float64{}
	for _, z := range zones {
		var v []float64
		for _, x := range rises[z] {
			if !math.IsNaN(x) {
				v = append(v, x)
			}
		}
		if len(v) >= usualDaysLeast {
			usual[z] = median(v)
		}
	}
	var dates []string
	var firstDay, lastDay, most, least int
	for d := range r.days {
		flat, judged := 0, 0
		for _, z := range zones {
			if x := rises[z][d]; !math.IsNaN(x) && usual[z] >= riseLeastPPM {
				judged++
				if x < flatPart*usual[z] {
					flat++
				}
			}
		}
		seen, sensors := r.presence(d)
		enough := judged >= evidenceZones || (judged >= 1 && sensors >= 1)
		if !enough || float64(flat) < flatZones*float64(judged) || seen > presenceMost {
			continue
		}
		if len(dates) == 0 {
			firstDay, least = d, judged
		}
		lastDay, most, least = d, max(most, judged), min(least, judged)
		dates = append(dates, r.days[d].date.String())
	}
	if len(dates) == 0 {
		return
	}
	shown := strings.Join(dates[:min(len(dates), datesShown)], ", ")
	if len(dates) > datesShown {
		shown += fmt.Sprintf(" and %d more", len(dates)-datesShown)
	}
	w := warn(reading.CheckHoliday, -1, nil,
		fmt.Sprintf("on %s CO2 rose by less than %.0f %% of its usual in at least %.0f %% of %d to %d zones, and no presence sensor saw anyone: %s",
			count(len(dates), "scheduled day", "scheduled days"), 100*flatPart, 100*flatZones, least, most, shown),
		"add these days to the holidays of the site file if nobody was there; until then they count as occupied")
	w.FromUTC, w.ToUTC = r.at(r.days[firstDay].from), r.at(r.days[lastDay].to)
	r.add(w)
}

// rise is, per day, the greatest hourly mean of a zone's CO2 in scheduled time
// above the least of the day; NaN on days off and where half is missing.
func (r *run) rise(zone int, co2 []float32) []float64 {
	out := make([]float64, len(r.days))
	per := max(int(hourS/r.grid.StepS), 1)
	for d := range r.days {
		out[d] = math.NaN()
		low, high := math.Inf(1), math.Inf(-1)
		scheduled, knownSteps := 0, 0
		for h := r.days[d].from; h+per <= r.days[d].to; h += per {
			sum, n, in := 0.0, 0, false
			for k := h; k < h+per; k++ {
				if r.scheduled(zone, k) {
					scheduled++
					in = true
					if known(co2[k]) {
						knownSteps++
					}
				}
				if known(co2[k]) {
					sum, n = sum+float64(co2[k]), n+1
				}
			}
			if 2*n < per {
				continue
			}
			v := sum / float64(n)
			low = min(low, v)
			if in {
				high = max(high, v)
			}
		}
		if scheduled > 0 && 2*knownSteps >= scheduled && !math.IsInf(high, 0) {
			out[d] = high - low
		}
	}
	return out
}

// presence is the greatest share of scheduled time any presence sensor or
// counter saw somebody on a day, and how many of them could tell.
func (r *run) presence(d int) (share float64, sensors int) {
	r.each(func(_ int, p *site.Point, c *grid.Column) {
		if p.Owner != site.OwnerZone {
			return
		}
		in, seen := 0, 0
		for k := r.days[d].from; k < r.days[d].to; k++ {
			if r.scheduled(p.Index, k) && known(c.Mean[k]) {
				in++
				if c.Mean[k] > 0 {
					seen++
				}
			}
		}
		if in > 0 {
			sensors++
			share = max(share, float64(seen)/float64(in))
		}
	}, site.Presence, site.People)
	return share, sensors
}
