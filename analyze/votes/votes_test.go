package votes

import (
	"encoding/csv"
	"math"
	"os"
	"strconv"
	"testing"
	"time"

	"sashlog/analyze/calendar"
	"sashlog/analyze/exceedance"
	"sashlog/analyze/indoor"
	"sashlog/analyze/outdoor"
	"sashlog/analyze/predicted"
	"sashlog/analyze/running"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

func near(t *testing.T, what string, got, want, within float64) {
	t.Helper()
	if !(math.Abs(got-want) <= within) {
		t.Errorf("%s: %.9g, want %.9g", what, got, want)
	}
}

// survey is the operative temperatures and sensations of real spot surveys.
func survey(t *testing.T) (tempC, sensation []float64) {
	t.Helper()
	f, err := os.Open("../../testdata/real/comfort-votes/Study_3_excerpt.csv")
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	at := map[string]int{}
	for i, name := range rows[0] {
		at[name] = i
	}
	for _, r := range rows[1:] {
		x, err1 := strconv.ParseFloat(r[at["Temperature_Operative [C]"]], 64)
		y, err2 := strconv.ParseFloat(r[at["TSV"]], 64)
		if err1 == nil && err2 == nil && x < 100 {
			tempC, sensation = append(tempC, x), append(sensation, y)
		}
	}
	return tempC, sensation
}

// Reference values by R 4.2.2 on the same file: lm, confint, the roots of
// predict(interval = "confidence") (Fieller's interval by its definition) and
// t.test.
func TestRealVotes(t *testing.T) {
	x, y := survey(t)
	if len(x) != 1210 {
		t.Fatalf("%d votes", len(x))
	}
	f := Regress(x, y)
	near(t, "slope", f.SlopePerK, 0.3536930089, 1e-9)
	near(t, "slope from", f.SlopeLow, 0.3181447476, 1e-9)
	near(t, "slope to", f.SlopeHigh, 0.3892412703, 1e-9)
	near(t, "neutral", f.NeutralC, 29.69814225, 1e-7)
	near(t, "neutral from", f.NeutralLowC, 29.49197272, 1e-6)
	near(t, "neutral to", f.NeutralHiC, 29.88867003, 1e-6)
	if f.Refused != "" {
		t.Error(f.Refused)
	}
	g := GriffithsNeutral(x, y)
	near(t, "Griffiths", g.MeanC, 29.92240496, 1e-7)
	near(t, "Griffiths from", g.LowC, 29.79063258, 1e-7)
	near(t, "Griffiths to", g.HighC, 30.05417734, 1e-7)
}

// binom.test and poisson.test of R 4.2.2.
func TestExactIntervals(t *testing.T) {
	s := ShareOf(37, 50)
	near(t, "37 of 50 from", s.Low, 0.59655232, 1e-7)
	near(t, "37 of 50 to", s.High, 0.85369942, 1e-7)
	s = ShareOf(0, 12)
	near(t, "0 of 12 from", s.Low, 0, 0)
	near(t, "0 of 12 to", s.High, 0.26464847, 1e-7)
	if s = ShareOf(12, 12); s.High != 1 || s.Low < 0.7 {
		t.Errorf("12 of 12: %+v", s)
	}
	_, low, high := rate(7, 2500)
	near(t, "7 in 2500 from", low, 1.12574522, 1e-6)
	near(t, "7 in 2500 to", high, 5.76907014, 1e-6)
}

func TestRefusals(t *testing.T) {
	x, y := make([]float64, 40), make([]float64, 40)
	for i := range x {
		x[i], y[i] = 24+float64(i%5), float64((i*7)%3-1)
	}
	if f := Regress(x, y); f.Refused == "" || !math.IsNaN(f.NeutralC) {
		t.Errorf("votes without a slope: %+v", f)
	}
	if f := Regress(x[:29], y[:29]); f.Refused == "" {
		t.Error("29 votes were fitted")
	}
	for i := range x {
		x[i] = 25
	}
	if f := Regress(x, y); f.Refused == "" {
		t.Error("votes at one temperature were fitted")
	}
}

// Votes join their zone's temperature and state of the step; what cannot be
// joined is counted.
func TestCompare(t *testing.T) {
	n := 48
	start := time.Date(2025, 7, 1, 0, 0, 0, 0, time.UTC)
	g := &grid.Grid{StartUTC: start.Unix(), StepS: 3600, N: n, PeriodTo: n, Loc: time.UTC}
	cal := calendar.Of(g)
	in := Input{Grid: g, Criteria: criteria.Settings{MetabolicMet: 1.2, ClothingClo: 0.5, AirSpeedMS: 0.1},
		Site:    &site.Site{Zones: []site.Zone{{ID: "a", People: 10}, {ID: "b", People: 10}}},
		Outdoor: &outdoor.Outdoor{DayOf: cal.DayOf, Days: make([]outdoor.Day, len(cal.Days))}, Running: &running.Result{}, Exceedance: &exceedance.Result{}}
	for z := range 2 {
		room := indoor.Zone{OperativeC: make([]float32, n)}
		run := running.Zone{State: make([]running.State, n), Occupied: make([]running.Occupancy, n)}
		lim := exceedance.Limits{LowC: make([]float32, n), HighC: make([]float32, n)}
		for i := range n {
			room.OperativeC[i], run.Occupied[i], lim.LowC[i], lim.HighC[i] = 26, running.Occupied, 20, 25.5
			run.State[i] = running.Open
			if i >= 24 {
				run.State[i] = running.Mech
			}
		}
		if z == 1 {
			room.OperativeC = nil
		}
		in.Indoor, in.Running.Zones = append(in.Indoor, room), append(in.Running.Zones, run)
		in.Exceedance.Zones = append(in.Exceedance.Zones, exceedance.Zone{Limits: lim})
	}
	add := func(h, zone int, sensation float64, acceptable int8, c site.Complaint) {
		in.Site.Votes = append(in.Site.Votes, site.Vote{UnixS: start.Add(time.Duration(h)*time.Hour + 7*time.Minute).Unix(), Zone: zone,
			Sensation: sensation, Acceptable: acceptable, Preference: site.NotAsked, Complaint: c})
	}
	for h := range 24 {
		add(h, 0, 1, int8(h%2), "")
	}
	for h := 24; h < 30; h++ {
		add(h, 0, 2, 1, "")
	}
	add(3, 1, 0, 1, "")                                            // no temperature
	add(-5, 0, 0, 1, "")                                           // before the period
	add(4, 0, math.NaN(), site.NotAsked, site.TooWarmComplaint)    // explained: 26 is above 25.5
	add(5, 1, math.NaN(), site.NotAsked, site.TooWarmComplaint)    // not known
	add(30, 0, math.NaN(), site.NotAsked, site.TooCoolComplaint)   // not explained
	add(1000, 0, math.NaN(), site.NotAsked, site.TooCoolComplaint) // outside the period
	in.Predicted = predicted.Sense(predicted.Input{Site: in.Site, Criteria: in.Criteria, Grid: in.Grid, Outdoor: in.Outdoor, Indoor: in.Indoor, Running: in.Running})
	r := Compare(in)
	if r.Given != 36 || r.NoTemperature != 1 || r.OutsidePeriod != 2 || r.All.Votes != 30 {
		t.Errorf("%+v", r)
	}
	open, mech := r.States[running.Open], r.States[running.Mech]
	if open.Sensations != 24 || open.MeanVote != 1 || open.Acceptable.Yes != 12 || open.Acceptable.Of != 24 || open.WithinOne.Yes != 24 {
		t.Errorf("open: %+v", open)
	}
	if mech.TooFew == "" || mech.Votes != 6 {
		t.Errorf("mechanical: %+v", mech)
	}
	near(t, "vote above prediction", open.Difference, open.MeanVote-open.MeanPMV, 1e-12)
	if len(r.Complaints) != 2 || r.Complaints[0].Count != 2 || r.Complaints[0].Known != 1 || r.Complaints[0].Explained != 1 ||
		r.Complaints[1].Count != 1 || r.Complaints[1].Explained != 0 || r.Complaints[1].Known != 1 {
		t.Errorf("complaints %+v", r.Complaints)
	}
	near(t, "rate", r.Complaints[0].Per1000PersonH, 1000*2./(2*48*10), 1e-12)
	if Compare(Input{Site: &site.Site{}}) != nil {
		t.Error("a site without votes has a result")
	}
}
