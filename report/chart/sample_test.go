package chart

import (
	"math"
	"math/rand/v2"
	"time"
)

// The samples are invented and have the shape of real results: a year of a
// small building, with unknown weeks, long names and names meant to do harm.

func cap1(title string) Caption {
	return Caption{Title: title, Desc: "Invented sample for tests."}
}

func sampleRandom() *rand.Rand { return rand.New(rand.NewPCG(7, 11)) }

var harmfulNames = []string{
	`<script>alert("x")</script>`,
	"two\nlines and\ttabs",
	"\u202Eturned\u202C & \"quoted\"",
	"North-west corner meeting room with the very long name, third floor",
	"L1.02", "l1.02", "Büro Süd 3 – CO₂", "Зал 5",
}

func sampleCarpet(first time.Time, days int) CarpetData {
	r := sampleRandom()
	d := CarpetData{Caption: cap1("Outcome of each hour"), FirstDay: first}
	for i := range days {
		var row [24]Class
		at := first.AddDate(0, 0, i)
		warm := math.Sin(float64(at.YearDay()-100) / 365 * 2 * math.Pi)
		for h := range 24 {
			row[h] = Unoccupied
			if h < 8 || h >= 18 || at.Weekday() == time.Saturday || at.Weekday() == time.Sunday {
				continue
			}
			t := 11 + 9*warm + 5*math.Sin(float64(h-9)/24*2*math.Pi) + 2*r.NormFloat64()
			switch {
			case at.YearDay() > 210 && at.YearDay() < 224:
				row[h] = Unjudged
			case t < 12:
				row[h] = ClosedUnsuited
			case t > 25:
				row[h] = Class(map[bool]int{true: int(IllTimed), false: int(ClosedUnsuited)}[r.Float64() < 0.4])
			default:
				row[h] = []Class{AchievedOK, AchievedOK, AchievedOK, Missed, Missed, AchievedWarm, AchievedCool, AchievedStale, NotNeeded, AchievedUnassessed}[r.IntN(10)]
			}
		}
		d.Days = append(d.Days, row)
	}
	return d
}

func sampleMonths(n int) MonthlyStackData {
	r := sampleRandom()
	d := MonthlyStackData{Caption: cap1("Hours per month"), Classes: Outcomes(), YTitle: "occupied hours of the average occupant (h per month)"}
	for i := range n {
		m := MonthHours{Year: 2025 + (i+2)/12, Month: time.Month((i+2)%12 + 1), Partial: i == 0 && n > 1}
		for range d.Classes {
			m.Hours = append(m.Hours, math.Round(r.Float64()*320)/10)
		}
		d.Months = append(d.Months, m)
	}
	return d
}

func sampleWaterfall() WhereHoursWentData {
	return WhereHoursWentData{Caption: cap1("Where the hours went"), XTitle: "hours per year of the average occupant (h)", Steps: []HoursStep{
		{Label: "occupied", Class: Occupied, Hours: 2210, Total: true},
		{Label: "too cold outdoors", Class: ClosedUnsuited, Hours: 705},
		{Label: "too warm outdoors", Class: ClosedUnsuited, Hours: 171},
		{Label: "too humid, windy or wet outdoors", Class: ClosedUnsuited, Hours: 84.4},
		{Label: "cannot be assessed", Class: Unjudged, Hours: 120},
		{Label: "weather suitable", Class: Suited, Hours: 1129.6, Total: true, Note: "51 % of occupied"},
		{Label: "open mode not needed", Class: NotNeeded, Hours: 210},
		{Label: "could have been open: plant cooled", Class: Missed, Hours: 260},
		{Label: "could have been open: plant ventilated", Class: Missed, Hours: 101},
		{Label: "could have been open: shut while warm or stale", Class: Missed, Hours: 66.2},
		{Label: "ran open", Class: AchievedOK, Hours: 492.4, Total: true, Note: "53 % of those it could"},
		{Label: "too warm", Class: AchievedWarm, Hours: 40},
		{Label: "too cool", Class: AchievedCool, Hours: 3.2},
		{Label: "short of fresh air", Class: AchievedStale, Hours: 31},
		{Label: "not assessed", Class: AchievedUnassessed, Hours: 9},
		{Label: "ran open, comfortable and fresh", Class: AchievedOK, Hours: 409.2, Total: true, Note: "19 % of occupied"},
	}}
}
