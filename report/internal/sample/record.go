package sample

import (
	"math"

	"sashlog/analyze/hours"
	"sashlog/analyze/indoor"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/potential"
	"sashlog/analyze/running"
	"sashlog/configs/site"
)

func (m *maker) suit(i int) potential.Suit {
	switch {
	case m.o.NoWeather:
		return potential.SuitUnknown
	case m.outC[i] < 12.8:
		return potential.TooCold
	case m.outC[i] > 26:
		return potential.TooWarm
	case m.dew[i] > 17:
		return potential.TooHumid
	}
	return potential.Suited
}

func (m *maker) class(z, i int, st running.State, s potential.Suit) hours.Class {
	warm := m.indoor[z][i] > 25.2
	stale := m.co2[z][i] > 1000
	switch {
	case s == potential.SuitUnknown:
		return hours.Unjudged
	case s == potential.Suited && st == running.Unknown:
		return hours.UnjudgedSuited
	case st == running.Unknown:
		return hours.Unjudged
	case s == potential.Suited && st == running.Open && warm:
		return hours.AchievedWarm
	case s == potential.Suited && st == running.Open && stale:
		return hours.AchievedStale
	case s == potential.Suited && st == running.Open && m.o.NoCO2:
		return hours.AchievedUnassessed
	case s == potential.Suited && st == running.Open:
		return hours.AchievedOK
	case s == potential.Suited && st == running.Mech && m.outC[i] > 16:
		return hours.MissedCool
	case s == potential.Suited && st == running.Mech:
		return hours.MissedVent
	case s == potential.Suited && st == running.Both:
		return hours.MissedBoth
	case s == potential.Suited && (warm || stale):
		return hours.MissedShut
	case s == potential.Suited:
		return hours.NotNeeded
	case st == running.Open || st == running.Both:
		return hours.IllTimed
	case stale:
		return hours.ClosedUnsuitedStale
	}
	return hours.ClosedUnsuitedFresh
}

// columnsOf lists the counted columns a step of the class adds to.
func columnsOf(c hours.Class) []hours.Col {
	switch c {
	case hours.AchievedOK:
		return []hours.Col{hours.CAchieved, hours.CAchievedOK}
	case hours.AchievedWarm:
		return []hours.Col{hours.CAchieved, hours.CAchievedWarm}
	case hours.AchievedStale:
		return []hours.Col{hours.CAchieved, hours.CAchievedStale}
	case hours.AchievedUnassessed:
		return []hours.Col{hours.CAchieved, hours.CAchievedUnassessed}
	case hours.MissedCool:
		return []hours.Col{hours.CMissed, hours.CMissedCool}
	case hours.MissedVent:
		return []hours.Col{hours.CMissed, hours.CMissedVent}
	case hours.MissedBoth:
		return []hours.Col{hours.CMissed, hours.CMissedBoth}
	case hours.MissedShut:
		return []hours.Col{hours.CMissed, hours.CMissedShut}
	case hours.NotNeeded:
		return []hours.Col{hours.CNotNeeded}
	case hours.IllTimed:
		return []hours.Col{hours.CIllTimed}
	case hours.ClosedUnsuitedFresh:
		return []hours.Col{hours.CClosedUnsuited}
	case hours.ClosedUnsuitedStale:
		return []hours.Col{hours.CClosedUnsuited, hours.CClosedUnsuitedStale}
	case hours.UnjudgedSuited:
		return []hours.Col{hours.CUnjudged, hours.CUnjudgedSuited}
	case hours.Unjudged:
		return []hours.Col{hours.CUnjudged}
	}
	return nil
}

var stateCols = [running.NumStates]hours.Col{hours.CUnknown, hours.COpen, hours.CMech, hours.CBoth, hours.CShut}
var allCols = [running.NumStates]hours.Col{hours.CAllUnknown, hours.CAllOpen, hours.CAllMech, hours.CAllBoth, hours.CAllShut}
var suitCols = [potential.NumSuits]hours.Col{potential.Suited: hours.CSuited, potential.TooCold: hours.CTooCold, potential.TooWarm: hours.CTooWarm,
	potential.TooWarmAndMore: hours.CTooWarm, potential.TooHumid: hours.CTooHumid, potential.TooWindy: hours.CTooWindy, potential.Rain: hours.CRain,
	potential.Polluted: hours.CPolluted, potential.TooBrief: hours.CTooBrief, potential.SuitUnknown: hours.CSuitedUnknown}

func (m *maker) makeRecord() {
	g := m.Grid
	perHour := int(3600 / g.StepS)
	rec := &hours.Record{}
	for i := 0; i < g.N; i += perHour {
		t := g.Time(i)
		rec.Hours = append(rec.Hours, hours.Hour{StartUTC: t.Unix(), OffsetS: 3600, Date: site.DateOf(t), HourOfDay: t.Hour(), FromStep: i, ToStep: i + perHour})
	}
	rows := m.o.Zones * len(rec.Hours)
	for c := range rec.Seconds {
		rec.Seconds[c] = make([]uint16, rows)
	}
	for v := range rec.Values {
		rec.Values[v] = make([]float32, rows)
		for i := range rec.Values[v] {
			rec.Values[v][i] = float32(math.NaN())
		}
	}
	rec.ComfortModel = make([]uint8, rows)
	m.Results = newResults()
	run := m.Results.Running
	run.Schedule = "Monday to Friday, 08:00 to 18:00"
	for z := range m.o.Zones {
		zone := m.Site.Zones[z]
		rec.ZoneIDs = append(rec.ZoneIDs, zone.ID)
		rec.People = append(rec.People, zone.People)
		class := make([]hours.Class, g.N)
		rz := running.Zone{State: make([]running.State, g.N), Occupied: make([]running.Occupancy, g.N), Plant: make([]uint8, g.N),
			OpenShare: make([]float32, g.N), HasContacts: !m.o.NoContacts, ServedByPlant: true, HasPlantEvidence: true, PeopleCanOpen: true}
		pz := potential.Zone{Suit: make([]potential.Suit, g.N)}
		for i := range g.N {
			st, suit := m.state(z, i), m.suit(i)
			rz.State[i], pz.Suit[i] = st, suit
			rz.Plant[i] = map[running.State]uint8{running.Mech: 4, running.Both: 4, running.Unknown: running.PlantUnknown}[st]
			if st == running.Open || st == running.Both {
				rz.OpenShare[i] = 1
			}
			row := rec.Row(z, i/perHour)
			s := uint16(g.StepS)
			rec.Seconds[allCols[st]][row] += s
			rec.Values[hours.VOutdoorTempC][row] = m.outC[i]
			rec.Values[hours.VOutdoorRHPct][row] = m.outRH[i]
			if !occupied(g.Time(i)) {
				continue
			}
			rz.Occupied[i] = running.Occupied
			class[i] = m.class(z, i, st, suit)
			cols := append(columnsOf(class[i]), hours.COccupied, stateCols[st], suitCols[suit])
			for _, c := range cols {
				rec.Seconds[c][row] += s
			}
		}
		rec.Class = append(rec.Class, class)
		run.Zones = append(run.Zones, rz)
		m.Results.Potential.Zones = append(m.Results.Potential.Zones, pz)
		m.Results.Indoor = append(m.Results.Indoor, indoor.Zone{AirTempC: m.indoor[z], OperativeC: m.indoor[z], CO2PPM: m.co2[z], TempNote: "air temperature stands for operative"})
	}
	m.Results.Hours = rec
	m.Results.Outdoor = &outdoor.Outdoor{TempC: m.outC, RHPct: m.outRH, DewPointC: m.dew, Measured: !m.o.NoWeather, HumidityLogged: true, CO2Source: "the preset's default", CO2DefaultPPM: 420}
	m.makeSummary()
}
