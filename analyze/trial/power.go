package trial

import (
	"math/rand/v2"

	"sashlog/analyze/randomisation"
	"sashlog/configs/schedule"
	"sashlog/configs/site"
)

// logged is one logged day and what the step would gain on it.
type logged struct {
	day  randomisation.Day
	gain float64
}

// season is the logged days that a plan is simulated on.
type season struct {
	days     map[site.Date]logged
	weekdays schedule.Weekdays
	design   schedule.Design
}

// fortnight is the days of two logged weeks, in order, with all that might be
// drawn for them.
type fortnight struct {
	days     []logged
	patterns [][]bool
}

// fortnightAt gathers the scheduled weekdays from a Monday.
func (s *season) fortnightAt(monday site.Date) fortnight {
	var f fortnight
	patterns := s.design.Patterns(s.weekdays)
	f.patterns = make([][]bool, len(patterns))
	for k := range 14 {
		date := schedule.AddDays(monday, k)
		w := schedule.Weekday(date)
		if !s.weekdays.Holds(w) {
			continue
		}
		f.days = append(f.days, s.days[date])
		for p := range patterns {
			f.patterns[p] = append(f.patterns[p], schedule.OnTrial(patterns[p], k/7, w))
		}
	}
	return f
}

// with is the fortnight as a trial would have seen it: so much of each day's
// gain added where it is on trial.
func (f *fortnight) with(drawn int, gain float64) randomisation.Block {
	b := randomisation.Block{Days: make([]randomisation.Day, len(f.days)), Patterns: f.patterns, Drawn: drawn}
	for k, l := range f.days {
		b.Days[k] = l.day
		if f.patterns[drawn][k] {
			b.Days[k].Main.Part = min(l.day.Main.Whole, l.day.Main.Part+gain*l.gain)
		}
	}
	return b
}

// power simulates trials of n fortnights drawn from the season's weeks, which
// begin on a Monday.
func (s *season) power(monday site.Date, weeks, n, simulations int, untouched bool, seed uint64) Power {
	var pool []fortnight
	p := Power{Fortnights: n}
	var gain, whole float64
	for k := 0; k+2 <= weeks; k++ {
		f := s.fortnightAt(schedule.AddDays(monday, 7*k))
		p.Days = n * len(f.days)
		for _, l := range f.days {
			gain += min(l.gain, l.day.Main.Whole-l.day.Main.Part)
			whole += l.day.Main.Whole
		}
		pool = append(pool, f)
	}
	if whole > 0 {
		p.EffectShare = gain / whole
	}
	found := func(scale float64) float64 {
		rng := rand.New(rand.NewPCG(seed, uint64(n)))
		shown := 0
		for range simulations {
			blocks := make([]randomisation.Block, n)
			for b := range blocks {
				f := &pool[rng.IntN(len(pool))]
				blocks[b] = f.with(rng.IntN(len(f.patterns)), scale)
			}
			if randomisation.New(blocks, untouched).PValue(drawings, rng) <= 0.05 {
				shown++
			}
		}
		return float64(shown) / float64(simulations)
	}
	p.Finds, p.Half, p.FalseAlarm = found(1), found(0.5), found(0)
	return p
}
