package page

import (
	"strings"

	"sashlog/analyze/hours"
	"sashlog/report/chart"
	"sashlog/report/words"
)

// front is page one.
type front struct {
	words.Front
	Days   string
	Figure block
	// Caution is the line every reader of one page must see.
	Caution string
}

func (b *builder) front() front {
	f := front{Front: words.FrontOf(b.w), Days: words.Plural(b.span.Days, "day", "days") + ", " +
		words.Plural(b.span.WorkingDays, "working day", "working days")}
	f.Figure = b.whereHoursWent()
	f.Caution = "Before windows or plant are run differently: falls from windows, smoke, security, rain, heat and infection control are for local codes and licensed practice to decide (see Cautions). These figures support a judgement; they never certify compliance."
	return f
}

// whereHoursWent follows the occupied hours of the average occupant down to
// those that were open, comfortable and fresh.
func (b *builder) whereHoursWent() block {
	t, k := b.in.Results.Summary.Building, b.span.PerYear
	if b.w.CanSay() == words.NoOpenings {
		return note("No zone has an opening to outdoors, so there is no figure of where the hours went.")
	}
	h := func(cols ...hours.Col) float64 {
		sum := 0.0
		for _, c := range cols {
			sum += t.H[c]
		}
		return sum * k
	}
	var steps []chart.HoursStep
	total := func(label string, c chart.Class, v float64, of string, base float64) {
		s := chart.HoursStep{Label: label, Class: c, Hours: v, Total: true}
		if base > 0 && of != "" {
			s.Note = words.Share(v/base) + " of " + of
		}
		steps = append(steps, s)
	}
	// Losses under a hundredth of the occupied hours are gathered where there
	// are several, so that page one stays one page; the table of outcomes has
	// each of them.
	var losses []chart.HoursStep
	loss := func(label string, c chart.Class, v float64) {
		if v > 0 {
			losses = append(losses, chart.HoursStep{Label: label, Class: c, Hours: v})
		}
	}
	gather := func(label string) {
		steps = append(steps, gathered(losses, label, occupiedShare*h(hours.COccupied))...)
		losses = nil
	}
	occupied, suited, achieved := h(hours.COccupied)-h(hours.CNoOpening), h(hours.CSuited), h(hours.CAchieved)
	total("occupied", chart.Occupied, occupied, "", 0)
	loss("too cold outdoors", chart.ClosedUnsuited, h(hours.CTooCold))
	loss("too warm outdoors", chart.ClosedUnsuited, h(hours.CTooWarm))
	loss("too humid outdoors", chart.ClosedUnsuited, h(hours.CTooHumid))
	loss("wind, rain or outdoor pollution", chart.ClosedUnsuited, h(hours.CTooWindy, hours.CRain, hours.CPolluted))
	loss("suitable too briefly", chart.ClosedUnsuited, h(hours.CTooBrief))
	loss("weather unknown", chart.Unjudged, h(hours.CSuitedUnknown))
	gather("suitable too briefly, other weather")
	total("weather suitable", chart.Suited, suited, "occupied", occupied)
	loss("windows or plant unknown", chart.Unjudged, h(hours.CUnjudgedSuited))
	loss("open mode not needed", chart.NotNeeded, h(hours.CNotNeeded))
	for _, l := range words.Losses() {
		loss("missed: "+l.Words, chart.Missed, h(l.Col))
	}
	gather("missed: other")
	total("ran open", chart.AchievedOK, achieved, "suitable", suited)
	loss("open, too warm", chart.AchievedWarm, h(hours.CAchievedWarm))
	loss("open, too cool", chart.AchievedCool, h(hours.CAchievedCool))
	loss("open, stale air", chart.AchievedStale, h(hours.CAchievedStale))
	loss("open, comfort or air not measured", chart.AchievedUnassessed, h(hours.CAchievedUnassessed))
	gather("")
	total("open, comfortable and fresh", chart.AchievedOK, h(hours.CAchievedOK), "ran open", achieved)
	return b.draw("where-hours-went",
		"Where the average occupant's hours went, "+b.span.Words+". Each bar takes its hours off those above; orange could have been open.",
		"There are no occupied hours in this period, so there is no figure of where they went.",
		func(o chart.Options) (chart.SVG, error) {
			// Drawn wider than the page and scaled down, so that page one stays one page.
			o.WidthMM = 195
			return chart.WhereHoursWent(chart.WhereHoursWentData{
				Caption: chart.Caption{Title: "Where the occupied hours went", Desc: words.Answer(b.w)},
				XTitle:  "hours of the average occupant " + b.span.Words + " (h)", Steps: steps}, o)
		})
}

// occupiedShare is the share of the occupied hours below which a loss may be
// gathered with others.
const occupiedShare = 0.01

// gathered joins the small losses of one kind of class into the last row. What
// is unknown always stands by itself.
func gathered(losses []chart.HoursStep, label string, small float64) []chart.HoursStep {
	var out, few []chart.HoursStep
	for _, l := range losses {
		if l.Hours < small && l.Class != chart.Unjudged {
			few = append(few, l)
		} else {
			out = append(out, l)
		}
	}
	if len(few) < 2 {
		return losses
	}
	if label == "" {
		var parts []string
		for _, l := range few {
			parts = append(parts, strings.TrimPrefix(l.Label, "open, "))
		}
		label = "open: " + words.List(parts, len(parts))
	}
	rest := chart.HoursStep{Label: label, Class: few[0].Class}
	most := 0.0
	for _, l := range few {
		rest.Hours += l.Hours
		if l.Hours > most {
			most, rest.Class = l.Hours, l.Class
		}
	}
	return append(out, rest)
}
