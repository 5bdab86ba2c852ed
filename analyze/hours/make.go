package hours

import (
	"math"

	"sashlog/analyze/cores"
	"sashlog/analyze/exceedance"
	"sashlog/analyze/potential"
	"sashlog/analyze/running"
	"sashlog/configs/site"
)

// Make builds the hourly record.
func Make(in Input) *Record {
	zones := len(in.Site.Zones)
	r := &Record{Hours: in.Hours, ComfortModel: make([]uint8, zones*len(in.Hours)), Class: make([][]Class, zones)}
	for c := range r.Seconds {
		r.Seconds[c] = make([]uint16, zones*len(in.Hours))
	}
	for v := range r.Values {
		r.Values[v] = make([]float32, zones*len(in.Hours))
	}
	for z := range in.Site.Zones {
		r.ZoneIDs = append(r.ZoneIDs, in.Site.Zones[z].ID)
		r.People = append(r.People, in.Site.Zones[z].People)
	}
	cores.Each(zones, func(z int) {
		j := newJudge(&in, z)
		class := make([]Class, in.Grid.N)
		for i := in.Grid.PeriodFrom; i < in.Grid.PeriodTo; i++ {
			class[i] = j.class(i)
		}
		r.Class[z] = class
		purge := newPurge(&in, z)
		points := pointsOf(in.Site, z)
		for h := range in.Hours {
			r.count(&in, j, purge, h)
			r.average(&in, j, points, h)
		}
	})
	return r
}

// classCols are the columns each class counts in.
var classCols = [NumClasses][]Col{
	AchievedOK:          {CAchieved, CAchievedOK},
	AchievedWarm:        {CAchieved, CAchievedWarm},
	AchievedCool:        {CAchieved, CAchievedCool},
	AchievedStale:       {CAchieved, CAchievedStale},
	AchievedUnassessed:  {CAchieved, CAchievedUnassessed},
	MissedCool:          {CMissed, CMissedCool},
	MissedVent:          {CMissed, CMissedVent},
	MissedBoth:          {CMissed, CMissedBoth},
	MissedShut:          {CMissed, CMissedShut},
	MissedUntyped:       {CMissed, CMissedUntyped},
	NotNeeded:           {CNotNeeded},
	IllTimed:            {CIllTimed},
	ClosedUnsuitedFresh: {CClosedUnsuited},
	ClosedUnsuitedStale: {CClosedUnsuited, CClosedUnsuitedStale},
	NoOpening:           {CNoOpening},
	UnjudgedSuited:      {CUnjudged, CUnjudgedSuited},
	Unjudged:            {CUnjudged},
}

var (
	stateCols    = [running.NumStates]Col{running.Unknown: CUnknown, running.Open: COpen, running.Mech: CMech, running.Both: CBoth, running.Shut: CShut}
	allStateCols = [running.NumStates]Col{running.Unknown: CAllUnknown, running.Open: CAllOpen, running.Mech: CAllMech, running.Both: CAllBoth, running.Shut: CAllShut}
	suitCols     = [potential.NumSuits]Col{potential.Suited: CSuited, potential.TooCold: CTooCold, potential.TooWarm: CTooWarm, potential.TooWarmAndMore: CTooWarm, potential.TooHumid: CTooHumid, potential.TooWindy: CTooWindy, potential.Rain: CRain, potential.Polluted: CPolluted, potential.TooBrief: CTooBrief, potential.SuitUnknown: CSuitedUnknown}
	bothCols     = map[uint8]Col{uint8(site.PlantCool): CBothCool, uint8(site.PlantHeat): CBothHeat, uint8(site.PlantVent): CBothVent, uint8(site.PlantOn): CBothUntyped}
)

// count fills the counted columns of one row.
func (r *Record) count(in *Input, j *judge, purge *purge, h int) {
	row := r.Row(j.z, h)
	step := uint16(in.Grid.StepS)
	add := func(c Col) { r.Seconds[c][row] += step }
	class := r.Class[j.z]
	for i := in.Hours[h].FromStep; i < in.Hours[h].ToStep; i++ {
		state := j.run.State[i]
		add(allStateCols[state])
		switch purge.at(i) {
		case purgeUsed:
			add(CPurgeAvailable)
			add(CPurge)
		case purgeOffered:
			add(CPurgeAvailable)
		case purgeUnknown:
			add(CPurgeUnknown)
		}
		if j.run.Occupied[i] == running.OccupancyUnknown {
			add(COccupiedUnknown)
		}
		if j.run.Occupied[i] != running.Occupied {
			continue
		}
		add(COccupied)
		add(stateCols[state])
		if state == running.Both {
			add(bothCols[j.run.Plant[i]])
		}
		for _, c := range classCols[class[i]] {
			add(c)
		}
		f := j.feel(i)
		if f.warm {
			add(COver)
		}
		if f.cool {
			add(CUnder)
		}
		if f.stale {
			add(CCO2Over)
		}
		if j.run.NoOpening {
			continue
		}
		zone := &in.Potential.Zones[j.z]
		add(suitCols[zone.Suit[i]])
		switch zone.Fan[i] {
		case potential.Suited:
			add(CSuitedFan)
		case potential.SuitUnknown:
			add(CSuitedFanUnknown)
		}
		if zone.Raw[i] == potential.Suited {
			add(CSuitedRaw)
		}
		if zone.Suit[i] == potential.Suited {
			switch j.run.Plant[i] {
			case uint8(site.PlantOff):
				add(CSuitedPlantOff)
			case running.PlantUnknown:
				add(CSuitedPlantUnknown)
			}
		}
	}
}

// meanOf averages a series over an hour's known steps.
type meanOf struct{ sum, n float64 }

func (m *meanOf) add(series []float32, i int) {
	if series == nil {
		return
	}
	if v := float64(series[i]); !math.IsNaN(v) {
		m.sum += v
		m.n++
	}
}

func (m *meanOf) value() float32 { return float32(m.sum / m.n) }

// average fills the value columns of one row.
func (r *Record) average(in *Input, j *judge, points []int, h int) {
	row := r.Row(j.z, h)
	g := in.Grid
	hour := in.Hours[h]
	var open, temp, rh, co2, outT, outRH, low, high, limit, people meanOf
	var overKh, underKh float64
	for i := hour.FromStep; i < hour.ToStep; i++ {
		open.add(j.run.OpenShare, i)
		temp.add(j.room.OperativeC, i)
		rh.add(j.room.RHPct, i)
		co2.add(j.room.CO2PPM, i)
		people.add(j.room.People, i)
		outT.add(in.Outdoor.TempC, i)
		outRH.add(in.Outdoor.RHPct, i)
		low.add(j.limits.LowC, i)
		high.add(j.limits.HighC, i)
		limit.sum += j.co2LimitPPM(i)
		limit.n++
		if m := j.limits.Model[i]; m != exceedance.NoModel {
			r.ComfortModel[row] = uint8(m)
		}
		if j.run.Occupied[i] != running.Occupied || j.room.OperativeC == nil {
			continue
		}
		t := round3(float64(j.room.OperativeC[i]))
		if d := t - round3(float64(j.limits.HighC[i])); d > 0 {
			overKh += d * g.StepH()
		}
		if d := round3(float64(j.limits.LowC[i])) - t; d > 0 {
			underKh += d * g.StepH()
		}
	}
	day := &in.Outdoor.Days[in.Outdoor.DayOf[hour.FromStep]]
	hoursOf := func(c Col) float64 { return float64(r.Seconds[c][row]) / 3600 }
	usual := in.Site.Zones[j.z].People
	set := func(v Val, x float64) { r.Values[v][row] = float32(x) }
	r.Values[VOpenShare][row], r.Values[VTempC][row], r.Values[VRHPct][row] = open.value(), temp.value(), rh.value()
	r.Values[VCO2PPM][row], r.Values[VOutdoorTempC][row], r.Values[VOutdoorRHPct][row] = co2.value(), outT.value(), outRH.value()
	r.Values[VComfortLowC][row], r.Values[VComfortHighC][row], r.Values[VCO2LimitPPM][row] = low.value(), high.value(), limit.value()
	set(VRunningMeanENC, day.RunningMeanENC)
	set(VRunningMeanASHRAEC, day.RunningMeanASHRAEC)
	set(VOverKh, overKh)
	set(VUnderKh, underKh)
	set(VPersonH, hoursOf(COccupied)*usual)
	set(VPersonOverH, hoursOf(COver)*usual)
	set(VPersonUnderH, hoursOf(CUnder)*usual)
	set(VPeopleH, math.NaN())
	if people.n > 0 {
		set(VPeopleH, people.sum*g.StepH())
	}
	set(VCoverage, coverage(in, points, hour))
}

// coverage is the covered share of an hour over the zone's points, NaN for a
// zone without any.
func coverage(in *Input, points []int, h Hour) float64 {
	var covered, all int64
	for _, p := range points {
		col := &in.Grid.Columns[p]
		all += int64(h.ToStep-h.FromStep) * in.Grid.StepS
		if col.CoveredS == nil {
			continue
		}
		for i := h.FromStep; i < h.ToStep; i++ {
			covered += int64(col.CoveredS[i])
		}
	}
	if all == 0 {
		return math.NaN()
	}
	return float64(covered) / float64(all)
}

// pointsOf lists a zone's own points.
func pointsOf(s *site.Site, z int) []int {
	var out []int
	for i := range s.Points {
		if s.Points[i].Owner == site.OwnerZone && s.Points[i].Index == z {
			out = append(out, i)
		}
	}
	return out
}
