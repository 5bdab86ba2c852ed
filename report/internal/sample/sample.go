// Package sample makes invented results for the tests of the report: the
// right shapes, sums that hold the identities, and nothing of a real building.
// The numbers come from plain formulas, not from the analyses.
package sample

import (
	"fmt"
	"math"
	"time"

	"sashlog/analyze"
	"sashlog/analyze/running"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
	"sashlog/ingest/reading"
)

// Options choose a sample.
type Options struct {
	Days, Zones int
	StepS       int64
	// NoContacts, NoCO2, NoPeople, NoWeather leave evidence out; NeverSuited
	// makes it too cold throughout.
	NoContacts, NoCO2, NoPeople, NoWeather, NeverSuited bool
	// Names replaces the zones' names; People the usual numbers.
	Names  []string
	People []float64
}

// Sample is everything an audit hands to the report.
type Sample struct {
	Site     *site.Site
	Criteria criteria.Settings
	Grid     *grid.Grid
	Ledger   *reading.Ledger
	Results  *analyze.Results
}

// maker holds what the parts of a sample share while it is made.
type maker struct {
	o Options
	Sample
	outC, outRH, dew []float32
	co2              [][]float32
	indoor           [][]float32
}

// Make returns the sample; the same options give the same sample.
func Make(o Options) Sample {
	if o.StepS == 0 {
		o.StepS = 1800
	}
	m := &maker{o: o}
	m.makeSite()
	m.makeGrid()
	m.Criteria = settings()
	m.makeConditions()
	m.makeRecord()
	m.makeAnswers()
	m.makeClimate()
	m.makeLedger()
	return m.Sample
}

func (m *maker) makeSite() {
	loc := time.FixedZone("UTC+1", 3600)
	s := &site.Site{Name: "Harbour Sheds", Invented: true, TimeZone: "Etc/GMT-1", Location: loc,
		LatitudeDeg: 47, LongitudeDeg: 8, ElevationM: 410, StepS: int(m.o.StepS), OutdoorCO2PPM: math.NaN(),
		File: "site.yaml", Dir: "."}
	// A full year begins in January; shorter samples in May, when it is mild.
	first := site.Date{Year: 2031, Month: time.January, Day: 1}
	if m.o.Days < 300 {
		first.Month = time.May
	}
	last := site.DateOf(time.Date(2031, first.Month, m.o.Days, 12, 0, 0, 0, time.UTC))
	s.Period = site.Period{From: first, To: last}
	for z := range m.o.Zones {
		zone := site.Zone{ID: fmt.Sprintf("L%d.%02d", 1+z/4, 1+z%4), Name: fmt.Sprintf("Studio %d", z+1),
			AreaM2: 60, HeightM: 3, People: float64(2 + (z*5+6)%13), Openings: site.Openings{Outdoors: true},
			Scheme: site.Changeover, FanSpeedMS: math.NaN(), Place: site.Perimeter}
		if m.o.NoPeople {
			zone.People = math.NaN()
		}
		if z < len(m.o.People) {
			zone.People = m.o.People[z]
		}
		if z < len(m.o.Names) {
			zone.Name = m.o.Names[z]
			zone.ID = m.o.Names[z]
		}
		s.Zones = append(s.Zones, zone)
		for _, q := range []site.Quantity{site.AirTemp, site.CO2, site.Window} {
			s.Points = append(s.Points, site.Point{Source: "trends.csv", Column: fmt.Sprintf("%s %s", zone.ID, q),
				BelongsTo: zone.ID, Owner: site.OwnerZone, Index: z, Quantity: q})
		}
	}
	s.Points = append(s.Points, site.Point{Source: "weather.csv", Column: "T_out", BelongsTo: "site", Quantity: site.OutdoorTemp})
	m.Site = s
}

func (m *maker) makeGrid() {
	perDay := int(86400 / m.o.StepS)
	g := &grid.Grid{StartUTC: m.Site.Period.From.Start(m.Site.Location).Unix(), StepS: m.o.StepS,
		N: perDay * m.o.Days, Loc: m.Site.Location}
	g.PeriodTo = g.N
	g.Columns = make([]grid.Column, len(m.Site.Points))
	m.Grid = g
}

// wobble is a repeatable number between -1 and 1.
func wobble(a, b int) float64 {
	x := math.Sin(float64(a)*12.9898+float64(b)*78.233) * 43758.5453
	return 2*(x-math.Floor(x)) - 1
}

func (m *maker) makeConditions() {
	n := m.Grid.N
	m.outC, m.outRH, m.dew = make([]float32, n), make([]float32, n), make([]float32, n)
	for i := range n {
		t := m.Grid.Time(i)
		year := 2 * math.Pi * (float64(t.YearDay()) - 110) / 365
		day := 2 * math.Pi * (float64(t.Hour()) - 9) / 24
		c := 13 + 9*math.Sin(year) + 4.5*math.Sin(day) + 4*wobble(t.YearDay(), 1)
		rh := math.Min(98, 68-2.2*4.5*math.Sin(day)+14*wobble(t.YearDay(), 2))
		if m.o.NeverSuited {
			c = 2 + wobble(i, 3)
		}
		m.outC[i], m.outRH[i] = float32(c), float32(rh)
		m.dew[i] = float32(c - (100-rh)/5)
	}
	m.co2, m.indoor = make([][]float32, m.o.Zones), make([][]float32, m.o.Zones)
	for z := range m.o.Zones {
		m.co2[z], m.indoor[z] = make([]float32, n), make([]float32, n)
		for i := range n {
			m.co2[z][i] = float32(620 + 60*float64(z%7) + 260*wobble(i/2, z))
			m.indoor[z][i] = float32(22.5 + 0.16*math.Max(0, float64(m.outC[i])-12) + 1.6*wobble(i/4, z+9))
			if m.o.NoCO2 {
				m.co2[z][i] = float32(math.NaN())
			}
		}
	}
}

func occupied(t time.Time) bool {
	return t.Weekday() != time.Saturday && t.Weekday() != time.Sunday && t.Hour() >= 8 && t.Hour() < 18
}

// state is an invented habit: the later the zone, the more it stays shut.
func (m *maker) state(z, i int) running.State {
	if m.o.NoContacts || wobble(i/9, z+50) > 0.9 {
		return running.Unknown
	}
	out := float64(m.outC[i])
	w := wobble(i/3, z+100) + 0.12*float64(z%9)
	switch {
	case out > 13 && out < 24 && w < 0.15:
		return running.Open
	case out > 13 && w < 0.25:
		return running.Both
	case out > 18 || out < 9 || w > 0.9:
		return running.Mech
	}
	return running.Shut
}
