package quality

import (
	"fmt"
	"slices"

	"sashlog/configs/site"
	"sashlog/ingest/grid"
	"sashlog/ingest/reading"
)

// Common practice: cooled supply air leaves at about 12 °C, so below 15 °C in a
// building something cools it. The durations and shares are our assumption.
const (
	cooledC           = 15
	cooledBelowRoomK  = 6
	outdoorAboveK     = 3 // outdoors must be warmer, or a leaking damper explains it
	undrivenK         = 1
	settleS           = hourS
	contraOffHours    = 10
	contraOffShare    = 0.05
	contraRunHours    = 20
	contraRunShare    = 0.25
	contraRunLeastRun = 1800
)

// plantAgainstAir warns where the status of a unit contradicts its supply air.
func plantAgainstAir(r *run) {
	for u := range r.site.Plant {
		var status, supply, back []int
		r.each(func(i int, p *site.Point, _ *grid.Column) {
			if p.Owner != site.OwnerPlant || p.Index != u {
				return
			}
			switch p.Quantity {
			case site.PlantStatus:
				status = append(status, i)
			case site.SupplyAirTemp:
				supply = append(supply, i)
			default:
				back = append(back, i)
			}
		}, site.PlantStatus, site.SupplyAirTemp, site.ReturnAirTemp)
		if len(status) == 0 || len(supply) == 0 {
			continue
		}
		st, sup := &r.grid.Columns[status[0]], &r.grid.Columns[supply[0]]
		room := r.grid.Average(back, 0.5)
		if room == nil {
			room = r.roomOf(&r.site.Plant[u])
		}
		offSince, runSince := int64(0), int64(0)
		off, offCold, run, runIdle := 0, 0, 0, 0
		for k := 0; k < r.grid.N; k++ {
			if !known(st.Mean[k]) || !known(sup.Mean[k]) {
				offSince, runSince = 0, 0
				continue
			}
			switch code := site.PlantState(st.Mean[k]); code {
			case site.PlantOff:
				offSince, runSince = offSince+r.grid.StepS, 0
				if offSince <= settleS {
					break
				}
				off++
				warmOut := r.outdoor == nil || !known(r.outdoor[k]) || r.outdoor[k] > sup.Mean[k]+outdoorAboveK
				coldRoom := room != nil && known(room[k]) && room[k] < sup.Mean[k]+cooledBelowRoomK
				if sup.Mean[k] < cooledC && warmOut && !coldRoom {
					offCold++
				}
			case site.PlantHeat, site.PlantCool:
				offSince, runSince = 0, runSince+r.grid.StepS
				if runSince <= contraRunLeastRun || room == nil || !known(room[k]) {
					break
				}
				run++
				if d := sup.Mean[k] - room[k]; d < undrivenK && d > -undrivenK {
					runIdle++
				}
			default:
				offSince, runSince = 0, 0
			}
		}
		ps := []int{status[0], supply[0]}
		if r.hours(offCold) >= contraOffHours && float64(offCold) >= contraOffShare*float64(off) {
			r.add(warn(reading.CheckPlantContra, -1, ps,
				fmt.Sprintf("%s: the status is off and has been for an hour, yet supply air is below %d °C while outdoors and rooms are warmer, for %.0f of %.0f h", r.site.Plant[u].ID, cooledC, r.hours(offCold), r.hours(off)),
				"look which signal the status really is (command, release or fan); hours counted as open or shut may have been mechanical"))
		}
		if r.hours(runIdle) >= contraRunHours && float64(runIdle) >= contraRunShare*float64(run) {
			r.add(warn(reading.CheckPlantContra, -1, ps,
				fmt.Sprintf("%s: the status is heating or cooling, yet supply air is within %d K of the rooms for %.0f of %.0f h", r.site.Plant[u].ID, undrivenK, r.hours(runIdle), r.hours(run)),
				"look whether valve, compressor or fan follow the status, and where the supply sensor hangs"))
		}
	}
}

// roomOf is the mean air temperature of the zones a unit serves.
func (r *run) roomOf(pl *site.Plant) []float32 {
	var ps []int
	for i := range r.site.Points {
		p := &r.site.Points[i]
		if p.Owner == site.OwnerZone && p.Quantity == site.AirTemp && slices.Contains(pl.Serves, r.site.Zones[p.Index].ID) {
			ps = append(ps, i)
		}
	}
	return r.grid.Average(ps, 0.5)
}
