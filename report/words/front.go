package words

import (
	"math"
	"sort"
	"strings"

	"sashlog/analyze/advice"
	"sashlog/analyze/hours"
)

// Front is page one in words.
type Front struct {
	Building, Period, Answer string
	Invented                 bool
	Figures                  []Figure
	Worst                    []Worst
	// WorstBy says what the worst zones are the worst by.
	WorstBy string
	First   []Action
	// FirstNote explains person-hours where the actions give them.
	FirstNote string
	Sure      []string
}

// Figure is one of the figures of page one.
type Figure struct {
	Label, PerDay, PerYear, Span, Meaning string
}

// Worst is one of the worst zones.
type Worst struct{ Zone, People, Text string }

// Action is one thing to do first. What gives the hours with their bounds;
// Size is the hours again with the person-hours, Load the people and what it
// is for the average occupant.
type Action struct{ What, Size, Load, Do, Look string }

// FrontOf makes page one.
func FrontOf(in Input) Front {
	f := Front{Building: in.Building(), Invented: in.Site.Invented, Period: in.SpanOf().Period(), Answer: Answer(in)}
	f.Figures = figures(in)
	f.Worst, f.WorstBy = worst(in, 3)
	for i, x := range in.Results.Findings {
		if i == 3 {
			break
		}
		f.First = append(f.First, action(in, x))
		if occupantHours(in, x) == "" && personHours(x) != "" {
			f.FirstNote = "person-hours are hours times the usual number of people"
		}
	}
	f.Sure = Sure(in)
	return f
}

// Answer is the whole report in one or two sentences.
func Answer(in Input) string {
	b, s := in.Results.Summary.Building, in.SpanOf()
	// The sentence gives the same rounded figures as the tiles below it.
	day := func(r hours.Range) string {
		main, _, _ := strings.Cut(s.PerDayBetween(r), " (")
		return main
	}
	switch in.CanSay() {
	case NoOpenings:
		return "No zone of this site has an opening to outdoors, so open mode (windows open, mechanical plant off) cannot be asked for; comfort and fresh air are reported below."
	case NoWeather:
		return "Whether the building runs open when the weather suits cannot be said from these logs: they hold no measured outdoor temperature for the period. The data chapter says how to get one."
	case NoOccupied:
		return "No occupied time falls into this period, so there is nothing to judge. Check the occupied times and holidays of the site file."
	case NeverSuited:
		return "In the occupied hours of this period the weather never suited open mode (windows open, mechanical plant off). Nothing was missed; the question needs a milder season."
	case NothingJudged:
		return "The logs of this period do not say whether the building ran open when the weather suited: for " + Share(1-b.JudgedShare) + " of the occupied hours the weather, the windows or the plant are unknown."
	case PlantOnly:
		t := "On an average working day the weather suited open mode (windows open, mechanical plant off) for " + day(b.Suited)
		if known(b.MechFreeShare.Value) {
			t += "; the plant was off in " + ShareBetween(b.MechFreeShare.Value, b.MechFreeShare.Low, b.MechFreeShare.High) + " of that time"
		}
		return t + ". No window contact is logged, so whether windows were open cannot be said." + weatherUnknown(in)
	}
	t := "On an average working day the weather suited open mode (windows open, mechanical plant off) for " + day(b.Suited) + ". "
	unknown := b.H[hours.CUnjudgedSuited]
	muchUnknown := unknown > 0.1*b.Suited.Value
	if b.Achieved.Value > 0 {
		t += "The building ran open for " + day(b.Achieved) + " of it"
	} else {
		t += "The building did not run open in any of it"
	}
	if b.Missed.Value > 0 {
		t += " and could have done so for " + day(b.Missed) + " more"
	} else {
		t += map[bool]string{true: "; no missed hour is known", false: "; no hour that could have been open was missed"}[muchUnknown]
	}
	if r := b.AchievedShare; known(r.Value) && b.Missed.Value > 0 {
		t += ": it reached " + ShareBetween(r.Value, r.Low, r.High) + " of what was possible"
	}
	t += "."
	if muchUnknown {
		t += " For " + Duration(s.PerDay(unknown)) + " of it the windows or the plant are unknown."
	}
	return t + weatherUnknown(in)
}

// weatherUnknown says for how much of the time the weather is not known, where
// it matters.
func weatherUnknown(in Input) string {
	b := in.Results.Summary.Building
	if w := b.H[hours.CSuitedUnknown]; w > 0.05*b.Occupied.Value {
		return " In " + Share(w/b.Occupied.Value) + " of the occupied hours the weather is not known; they count as unsuited here, so the true hours may be more (weather suitable: " + in.SpanOf().PerDayBetween(b.Suited) + ")."
	}
	return ""
}

// figures are the three headline figures, or what stands in for them.
func figures(in Input) []Figure {
	b, s := in.Results.Summary.Building, in.SpanOf()
	figure := func(label, meaning string, r hours.Range) Figure {
		return Figure{Label: label, Meaning: meaning, PerDay: s.PerDayBetween(r), PerYear: s.PerYearBetween(r), Span: s.Words}
	}
	unknown := func(label, meaning string) Figure {
		return Figure{Label: label, Meaning: meaning, PerDay: Dash, PerYear: Dash, Span: s.Words}
	}
	offered := b.Suited
	if offered.Value == 0 && offered.High > 0 { // nothing known to suit is not nothing that suited
		offered.Value = math.NaN()
	}
	suited := figure("Weather suitable", "occupied hours with outdoor air within the limits", offered)
	if in.CanSay() == NoWeather || in.CanSay() == NoOpenings || in.CanSay() == NoOccupied {
		suited = unknown(suited.Label, "not known: "+map[CanSay]string{NoWeather: "no measured weather", NoOpenings: "no zone has an opening", NoOccupied: "no occupied time in the period"}[in.CanSay()])
	}
	switch in.CanSay() {
	case Full, NeverSuited:
		return []Figure{suited,
			figure("Ran open", "of those: windows open, mechanical plant off", b.Achieved),
			openAndWell(b, s, figure("Open, comfortable and fresh", "of those: inside the comfort and CO2 limits", b.AchievedOK))}
	case PlantOnly:
		free := b.MechFreeShare
		mech := Figure{Label: "No mechanical plant", Meaning: "share of the suitable hours in which no plant ran; windows are not logged", Span: s.Words, PerDay: ShareBetween(free.Value, free.Low, free.High), PerYear: Dash}
		return []Figure{suited, mech, unknown("Open, comfortable and fresh", "not known: no window contact is logged")}
	}
	why := "not known from these logs"
	return []Figure{suited, unknown("Ran open", why), unknown("Open, comfortable and fresh", why)}
}

// openAndWell gives only the bounds where comfort or air were mostly not
// measured while the zones ran open: nothing known is not nothing achieved.
func openAndWell(b hours.Total, s Span, f Figure) Figure {
	if missing := b.H[hours.CAchievedUnassessed]; missing > 0.5*b.H[hours.CAchieved] {
		r := b.AchievedOK
		r.Value = math.NaN()
		f.PerDay, f.PerYear = s.PerDayBetween(r), s.PerYearBetween(r)
		f.Meaning = "of those; for " + Duration(s.PerDay(missing)) + " per working day comfort or CO2 was not measured"
	}
	return f
}

// Order sorts the zones by what matters: hours that could have been open times
// the people affected (a zone whose people are not given counts as the
// average zone), then hours too warm, then unknown hours.
func Order(in Input) []int {
	zones := in.Results.Summary.Zones
	mean, n := 0.0, 0
	for _, p := range in.Results.Hours.People {
		if p > 0 {
			mean, n = mean+p, n+1
		}
	}
	if n > 0 {
		mean /= float64(n)
	} else {
		mean = 1
	}
	weight := func(z int) float64 {
		if p := in.Results.Hours.People[z]; p >= 0 {
			return p
		}
		return mean
	}
	out := make([]int, len(zones))
	for z := range out {
		out[z] = z
	}
	sort.SliceStable(out, func(a, b int) bool {
		za, zb := out[a], out[b]
		for _, c := range []hours.Col{hours.CMissed, hours.COver, hours.CUnjudged} {
			if x, y := zones[za].H[c]*weight(za), zones[zb].H[c]*weight(zb); x != y {
				return x > y
			}
		}
		return false
	})
	return out
}

func worst(in Input, most int) (out []Worst, by string) {
	s, zones := in.SpanOf(), in.Results.Summary.Zones
	for _, z := range Order(in) {
		if len(out) == most {
			break
		}
		t := zones[z]
		var parts []string
		if t.Missed.Value > 0 {
			parts = append(parts, "could have been open for "+s.PerDayBetween(t.Missed)+" more per working day")
		}
		if over := t.H[hours.COver]; over > 0 && t.Occupied.Value > 0 {
			parts = append(parts, "too warm for "+Share(over/t.Occupied.Value)+" of occupied hours")
		}
		if len(parts) == 0 {
			continue
		}
		out = append(out, Worst{Zone: in.Zone(z), People: People(in.Results.Hours.People[z]), Text: strings.Join(parts, "; ")})
	}
	return out, "missed hours times people"
}

func action(in Input, f advice.Finding) Action {
	a := Action{What: Sentence(in.Foreign(f.What)), Do: Sentence(in.Foreign(f.DoNext)), Look: Sentence(in.Foreign(f.CheckOnSite)),
		Size: FindingSize(in, f)}
	var load []string
	if p := findingPeople(in, f); p != "" {
		load = append(load, p)
	}
	if p := occupantHours(in, f); p != "" {
		load = append(load, p)
	} else if p := personHours(f); p != "" {
		load = append(load, p)
	}
	a.Load = strings.Join(load, "; ")
	return a
}

// occupantHours writes a finding's person-hours as hours of the average
// occupant, so that they stand beside the other figures of page one. Empty
// where building figures are not weighted by people.
func occupantHours(in Input, f advice.Finding) string {
	sum := in.Results.Summary
	if !known(f.PersonH) || sum.WeightedBy != "people" {
		return ""
	}
	people := 0.0
	for z, w := range sum.Weights {
		if w > 0 {
			people += in.Results.Hours.People[z]
		}
	}
	for _, id := range f.Zones {
		if z := in.Site.ZoneIndex(id); z < 0 || sum.Weights[z] == 0 {
			return "" // the building figures leave this zone out
		}
	}
	if !(people > 0) {
		return ""
	}
	s := in.SpanOf()
	h := f.PersonH / people * s.PerYear
	return HoursBetween(h, h*ratio(f.Low, f.Hours), h*ratio(f.High, f.Hours)) + " " + s.Words + " for the average occupant"
}

// FindingSize writes a finding's hours with bounds and its person-hours.
func FindingSize(in Input, f advice.Finding) string {
	if !known(f.Hours) {
		return "hours not known"
	}
	t := HoursBetween(f.Hours, f.Low, f.High)
	if len(f.Zones) > 1 {
		t += " summed over " + Zones(len(f.Zones))
	}
	if p := personHours(f); p != "" {
		t += "; " + p
	}
	return t
}

func personHours(f advice.Finding) string {
	if !known(f.PersonH) {
		return ""
	}
	return between(f.PersonH, f.PersonH*ratio(f.Low, f.Hours), f.PersonH*ratio(f.High, f.Hours), "person-hours", leastStep)
}

func ratio(a, b float64) float64 {
	if b == 0 || !known(a) {
		return 1
	}
	return a / b
}

// findingPeople are the people usually in the zones a finding names.
func findingPeople(in Input, f advice.Finding) string {
	sum, given := 0.0, true
	for _, id := range f.Zones {
		z := in.Site.ZoneIndex(id)
		if z < 0 || !(in.Site.Zones[z].People >= 0) {
			given = false
			continue
		}
		sum += in.Site.Zones[z].People
	}
	switch {
	case len(f.Zones) == 0:
		return ""
	case !given && sum == 0:
		return "number of people not given"
	case !given:
		return "at least " + People(sum)
	}
	return People(sum)
}

// Loss is one way in which suitable hours were lost.
type Loss struct {
	Words string
	Col   hours.Col
}

// Losses lists the ways in which hours that could have been open were lost.
func Losses() []Loss {
	return []Loss{
		{"plant was cooling", hours.CMissedCool},
		{"plant was ventilating", hours.CMissedVent},
		{"windows open with plant running", hours.CMissedBoth},
		{"shut while warm or stale", hours.CMissedShut},
		{"plant ran, type unknown", hours.CMissedUntyped},
	}
}

// LostTo says what the missed hours were lost to, greatest first.
func LostTo(in Input) string {
	b, s := in.Results.Summary.Building, in.SpanOf()
	l := Losses()
	sort.SliceStable(l, func(i, j int) bool { return b.H[l[i].Col] > b.H[l[j].Col] })
	var parts []string
	for _, x := range l {
		if h := b.H[x.Col]; h > 0 && !math.IsNaN(s.PerDay(h)) {
			parts = append(parts, x.Words+" "+Duration(s.PerDay(h)))
		}
	}
	return List(parts, 0)
}
