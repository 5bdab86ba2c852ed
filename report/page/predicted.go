package page

import (
	"fmt"
	"strings"

	"sashlog/report/words"
)

// predictedVotes shows what people would be predicted to feel, whether moving
// air helps, and whether it would bother them.
func (b *builder) predictedVotes(zones []int, foot string) []block {
	p := b.in.Results.Predicted
	if p == nil {
		return nil
	}
	k := b.span.PerYear
	t := table{ID: "predicted-votes", Caption: "What people would be predicted to feel in occupied time", Head: []column{col("Zone"),
		num("Judged (h)"), num("Beyond the method (h)"), num("Mean vote"), num("with moving air"), num("Air moving (h)"), num("it cools by (K)"),
		num("SET mean (°C)"), num("5 % below"), num("95 % below"), num("Draught over 20 % (h)")}}
	for _, z := range zones {
		if z >= len(p.Zones) {
			continue
		}
		s := &p.Zones[z].Summary
		if s.KnownH+s.OutsideH == 0 {
			r := row(b.w.Zone(z))
			for range len(t.Head) - 1 {
				r = append(r, cell{Text: words.Dash})
			}
			t.Rows = append(t.Rows, r)
			continue
		}
		draught := words.Dash
		if s.Draught.JudgedH > 0 {
			draught = words.HoursNumber(s.Draught.AboveH[1]*k) + " of " + words.HoursNumber(s.Draught.JudgedH*k)
		}
		t.Rows = append(t.Rows, row(b.w.Zone(z), words.HoursNumber(s.KnownH*k), words.HoursNumber(s.OutsideH*k), words.Number(s.MeanVote, 2), words.Number(s.MeanElevated, 2),
			words.HoursNumber(s.MovingH*k), words.Number(s.MeanCoolingK, 1), words.Number(s.SETMeanC, 1), words.Number(s.SET5C, 1), words.Number(s.SET95C, 1), draught))
	}
	if len(t.Rows) == 0 {
		return nil
	}
	t.Foot = []string{"Hours " + b.span.Words + ". Votes run from " + words.Number(-3, 0) + " (cold) over 0 to 3 (hot) and hold for people who neither open windows nor choose their clothes; with moving air as ASHRAE 55 asks, less its cooling effect. SET: the temperature of still standard air that would strain the body as much (" + p.SETEdition + "). " + words.Dash + " not logged or not known.",
		b.takenForGranted()}
	if foot != "" {
		t.Foot = append(t.Foot, foot)
	}
	return []block{heading("Predicted votes, moving air and draught"),
		text("Where plant conditions the air, the body's heat balance predicts how people feel from temperature, humidity, air movement, clothing and activity. Moving air cools: a fan in use or a logged breeze makes a warmer room feel the same. Where air speed is logged, draught says how often it would bother one person in five."),
		b.table(t)}
}

// takenForGranted says what the votes assume, over all zones.
func (b *builder) takenForGranted() string {
	var all, rh, speed, radiant, limited, noEffect float64
	anySpeed := false
	for i := range b.in.Results.Predicted.Zones {
		s := &b.in.Results.Predicted.Zones[i].Summary
		all += s.KnownH + s.OutsideH
		rh, speed, radiant = rh+s.AssumedHumidityH, speed+s.AssumedSpeedH, radiant+s.AssumedRadiantH
		limited, noEffect = limited+s.LimitedH, noEffect+s.NoEffectH
		anySpeed = anySpeed || s.Draught.JudgedH+s.Draught.OutsideH+s.Draught.UnknownH > 0
	}
	if all == 0 {
		return "No zone has a temperature to judge by."
	}
	share := func(h float64) string { return words.Share(h / all) }
	c := b.in.Criteria
	var parts []string
	add := func(h float64, what string) {
		if h > 0 {
			parts = append(parts, what+" in "+share(h))
		}
	}
	add(radiant, "surfaces as warm as the air")
	add(speed, "air at "+words.Number(c.AirSpeedMS, 1)+" m/s")
	add(rh, "humidity of 50 %")
	parts = append(parts, "an activity of "+words.Number(c.MetabolicMet, 1)+" met")
	out := []string{"Taken for granted: " + words.List(parts, 0) + "; clothing by the outdoor temperature at 06:00 unless the site file gives it."}
	if !anySpeed {
		out = append(out, "Air speed is not logged in any zone, so draught cannot be judged.")
	}
	if limited > 0 {
		out = append(out, fmt.Sprintf("In %s of these hours air was faster than counts where people cannot choose it.", share(limited)))
	}
	if noEffect > 0 {
		out = append(out, fmt.Sprintf("In %s of them moving air would not have cooled.", share(noEffect)))
	}
	return strings.Join(out, " ")
}
