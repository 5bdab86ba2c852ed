package words

import (
	"math"
	"strings"

	"sashlog/analyze/doubt"
	"sashlog/analyze/hours"
)

// Sure says how far page one can be trusted: the unknown share, the bounds it
// leaves, and the biggest doubt.
func Sure(in Input) []string {
	b := in.Results.Summary.Building
	var out []string
	switch j := b.JudgedShare; {
	case !known(j) || j < 0.0005:
		out = append(out, "No occupied hour could be judged: in all of them the weather, the windows or the plant are unknown.")
	case j >= 0.9995:
		out = append(out, "All occupied hours could be judged.")
	default:
		t := Share(j) + " of the occupied hours could be judged; for " + Share(1-j) + " the weather, the windows or the plant are unknown."
		if r := b.AchievedShare; known(r.Low) && known(r.High) && in.CanSay() == Full {
			t += " Were all of them open, or all missed, the building reached between " + Number(math.Floor(r.Low*100), 0) + " and " + Number(math.Ceil(r.High*100), 0) + nbsp + "% of what was possible."
		}
		out = append(out, strings.ToUpper(t[:1])+t[1:])
	}
	if n := withoutRunningMean(in); n > 0 {
		out = append(out, Plural(n, "day", "days")+" cannot be judged because the outdoor temperature of the days before is not logged: comfort limits follow it. Weather from 30 days before the period would mend that.")
	}
	if t := sensorDoubt(in); t != "" {
		out = append(out, t)
	}
	if d := BiggestDoubt(in); d != "" {
		out = append(out, "The biggest doubt: "+d)
	}
	if w := in.Results.Summary.WeightedBy; w != "" {
		t := "Building figures: means over zones with openings, weighted by " + w + "."
		if w == "equally" {
			t = "Building figures count every zone with openings equally, since neither people nor floor areas are given."
		}
		out = append(out, t)
	}
	return out
}

// withoutRunningMean counts the days of the period whose own outdoor
// temperature is known and that of the days before is not.
func withoutRunningMean(in Input) (n int) {
	o, g := in.Results.Outdoor, in.Grid
	if o == nil || g == nil {
		return 0
	}
	for _, d := range o.Days {
		if d.ToStep > g.PeriodFrom && d.FromStep < g.PeriodTo && known(d.MeanC) && !known(d.RunningMeanENC) {
			n++
		}
	}
	return n
}

// sensorDoubt says what the sensors' own errors add.
func sensorDoubt(in Input) string {
	d := in.Results.Doubt
	if d == nil || in.CanSay() != Full {
		return ""
	}
	s := d.Building.AchievedShare
	if !known(s.Value) || s.High-s.Low < 0.005 {
		return ""
	}
	return "Sensors of usual accuracy leave " + Share(s.Low) + " to " + Share(s.High) + " (nine times in ten); most of it is " + DoubtPart(d.Largest()) + "."
}

// DoubtPart names a source of error.
func DoubtPart(p doubt.Part) string {
	switch p {
	case doubt.OutdoorTemp:
		return "the outdoor temperature sensor"
	case doubt.OutdoorHumidity:
		return "the outdoor humidity sensor"
	case doubt.IndoorTemp:
		return "the accuracy of the temperature sensors in the zones"
	}
	return "the accuracy of the CO2 sensors"
}

// BiggestDoubt names what could move the answer most.
func BiggestDoubt(in Input) string {
	b, s := in.Results.Summary.Building, in.SpanOf()
	with, of := in.Contacts()
	switch in.CanSay() {
	case NoWeather:
		return "no measured weather; a nearby station's file would do."
	case PlantOnly:
		return "no window contact is logged, so a shut building without plant looks like an open one."
	case NoOpenings, NoOccupied:
		return ""
	}
	// The candidates, each by the hours of the average occupant it could move.
	doubt, size := "", 0.0
	if h := b.H[hours.CUnjudged]; h > 0 {
		size = h
		doubt = "the hours that cannot be assessed (" + Duration(s.PerDay(h)) + " per working day)"
		if z, hz := mostUnjudged(in); z >= 0 && len(in.Results.Summary.Zones) > 1 {
			doubt += ", most of them in zone " + in.Zone(z) + " (" + HoursNumber(hz*s.PerYear) + nbsp + "h " + s.Words + ")"
		}
		doubt += "."
	}
	headline := math.NaN()
	for i, m := range in.Results.Potential.Methods {
		if i == 0 {
			headline = m.SuitedH
			continue
		}
		if m.Name == "with air movement" {
			continue // another question, not another answer
		}
		if d := math.Abs(m.SuitedH - headline); d > size && d > 0.02*headline {
			size = d
			doubt = "which weather suits. The headline rule counts " + Hours(headline*s.PerYear) + " " + s.Words + ", the count " + quoteName(m.Name) + " " + Hours(m.SuitedH*s.PerYear) + "."
		}
	}
	if with < of {
		if share := weightWithoutContacts(in) * b.H[hours.CSuited]; share > size {
			doubt = Count(int64(of-with)) + " of " + Zones(of) + " with openings have no window contact."
			if of-with == 1 {
				doubt = "1 of " + Zones(of) + " with openings has no window contact."
			}
		}
	}
	return doubt
}

func quoteName(s string) string { return "“" + Clean(s) + "”" }

func mostUnjudged(in Input) (zone int, h float64) {
	zone = -1
	for z, t := range in.Results.Summary.Zones {
		if v := t.H[hours.CUnjudged]; v > h {
			zone, h = z, v
		}
	}
	return zone, h
}

func weightWithoutContacts(in Input) float64 {
	w := 0.0
	for z, r := range in.Results.Running.Zones {
		if !r.HasContacts && !r.NoOpening && z < len(in.Results.Summary.Weights) {
			w += in.Results.Summary.Weights[z]
		}
	}
	return w
}
