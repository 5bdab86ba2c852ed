package climate

import "math"

// The night of the climatic cooling potential, local clock hours.
const (
	nightFromH = 19
	nightHours = 12
)

// NightBuildingC is the building temperature of Artmann, Manz & Heiselberg
// 2007 (from memory) at a clock hour h counted from 0 to 24, or on past
// midnight: 24.5 + 2.5 cos(2π (h - 19)/24) °C.
func NightBuildingC(h float64) float64 {
	return 24.5 + 2.5*math.Cos(2*math.Pi*(h-nightFromH)/24)
}

// ClimaticCoolingPotentialKh sums one night: outdoorC are the temperatures at
// 19:00, 20:00 and so on, 12 of them, or 13 with 07:00; hours count where
// outdoors is cooler than the building by at least criticalK. NaN when a
// temperature is unknown.
func ClimaticCoolingPotentialKh(outdoorC []float64, criticalK float64) float64 {
	sum := 0.0
	for i, t := range outdoorC {
		if math.IsNaN(t) {
			return math.NaN()
		}
		if d := NightBuildingC(float64(nightFromH + i)); d-t >= criticalK {
			sum += d - t
		}
	}
	return sum
}

// Night is what the nights offered. Days are those with occupied time.
type Night struct {
	Nights, UnknownNights int
	// CoolingPotentialKh is the mean per known night, K·h; ByMonthKh by calendar
	// month, NaN without a known night.
	CoolingPotentialKh float64
	ByMonthKh          [12]float64
	CriticalK          float64
	// Storage is the mean over known nights that have a used day after them,
	// W/m² over that day's occupied hours per unit of air change at night.
	StorageWm2PerAirChange float64
	// Days on which outdoor air alone could not carry off the heat, those that a
	// night within the reach of the openings would have carried through, and
	// those whose night is unknown.
	ShortDays, CoveredDays, UnknownDays int
	// ShortH are the occupied hours in question, CreditedH those of covered days.
	ShortH, CreditedH, UnknownH float64
}

// nights sums the nights of a record and credits what they store to the days
// after them. It marks the credited steps in credited.
func nights(r *record, b HeatBalance, storeC, criticalK float64, needs []Need, credited []bool) Night {
	n := Night{CriticalK: criticalK, CoolingPotentialKh: math.NaN(), StorageWm2PerAirChange: math.NaN()}
	var sum, storage float64
	var byMonth [12]float64
	var inMonth [12]int
	storages := 0
	for d := range r.out.Days {
		night, ok := r.nightBefore(d)
		stored := math.NaN()
		if ok {
			if kh := ClimaticCoolingPotentialKh(night, criticalK); math.IsNaN(kh) {
				n.UnknownNights++
			} else {
				n.Nights++
				sum += kh
				m := r.out.Days[d].Date.Month - 1
				byMonth[m] += kh
				inMonth[m]++
				stored = 0
				for _, t := range night {
					stored += b.PerAirChangeWm2K() * math.Max(0, storeC-t)
				}
			}
		}
		day := r.shortfall(d, b, needs)
		if day.usedH > 0 && !math.IsNaN(stored) {
			storage += stored / day.usedH
			storages++
		}
		if day.shortH == 0 {
			continue
		}
		n.ShortDays++
		n.ShortH += day.shortH
		switch {
		case math.IsNaN(stored):
			n.UnknownDays++
			n.UnknownH += day.shortH
		case day.leftoverWhm2 <= stored*b.MaxAirChangePerH:
			n.CoveredDays++
			n.CreditedH += day.shortH
			for i := day.from; i < day.to; i++ {
				credited[i] = short(needs[i])
			}
		}
	}
	if n.Nights > 0 {
		n.CoolingPotentialKh = sum / float64(n.Nights)
	}
	if storages > 0 {
		n.StorageWm2PerAirChange = storage / float64(storages)
	}
	for m := range byMonth {
		n.ByMonthKh[m] = byMonth[m] / float64(inMonth[m]) // NaN without nights
	}
	return n
}

func short(n Need) bool { return n == NeedBeyond || n == NeedTooWarm || n == NeedTooHumid }

// dayShort is what outdoor air could not do on one day, weighted by the
// average occupant's time.
type dayShort struct {
	from, to      int
	usedH, shortH float64
	leftoverWhm2  float64
}

func (r *record) shortfall(d int, b HeatBalance, needs []Need) dayShort {
	day := r.out.Days[d]
	s := dayShort{from: max(day.FromStep, r.g.PeriodFrom), to: min(day.ToStep, r.g.PeriodTo)}
	for i := s.from; i < s.to; i++ {
		h := float64(r.occ[i]) * r.g.StepH()
		if h == 0 {
			continue
		}
		s.usedH += h
		if short(needs[i]) {
			s.shortH += h
			s.leftoverWhm2 += b.LeftoverWm2(float64(r.out.TempC[i]), needs[i]) * h
		}
	}
	return s
}

// nightBefore gives the mean outdoor temperatures of the 12 hours from 19:00 on
// the evening before day d; false when they begin before the record or the day
// lies outside the period. Hours less than half covered are NaN.
func (r *record) nightBefore(d int) ([]float64, bool) {
	day := r.out.Days[d]
	if day.FromStep < r.g.PeriodFrom || day.FromStep >= r.g.PeriodTo {
		return nil, false
	}
	perH := int(3600 / r.g.StepS)
	before := int(24-nightFromH) * perH
	from := day.FromStep - before
	night := make([]float64, nightHours)
	for k := range night {
		sum, n := 0.0, 0
		for j := range perH {
			i := from + k*perH + j
			if r.wrap {
				i = ((i % r.g.N) + r.g.N) % r.g.N
			}
			if i < 0 {
				return nil, false
			}
			if i < len(r.out.TempC) {
				if v := float64(r.out.TempC[i]); !math.IsNaN(v) {
					sum += v
					n++
				}
			}
		}
		night[k] = math.NaN()
		if 2*n >= perH && n > 0 {
			night[k] = sum / float64(n)
		}
	}
	return night, true
}
