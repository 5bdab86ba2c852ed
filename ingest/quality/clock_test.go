package quality

import (
	"strings"
	"testing"

	"sashlog/configs/site"
	"sashlog/ingest/reading"
)

// clockBench has three sound logs with two rooms each and one under test.
func clockBench(t *testing.T, days int) *bench {
	b := newBench(t, days)
	for z := range 4 {
		for _, q := range []site.Quantity{site.AirTemp, site.CO2} {
			p := zone(z, q)
			p.Source = []string{"one", "two", "two", "three"}[z]
			if q == site.CO2 {
				b.point(p, co2(uint64(z), 430, 0))
			} else {
				b.point(p, room(uint64(z)))
			}
		}
	}
	return b
}

// late shifts what f says by so many steps between two days.
func late(f func(int, float64, bool) float64, steps, fromDay, toDay int) func(int, float64, bool) float64 {
	var past []float64
	return func(i int, h float64, u bool) float64 {
		past = append(past, f(i, h, u))
		if i >= fromDay*288 && i < toDay*288 && i >= steps {
			return past[i-steps]
		}
		return past[i]
	}
}

func own(q site.Quantity) site.Point {
	p := zone(4, q)
	p.Source = "own"
	return p
}

func TestClockAnHourAhead(t *testing.T) {
	b := clockBench(t, 84)
	temp := b.point(own(site.AirTemp), late(room(7), 12, 28, 56))
	gas := b.point(own(site.CO2), late(co2(7, 430, 0), 12, 28, 56))
	got := b.run()
	cs := find(got, reading.CheckClock)
	if len(cs) != 1 || cs[0].Effect != reading.EffectRemoved || len(cs[0].Points) != 2 || !strings.Contains(cs[0].Evidence, "1.0 h ahead") || !strings.Contains(cs[0].DoNext, "shift_min: -60") {
		t.Fatalf("%+v", cs)
	}
	from, to := (cs[0].FromUTC-b.from.Unix())/86400, (cs[0].ToUTC-b.from.Unix())/86400
	if from < 24 || from > 28 || to < 56 || to > 60 {
		t.Errorf("days %d to %d, want all of 28 to 56 and a weekend around at most", from, to)
	}
	for _, p := range []int{temp, gas} {
		if got.Ledger.Points[p].Counts[reading.ClockDoubt] == 0 {
			t.Error("no reading is doubted")
		}
	}
}

// What must not be taken for a wrong clock: sound logs, other working hours
// for a month, other working hours all year, a slow room.
func TestClockFalseAlarms(t *testing.T) {
	for seed := range uint64(8) {
		for name, add := range map[string]func(*bench){
			"sound": func(b *bench) {
				b.point(own(site.AirTemp), room(70+seed))
				b.point(own(site.CO2), co2(70+seed, 430, 0))
			},
			"summer hours": func(b *bench) {
				b.point(own(site.AirTemp), room(70+seed))
				b.point(own(site.CO2), late(co2(70+seed, 430, 0), 12, 28, 56))
			},
			"all year": func(b *bench) {
				b.point(own(site.AirTemp), late(room(70+seed), 12, 0, 84))
				b.point(own(site.CO2), late(co2(70+seed, 430, 0), 12, 0, 84))
			},
			"slow room": func(b *bench) { b.point(own(site.AirTemp), late(room(70+seed), 36, 20, 84)) },
			"empty room": func(b *bench) {
				b.point(own(site.AirTemp), func(i int, _ float64, _ bool) float64 { return 20 + float64((i*7919)%13)/10 })
			},
		} {
			b := clockBench(t, 84)
			add(b)
			for _, c := range find(b.run(), reading.CheckClock) {
				if c.Effect == reading.EffectRemoved || name == "sound" || name == "empty room" {
					t.Errorf("%s, seed %d: %+v", name, seed, c)
				}
			}
		}
	}
}
