package guess_test

import (
	"math"
	"math/rand/v2"
	"time"
)

// sim is a small invented building for the generator of exports: plain
// physics, good enough to look like the real thing to a reader of logs.
type sim struct {
	at    []time.Time // quarter-hours, UTC taken as the written clock
	out   map[string][]float64
	zones []map[string][]float64
	unit  map[string][]float64
}

const simDays = 42

// newSim makes six weeks of spring: offices in use from 8 to 17:30 on weekdays.
func newSim(seed uint64, zones int, from time.Time) *sim {
	r := rand.New(rand.NewPCG(seed, 7))
	n := simDays * 96
	s := &sim{out: map[string][]float64{}, unit: map[string][]float64{}}
	put := func(m map[string][]float64, k string, v float64) { m[k] = append(m[k], v) }
	round := func(v float64, d float64) float64 { return math.Round(v/d) * d }
	noise := 0.0
	dir, wind, raining := 220.0, 3.0, 0
	for i := range n {
		t := from.Add(time.Duration(i) * 15 * time.Minute)
		s.at = append(s.at, t)
		h := float64(t.Hour()) + float64(t.Minute())/60
		noise = 0.99*noise + r.NormFloat64()*0.35
		oat := 12 + 5*math.Sin(2*math.Pi*(h-9)/24) + noise + 6*float64(i)/float64(n)
		put(s.out, "oat", round(oat, 0.1))
		put(s.out, "oah", round(math.Min(100, math.Max(25, 70-2*(oat-12)+3*r.NormFloat64())), 1))
		wind = math.Abs(0.95*wind + 0.15 + 0.6*r.NormFloat64())
		put(s.out, "ws", round(wind, 0.1))
		put(s.out, "gust", round(wind*1.5+0.3, 0.1))
		dir = math.Mod(dir+8*r.NormFloat64()+360, 360)
		put(s.out, "wd", round(dir, 1))
		if r.Float64() < 0.01 {
			raining = 4 + r.IntN(12)
		}
		rain := 0.0
		if raining > 0 {
			raining--
			rain = round(0.2+2*r.Float64(), 0.1)
		}
		put(s.out, "rain", rain)
		put(s.out, "sun", math.Max(0, round(700*math.Sin(math.Pi*(h-6)/13)*(0.4+0.6*r.Float64()), 1)))
		put(s.out, "dew", round(oat-5-2*math.Abs(r.NormFloat64()), 0.1))
		put(s.out, "press", round(1008+6*math.Sin(float64(i)/300), 0.1))
	}
	for z := range zones {
		m := map[string][]float64{}
		temp, co2, win, people := 20.5+0.3*float64(z), 430.0, 0.0, 0.0
		for i, t := range s.at {
			work := t.Weekday() != time.Saturday && t.Weekday() != time.Sunday
			h := float64(t.Hour()) + float64(t.Minute())/60
			on := work && h >= 8 && h < 17.5
			switch {
			case !on:
				people = 0
			case i%2 == 0:
				people = math.Max(0, math.Min(float64(3+2*z), people+float64(r.IntN(3)-1)))
				if h < 9 && people == 0 {
					people = 1
				}
			}
			oat := s.out["oat"][i]
			if on && r.Float64() < 0.05 && oat > 13 {
				win = 1
			}
			if !on || r.Float64() < 0.06 {
				win = 0
			}
			plant := 0.0
			if work && h >= 7 && h < 18 {
				plant = 1
			}
			temp += 0.03*(oat-temp)*(0.3+win) + 0.02*people + plant*0.08*(22-temp) + 0.03*r.NormFloat64()
			co2 += 22*people - (co2-420)*(0.04+0.25*win+0.1*plant)
			put(m, "temp", round(temp, 0.1))
			put(m, "rh", round(45-1.5*(temp-21)+2*people+r.NormFloat64(), 1))
			put(m, "co2", round(co2+6*r.NormFloat64(), 1))
			put(m, "win", win)
			put(m, "pos", win*round(30+60*r.Float64(), 5))
			put(m, "occ", math.Min(1, people))
			put(m, "ppl", people)
			put(m, "sph", 18+3*plant)
			put(m, "spc", 28-4*plant)
			put(m, "hv", round(math.Max(0, math.Min(100, 60*(21-temp)))*plant, 1))
			put(m, "cv", round(math.Max(0, math.Min(100, 50*(temp-23.5)))*plant, 1))
			put(m, "dmp", round(plant*(20+4*people), 1))
			put(m, "flow", round(plant*(120+60*people)+2*plant*r.NormFloat64(), 1))
			put(m, "lux", round(math.Max(0, s.out["sun"][i]*0.6+200*float64(int(people)&1)), 1))
			put(m, "door", float64(r.IntN(2)))
		}
		s.zones = append(s.zones, m)
	}
	kwh := 12000.0
	for i, t := range s.at {
		work := t.Weekday() != time.Saturday && t.Weekday() != time.Sunday
		h := float64(t.Hour()) + float64(t.Minute())/60
		run := 0.0
		if work && h >= 7 && h < 18 {
			run = 1
		}
		oat := s.out["oat"][i]
		state := 0.0
		if run == 1 {
			state = 1
			if oat < 11 {
				state = 2
			} else if oat > 18 {
				state = 3
			}
		}
		m := s.unit
		sat := 21.5
		switch state {
		case 2:
			sat = 26
		case 3:
			sat = 14
		case 1:
			sat = 18
		}
		put(m, "state", state)
		put(m, "run", run)
		put(m, "cmd", run)
		put(m, "sat", round(sat+0.3*r.NormFloat64(), 0.1))
		put(m, "rat", round(22+1.2*math.Sin(2*math.Pi*(h-10)/24)+0.1*r.NormFloat64(), 0.1))
		put(m, "mat", round(0.6*22+0.4*oat+0.1*r.NormFloat64(), 0.1))
		put(m, "oad", round(run*(20+60*math.Max(0, math.Sin(float64(i)/90))), 1))
		put(m, "sflow", round(run*(2400+30*r.NormFloat64()), 10))
		put(m, "kw", round(0.05+run*(3.2+0.3*r.NormFloat64()), 0.01))
		kwh += run * 0.8
		put(m, "kwh", round(kwh, 0.1))
		put(m, "hws", round(45+8*math.Sin(float64(i)/50)+r.NormFloat64(), 0.1))
		put(m, "speed", round(run*(55+20*math.Sin(float64(i)/40)), 1))
	}
	return s
}
