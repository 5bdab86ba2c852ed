package quality

import (
	"fmt"
	"math"

	"sashlog/configs/site"
	"sashlog/ingest/grid"
	"sashlog/ingest/reading"
)

// Fix is a unit that was mistaken: the readings of the point are to be read
// again through the conversion.
type Fix struct {
	Point      int
	Conversion site.Conversion
	Check      reading.Check
}

// What indoor air and supply air can be over a whole series, degC. Common
// practice: no building is held at a median of 45 degC, and none is used at a
// median below 0.
const (
	indoorMedianMostC   = 45
	outdoorMedianMostC  = 40
	usualIndoorLowC     = 5
	usualIndoorHighC    = 38
	siblingNearK        = 6
	siblingFarK         = 15
	unitReadingsLeast   = 50
	humidityFractionMax = 1.005
)

var (
	fahrenheit = site.Conversion{Factor: 5.0 / 9, Offset: -160.0 / 9}
	celsius    = site.Conversion{Factor: 9.0 / 5, Offset: 32}
	kelvin     = site.Conversion{Factor: 1, Offset: -273.15}
	fraction   = site.Conversion{Factor: 100}
)

// Units looks for units mistaken, by the whole series of each point against
// what is possible and against points of the same quantity. Strong evidence
// becomes a Fix, weak evidence a warning.
func Units(s *site.Site, histogram func(point int) *grid.Histogram) (fixes []Fix, warned []reading.Check) {
	for i := range s.Points {
		h := histogram(i)
		if h == nil || h.Total() < unitReadingsLeast {
			continue
		}
		var f *Fix
		var w *reading.Check
		switch h.Bins {
		case grid.TempBins:
			f, w = tempUnit(s, i, h, histogram)
		case grid.ShareBins:
			f, w = shareUnit(s, i, h)
		}
		if f != nil {
			f.Point = i
			f.Check.Kind, f.Check.Points, f.Check.Zone = reading.CheckUnit, []int{i}, zoneOf(s, i)
			f.Check.Effect, f.Check.Readings = reading.EffectCorrected, h.Total()
			fixes = append(fixes, *f)
		}
		if w != nil {
			w.Kind, w.Points, w.Zone, w.Effect = reading.CheckUnit, []int{i}, zoneOf(s, i), reading.EffectWarned
			warned = append(warned, *w)
		}
	}
	return fixes, warned
}

func tempUnit(s *site.Site, i int, h *grid.Histogram, histogram func(int) *grid.Histogram) (*Fix, *reading.Check) {
	q := s.Points[i].Quantity
	median, _ := h.Quantile(0.5)
	low, _ := h.Quantile(0.05)
	high, _ := h.Quantile(0.95)
	others, n := siblingMedian(s, i, histogram)
	declared := s.Points[i].Conversion
	type candidate struct {
		name, said string
		c          site.Conversion
	}
	var tries []candidate
	if declared.Factor == fahrenheit.Factor && declared.Offset == fahrenheit.Offset {
		tries = append(tries, candidate{"°C", "°F", celsius})
	} else if declared == (site.Conversion{}) || declared == (site.Conversion{Factor: 1}) {
		tries = append(tries, candidate{"°F", "°C", fahrenheit}, candidate{"K", "°C", kelvin})
	}
	var weak *reading.Check
	at := func(c site.Conversion, v float64) float64 { return c.Factor*v + c.Offset }
	for _, t := range tries {
		m := at(t.c, median)
		usual := m >= usualIndoorLowC && m <= usualIndoorHighC
		most := float64(indoorMedianMostC)
		switch q {
		case site.OutdoorTemp, site.OutdoorDewPoint:
			usual = m >= -25 && m <= 35
			most = outdoorMedianMostC
		case site.SupplyAirTemp, site.SurfaceTemp, site.MixedAirTemp:
			// Warm supply air and radiators reach this; only others can tell.
			most = 100
		}
		impossible := median > most || (t.name == "°C" && median < 0 && q != site.OutdoorTemp && q != site.OutdoorDewPoint)
		bySiblings := n > 0 && math.Abs(m-others) <= siblingNearK && math.Abs(median-others) >= siblingFarK
		against := n > 0 && math.Abs(m-others) > siblingFarK
		evidence := fmt.Sprintf("half of the readings lie below %.1f and nine of ten between %.1f and %.1f, taken as %s; as %s that is %.1f °C and %.1f to %.1f °C",
			median, low, high, t.said, t.name, m, at(t.c, low), at(t.c, high))
		if n > 0 {
			evidence += fmt.Sprintf("; %s of the same quantity have a median of %.1f °C", count(n, "other point", "other points"), others)
		}
		do := fmt.Sprintf("write %q as its unit in points.csv and check one reading on site", map[string]string{"°F": "degF", "K": "K", "°C": "degC"}[t.name])
		if usual && ((impossible && !against) || bySiblings) {
			return &Fix{Conversion: t.c, Check: reading.Check{Evidence: evidence, DoNext: do}}, nil
		}
		if impossible && weak == nil {
			weak = &reading.Check{Evidence: evidence, DoNext: "check the unit of this point and write it in points.csv"}
		}
	}
	if weak != nil {
		return nil, weak
	}
	if share := h.ShareBetween(55, 95); declaredCelsius(declared) && indoorAir(q) && share > 0.1 && share < 0.9 {
		return nil, &reading.Check{Evidence: fmt.Sprintf("%.0f %% of the readings lie between 55 and 95 and look like °F, the others like °C", 100*share),
			DoNext: "the unit seems to change within the log; split the point where it does"}
	}
	return nil, nil
}

func declaredCelsius(c site.Conversion) bool {
	return c.Factor == 0 || (c.Factor == 1 && c.Offset == 0)
}

func indoorAir(q site.Quantity) bool {
	switch q {
	case site.AirTemp, site.OperativeTemp, site.GlobeTemp, site.ThermostatTemp:
		return true
	}
	return false
}

// siblingMedian is the median of the medians of the other points of the same
// quantity and how many there are.
func siblingMedian(s *site.Site, i int, histogram func(int) *grid.Histogram) (float64, int) {
	var ms []float64
	for k := range s.Points {
		if k == i || s.Points[k].Quantity != s.Points[i].Quantity || s.Points[k].Owner != s.Points[i].Owner {
			continue
		}
		if h := histogram(k); h != nil && h.Total() >= unitReadingsLeast {
			m, _ := h.Quantile(0.5)
			ms = append(ms, m)
		}
	}
	return median(ms), len(ms)
}

func shareUnit(s *site.Site, i int, h *grid.Histogram) (*Fix, *reading.Check) {
	p := &s.Points[i]
	if p.Conversion.Factor != 0 && p.Conversion.Factor != 1 {
		return nil, nil
	}
	most, _ := h.Quantile(0.999)
	median, _ := h.Quantile(0.5)
	if most > humidityFractionMax {
		return nil, nil
	}
	evidence := fmt.Sprintf("999 of 1000 readings are at most %.2f and half are below %.2f, taken as %%", most, median)
	do := `write "fraction" as its unit in points.csv`
	if p.Quantity == site.Humidity || p.Quantity == site.OutdoorHumidity {
		if median >= 0.05 {
			return &Fix{Conversion: fraction, Check: reading.Check{Evidence: evidence + "; air in buildings and outdoors is not drier than 1 %", DoNext: do}}, nil
		}
		return nil, nil
	}
	full := h.ShareBetween(0.99, 1)
	between := h.ShareBetween(0.05, 0.98)
	switch {
	case full >= 0.01 && between >= 0.01:
		return &Fix{Conversion: fraction, Check: reading.Check{Evidence: fmt.Sprintf("%s; %.0f %% of them are 1 and none is above, as with a fraction", evidence, 100*full), DoNext: do}}, nil
	case full > 0 || between > 0:
		return nil, &reading.Check{Evidence: evidence + "; it may be a fraction, or something that hardly ever opens", DoNext: "check the unit of this point"}
	}
	return nil, nil
}
