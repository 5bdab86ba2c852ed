package page

import (
	"fmt"
	"math"
	"time"

	"sashlog/analyze/climate"
	"sashlog/report/chart"
	"sashlog/report/words"
)

// climate shows what the climate offered by published ways of counting.
func (b *builder) climate() []block {
	c := b.in.Results.Climate
	if c == nil || c.Measured == nil && c.Typical == nil {
		return nil
	}
	out := []block{heading("The same weather, counted by published ways")}
	if c.Measured == nil {
		out = append(out, note("Without measured weather only the typical year is counted. It says what the climate usually offers, not what this building had."))
	}
	out = append(out, b.waysChart(c), b.waysTable(c))
	out = append(out, b.agreement(c)...)
	out = append(out, b.settingsMoved(c)...)
	out = append(out, b.heatBalance(c)...)
	out = append(out, b.normalYear(c)...)
	out = append(out, b.airMovement(c)...)
	return append(out, b.comfortFields(c)...)
}

// typicalOf finds a way in the typical year.
func typicalOf(c *climate.Result, name string) float64 {
	if c.Typical == nil {
		return math.NaN()
	}
	for _, m := range c.Typical.Methods {
		if m.Name == name {
			return m.SuitedH
		}
	}
	return math.NaN()
}

// shownMethods are the measured ways, or without them the typical year's names
// with unknown hours.
func shownMethods(c *climate.Result) []climate.Method {
	if c.Measured != nil {
		return c.Measured.Methods
	}
	var out []climate.Method
	for _, m := range c.Typical.Methods {
		m.SuitedH, m.UnknownH, m.OutsideH = math.NaN(), math.NaN(), math.NaN()
		out = append(out, m)
	}
	return out
}

func (b *builder) waysChart(c *climate.Result) block {
	k := b.span.PerYear
	d := chart.HoursByWayData{Caption: chart.Caption{Title: "Suitable hours by way of counting", Desc: "One bar per published way of counting suitable hours, with the typical year beside it."},
		XTitle: "suitable hours of the average occupant " + b.span.Words + " (h)"}
	if c.Typical != nil {
		d.Second = "typical year"
	}
	for _, m := range shownMethods(c) {
		d.Ways = append(d.Ways, chart.WayHours{Way: m.Name, Hours: chart.Bounded{Value: m.SuitedH * k, Low: m.SuitedH * k, High: (m.SuitedH + m.UnknownH) * k}, Second: typicalOf(c, m.Name)})
	}
	return b.draw("hours-by-way", "Suitable hours by way of counting. Bars far apart mean that the number depends on how one counts: the heat balance also counts cold hours, in which a small opening is enough; the adaptive limits ask that outdoor air itself be comfortable.",
		"No suitable hour was found by any way of counting.", func(o chart.Options) (chart.SVG, error) { return chart.HoursByWay(d, o) })
}

func (b *builder) waysTable(c *climate.Result) block {
	k := b.span.PerYear
	t := table{ID: "climate-ways", Caption: "Suitable hours by published ways of counting", Small: true,
		Head: []column{col("Way of counting"), num("As measured"), num("Not known (h)"), num("Outside validity (h)"), num("Typical year (h)"), col("Rule and source")}}
	for _, m := range shownMethods(c) {
		t.Rows = append(t.Rows, row(words.Clean(m.Name), words.HoursBetween(m.SuitedH*k, m.SuitedH*k, (m.SuitedH+m.UnknownH)*k), words.HoursNumber(m.UnknownH*k),
			words.HoursNumber(m.OutsideH*k), words.HoursNumber(typicalOf(c, m.Name)), words.Sentence(m.Words)+" Source: "+words.Clean(m.Source)+"."))
	}
	t.Foot = []string{"Measured hours " + b.span.Words + "; a typical year is a whole year. Outside validity: the method does not reach here, so these hours are neither suitable nor unsuitable. Headline in the typical year: by temperature and humidity alone."}
	return b.table(t)
}

func (b *builder) agreement(c *climate.Result) []block {
	if len(c.Agreement) == 0 {
		return nil
	}
	t := table{ID: "climate-agreement", Caption: "Share of the hours on which two ways say the same", Head: []column{col("Way")}, Small: true}
	for k := range c.Agreement {
		t.Head = append(t.Head, num(fmt.Sprint(k+1)))
	}
	least, first, second := 2.0, 0, 0
	for j := range c.Agreement {
		cells := []string{fmt.Sprintf("%d %s", j+1, words.Clean(c.Measured.Methods[j].Name))}
		for k, p := range c.Agreement[j] {
			if j == k {
				cells = append(cells, words.Dash)
				continue
			}
			cells = append(cells, words.Share(p.AgreeShare))
			if p.AgreeShare < least {
				least, first, second = p.AgreeShare, j, k
			}
		}
		t.Rows = append(t.Rows, row(cells...))
	}
	t.Foot = []string{"Of occupied hours that both ways know. Some agreement is chance, where most hours fall on one side."}
	out := []block{heading("Do the ways agree?")}
	if least <= 1 {
		out = append(out, text(fmt.Sprintf("Least alike are “%s” and “%s”: they say the same in %s of the hours both know.", words.Clean(c.Measured.Methods[first].Name), words.Clean(c.Measured.Methods[second].Name), words.Share(least))))
	}
	return append(out, b.table(t))
}

func (b *builder) settingsMoved(c *climate.Result) []block {
	if len(c.Sensitivity) == 0 {
		return nil
	}
	k := b.span.PerYear
	t := table{ID: "climate-sensitivity", Caption: "The headline with one setting moved at a time", Small: true,
		Head: []column{col("Setting"), num("In force"), num("Tried"), num("Suitable (h)"), num("Change (h)")}}
	most := 0
	for i, m := range c.Sensitivity {
		if math.Abs(m.ChangeH) > math.Abs(c.Sensitivity[most].ChangeH) {
			most = i
		}
		t.Rows = append(t.Rows, row(trimmed(words.Sentence(m.Words)), words.Clean(m.From), words.Clean(m.To), words.HoursNumber(m.SuitedH*k), signed(m.ChangeH*k)))
	}
	t.Foot = []string{"Hours of the average occupant " + b.span.Words + ". All other settings as in force; the steps are our choice. What is not logged is not tested and cannot move the answer."}
	m := c.Sensitivity[most]
	out := []block{heading("Which setting moves the answer most?"), text(fmt.Sprintf("%s, from %s to %s, moves the headline most: by %s %s.", trimmed(words.Sentence(m.Words)), words.Clean(m.From), words.Clean(m.To), words.Hours(math.Abs(m.ChangeH)*k), b.span.Words)), b.table(t)}
	if len(c.WaySensitivity) > 0 {
		out = append(out, b.table(b.waysMoved(c)))
	}
	return out
}

// waysMoved lists the other ways with their own settings moved.
func (b *builder) waysMoved(c *climate.Result) table {
	k := b.span.PerYear
	t := table{ID: "climate-ways-moved", Caption: "The other ways with one of their own settings moved at a time", Small: true,
		Head: []column{col("Way of counting"), col("Setting"), num("In force"), num("Tried"), num("Suitable (h)"), num("Change (h)")}}
	last := ""
	for _, m := range c.WaySensitivity {
		name := words.Clean(m.Way)
		if name == last {
			name = ""
		} else {
			last = name
		}
		t.Rows = append(t.Rows, row(name, trimmed(words.Sentence(m.Words)), words.Clean(m.From), words.Clean(m.To), words.HoursNumber(m.SuitedH*k), signed(m.ChangeH*k)))
	}
	t.Foot = []string{"As above; the published band shares its settings with the headline. The heat balance rests on gains and losses of the building that are assumed: where they move it much, find them out before its hours are quoted."}
	return t
}

// signed writes a change in hours with its sign.
func signed(h float64) string {
	if h >= 0.5 {
		return "+" + words.Number(h, 0)
	}
	return words.Number(h, 0)
}

// trimmed takes the full stop off a sentence that goes on.
func trimmed(s string) string {
	if n := len(s); n > 0 && s[n-1] == '.' {
		return s[:n-1]
	}
	return s
}

func (b *builder) heatBalance(c *climate.Result) []block {
	h := c.Balance
	t := table{ID: "climate-needs", Caption: "Occupied hours by what the heat balance asks of outdoor air", Small: true, Head: []column{col("Outdoor air"), num("As measured (h)"), num("Typical year (h)")}}
	need := func(o *climate.Offer, n climate.Need, k float64) string {
		if o == nil {
			return words.Dash
		}
		return words.HoursNumber(o.NeedH[n] * k)
	}
	for n := climate.Need(0); n < climate.NumNeeds; n++ {
		t.Rows = append(t.Rows, row(trimmed(words.Sentence(n.String())), need(c.Measured, n, b.span.PerYear), need(c.Typical, n, 1)))
	}
	t.Foot = []string{fmt.Sprintf("Gains %g W/m², losses %g W/(m² K), least %g and most %g air changes per hour, %s; set-points %g and %g °C; balance point %s.",
		h.GainsWm2, h.LossWm2K, h.MinAirChangePerH, h.MaxAirChangePerH, words.Clean(c.HeightNote), h.HeatingC, h.CoolingC, words.Unit(h.BalancePointC(), 1, "°C"))}
	out := []block{heading("How much air, and what the nights would do"), b.table(t)}
	for _, o := range []*climate.Offer{c.Measured, c.Typical} {
		if o == nil {
			continue
		}
		which := "As measured"
		if o == c.Typical {
			which = "In the typical year"
		}
		n := &o.Night
		s := which + ": "
		if !math.IsNaN(o.RequiredMedianPerH) {
			s += fmt.Sprintf("hours that more outdoor air would cool ask for %s air changes per hour in the middle, and one in ten for more than %s. ", words.Number(o.RequiredMedianPerH, 1), words.Number(o.Required90PerH, 1))
		}
		s += fmt.Sprintf("Nights offer %s each on average (differences of at least %g K; %d known, %d not)", words.Unit(n.CoolingPotentialKh, 0, "K·h"), n.CriticalK, n.Nights, n.UnknownNights)
		if !math.IsNaN(n.StorageWm2PerAirChange) {
			s += fmt.Sprintf(", and store %s for the day after per air change per hour at night", words.Unit(n.StorageWm2PerAirChange, 1, "W/m²"))
		}
		if n.ShortDays > 0 {
			s += fmt.Sprintf(". On %s outdoor air alone fell short by day; the night before could have carried %d of them through, if the mass of the building took up the cold", words.Plural(n.ShortDays, "day", "days"), n.CoveredDays)
		}
		out = append(out, text(s+"."))
	}
	out = append(out, b.table(b.nightMonths(c)))
	return append(out, note("Open windows at night need protection against falls, intruders, rain and insects, and must not defeat smoke control; local codes decide."))
}

// nightMonths lists what the nights offered, month by month.
func (b *builder) nightMonths(c *climate.Result) table {
	t := table{ID: "climate-nights", Caption: "Climatic cooling potential of the nights by month", Small: true,
		Head: []column{col("Month"), num("As measured (K·h per night)"), num("Typical year (K·h per night)")}}
	of := func(o *climate.Offer, m int) float64 {
		if o == nil {
			return math.NaN()
		}
		return o.Night.ByMonthKh[m]
	}
	for m := range 12 {
		measured, typical := of(c.Measured, m), of(c.Typical, m)
		if math.IsNaN(measured) && math.IsNaN(typical) {
			continue
		}
		t.Rows = append(t.Rows, row(time.Month(m+1).String(), words.Number(measured, 0), words.Number(typical, 0)))
	}
	t.Foot = []string{"Kelvin by which the night air is cooler than a building of 22 to 27 °C, summed from 19:00 to 07:00 (Artmann, Manz & Heiselberg 2007, from memory). With 6 air changes per hour and rooms 2.5 m high, 80 K·h carry off about 400 Wh/m². It counts the air alone: the building must have mass that the air can reach."}
	return t
}

func (b *builder) normalYear(c *climate.Result) []block {
	y := c.Year
	if y == nil {
		return nil
	}
	out := []block{heading("Was this a normal year?")}
	difference := y.MeasuredC - y.TypicalC
	compared := fmt.Sprintf("Outdoors it was %s on average against %s in the typical year (%s), and %s suited as measured against %s, by the same rule on the same hours.",
		words.Unit(y.MeasuredC, 1, "°C"), words.Unit(y.TypicalC, 1, "°C"), words.Clean(y.Name), words.Hours(y.MeasuredSuitedH), words.Hours(y.TypicalSuitedH))
	unusual := 0
	for _, m := range y.Months {
		if m.Verdict == climate.Warmer || m.Verdict == climate.Cooler {
			unusual++
		}
	}
	months := ""
	if unusual > 0 {
		months = fmt.Sprintf(" Single months differ more: %d of %d were warmer or cooler than usual.", unusual, len(y.Months))
	}
	switch {
	case !y.Known:
		out = append(out, text("Not known: less than half of the period has measured weather to compare."))
	case y.Normal:
		out = append(out, text("Yes, as a whole. "+compared+months))
	case y.Verdict == climate.AsUsual:
		out = append(out, text("By temperature yes, but not by suitable hours. "+compared+months))
	default:
		out = append(out, text(fmt.Sprintf("No: %s, by %s. ", y.Verdict, words.Unit(math.Abs(difference), 1, "K"))+compared+months+" Figures of another year would differ for that reason alone."))
	}
	t := table{ID: "climate-months", Caption: "Measured months against the typical year", Small: true,
		Head: []column{col("Month"), keep("Verdict"), num("Measured (°C)"), num("Typical (°C)"), num("Suitable, measured (h)"), num("Suitable, typical (h)"), num("Compared")}}
	for _, m := range y.Months {
		t.Rows = append(t.Rows, row(time.Month(m.Month).String(), m.Verdict.String(), words.Number(m.MeasuredC, 1), words.Number(m.TypicalC, 1),
			words.HoursNumber(m.MeasuredSuitedH), words.HoursNumber(m.TypicalSuitedH), words.Share(m.ShareKnown)))
	}
	t.Foot = []string{"Occupied hours of the average occupant in the period, without wind, rain and pollution. As usual: within 1.5 K for a month, within 1 K and 10 % of the suitable hours for a year; our assumption, since one typical year shows no spread between years."}
	return append(out, b.table(t))
}

// comfortFields draws where the hours lay outdoors and indoors.
func (b *builder) comfortFields(c *climate.Result) []block {
	one := func(id, title, caption string, f *climate.Fields, unit string) block {
		d := chart.ComfortFieldsData{Caption: chart.Caption{Title: title, Desc: "Hours by temperature and humidity, split by comfort indoors."}}
		edges := f.TempEdgesC
		d.Columns = []string{fmt.Sprintf("below %g °C", edges[0]), fmt.Sprintf("%g to %g °C", edges[0], edges[1]), fmt.Sprintf("above %g °C", edges[1])}
		for h := range f.HoursH {
			name := "humidity not known"
			switch n := len(f.HumidityEdges); {
			case h == 0 && n > 0:
				name = fmt.Sprintf("up to %g %s", f.HumidityEdges[0], unit)
			case h < n:
				name = fmt.Sprintf("%g to %g %s", f.HumidityEdges[h-1], f.HumidityEdges[h], unit)
			case h == n:
				name = fmt.Sprintf("above %g %s", f.HumidityEdges[n-1], unit)
			}
			if h > len(f.HumidityEdges) && fieldHours(f, h) == 0 {
				continue // humidity is always known
			}
			var fields []chart.FieldHours
			for t := range f.HoursH[h] {
				x, k := f.HoursH[h][t], b.span.PerYear
				fields = append(fields, chart.FieldHours{TooCool: x[climate.TooCool] * k, Comfortable: x[climate.Comfortable] * k, TooWarm: x[climate.TooWarm] * k, Unknown: x[climate.FeelUnknown] * k})
			}
			d.Rows, d.Hours = append(d.Rows, name), append(d.Hours, fields)
		}
		if f.UnknownH > 0 {
			caption += " " + words.Hours(f.UnknownH*b.span.PerYear) + " without a temperature are left out."
		}
		return b.draw(id, caption, "No occupied hour has a temperature to sort by.", func(o chart.Options) (chart.SVG, error) { return chart.ComfortFields(d, o) })
	}
	return []block{heading("Where the hours lay, and how comfortable they were"),
		one("fields-outdoors", "Occupied hours by outdoor air and comfort", "Occupied hours of the average occupant by outdoor temperature and dew point, split by comfort indoors, hours "+b.span.Words+".", &c.Outdoors, "°C"),
		one("fields-indoors", "Occupied hours by indoor air and comfort", "The same by indoor temperature and relative humidity.", &c.Indoors, "%")}
}

// fieldHours are all hours of one row of fields.
func fieldHours(f *climate.Fields, row int) float64 {
	sum := 0.0
	for t := range f.HoursH[row] {
		for _, h := range f.HoursH[row][t] {
			sum += h
		}
	}
	return sum
}
