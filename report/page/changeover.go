package page

import (
	"fmt"
	"math"
	"strings"

	"sashlog/analyze/changeover"
	"sashlog/analyze/leaders"
	"sashlog/report/chart"
	"sashlog/report/words"
)

// changeover shows the limits the building behaves as if it had, how often it
// changes over, when a setting changed, and which rooms close the others.
func (b *builder) changeover() section {
	c := b.in.Results.Changeover
	if c == nil || len(c.Units)+len(c.Zones) == 0 {
		return section{}
	}
	s := section{ID: "changeover", Title: "How the building changes over"}
	s.Blocks = append(s.Blocks, text("These are not the settings on the controller's screen but what the building did: temperatures at which open mode ended or began again and again. "+
		"Where they differ from what is set, something else acts: another programme, a sensor, a habit."))
	s.Blocks = append(s.Blocks, b.changed(c)...)
	if len(c.Units) > 0 {
		s.Blocks = append(s.Blocks, b.limitTable(c), b.rhythmTable(c), b.seasonTable(c))
		s.Blocks = append(s.Blocks, b.curves(c)...)
	}
	s.Blocks = append(s.Blocks, b.delayTable(c))
	s.Blocks = append(s.Blocks, b.leaders()...)
	return s
}

// of names whose temperature a limit is, and how it is passed.
func (b *builder) of(l *changeover.Limit) string {
	who := "outdoors"
	if l.Zone >= 0 {
		who = "zone " + b.w.Zone(l.Zone)
	}
	if l.Above {
		return who + " above"
	}
	return who + " below"
}

func (b *builder) calendarDay(d int) string {
	days := b.in.Results.Calendar.Days
	return days[max(0, min(d, len(days)-1))].Date.Start(b.in.Grid.Loc).Format("2 January 2006")
}

// changed answers whether a setting changed.
func (b *builder) changed(c *changeover.Result) []block {
	list := c.Shifts()
	out := []block{heading("Did a setting change?")}
	if len(list) == 0 {
		return append(out, text(fmt.Sprintf("No change of behaviour stands out of chance in this period (%s looked at). A change of less than half a kelvin, one within the first or last eight telling days, or one of a limit seldom reached would not be seen.",
			words.Plural(c.Tried, "limit or start time", "limits and start times"))))
	}
	for _, x := range list {
		if x.Limit.Zone >= 0 && b.rule.Protected(x.Limit.Zone) {
			continue
		}
		if x.Shift.What == "start by the clock" {
			out = append(out, text(fmt.Sprintf("%s: starts by the clock changed on %s (between %s and %s): before on %s of the working days, after on %s.", b.w.Foreign(x.ID),
				b.calendarDay(x.Shift.Day), b.calendarDay(x.Shift.FromDay), b.calendarDay(x.Shift.ToDay), words.Share(x.Shift.Before), words.Share(x.Shift.After))))
			continue
		}
		way := "that ends open mode"
		if x.Limit.Opening {
			way = "that allows open mode again"
		}
		out = append(out, text(fmt.Sprintf("%s: the limit %s (%s) changed on %s (between %s and %s): from %s to %s °C. Chance alone does as much in %s of shuffled calendars.", b.w.Foreign(x.ID), way, b.of(&x.Limit),
			b.calendarDay(x.Shift.Day), b.calendarDay(x.Shift.FromDay), b.calendarDay(x.Shift.ToDay), words.Number(x.Shift.Before, 1), words.Number(x.Shift.After, 1), words.Share(x.Shift.P))))
	}
	return out
}

func (b *builder) limitTable(c *changeover.Result) block {
	t := table{ID: "changeover-limits", Caption: "Limits the plant units behave as if they had",
		Head: []column{col("Unit"), col("Open mode"), col("When"), num("Limit (°C)"), num("95 % interval (°C)"), num("Changes it explains")}}
	for i := range c.Units {
		u := &c.Units[i]
		shown := 0
		for _, l := range u.Limits() {
			if l.Undetermined != "" || (l.Zone >= 0 && b.rule.Protected(l.Zone)) {
				continue
			}
			way := "ends"
			if l.Opening {
				way = "cannot begin"
			}
			shown++
			t.Rows = append(t.Rows, row(b.w.Foreign(u.ID), way, b.of(&l), words.Number(l.LevelC, 1), words.Number(l.LowC, 1)+" to "+words.Number(l.HighC, 1),
				fmt.Sprintf("%.0f of %d", l.Changes, l.All)))
		}
		if shown == 0 {
			why := "no limit can be determined"
			if r := u.Closing.Refused; r != "" {
				why = r
			}
			t.Rows = append(t.Rows, row(b.w.Foreign(u.ID), words.Dash, why, words.Dash, words.Dash, words.Dash))
		}
	}
	t.Foot = []string{"Occupied hours, starts by the clock left out. A limit is given only where it explains six changes or more (or held off twenty openings), its interval is narrower than 3 K, and the unit hardly ever stayed off beyond it. " +
		"The same limit differs between ending and beginning by the controller's dead band. Where rooms call for cooling in the same weather, an upper limit for beginning reads some tenths low. Rooms' limits that belong to small rooms are not shown."}
	return b.table(t)
}

func (b *builder) rhythmTable(c *changeover.Result) block {
	t := table{ID: "changeover-rhythm", Caption: "How often plant units change over",
		Head: []column{col("Unit"), num("Changes per day"), num("Most in a day"), num("Off, typical (min)"), num("On, typical (min)"), num("On, short (min)"), num("Runs under 15 min"), keep("Off least / most on")}}
	names := []string{"Sun", "Mon", "Tue", "Wed", "Thu", "Fri", "Sat"}
	for i := range c.Units {
		u := &c.Units[i]
		least, most := -1, -1
		for d, v := range u.OpenShareWeekday {
			if math.IsNaN(v) {
				continue
			}
			if least < 0 || v < u.OpenShareWeekday[least] {
				least = d
			}
			if most < 0 || v > u.OpenShareWeekday[most] {
				most = d
			}
		}
		week := words.Dash
		if least >= 0 {
			week = fmt.Sprintf("%s %s / %s %s", names[least], words.Share(u.OpenShareWeekday[least]), names[most], words.Share(u.OpenShareWeekday[most]))
		}
		t.Rows = append(t.Rows, row(b.w.Foreign(u.ID), words.Number(u.SwitchesPerDay, 1), words.Number(u.SwitchesMost, 0), words.Number(u.Open.MedianMin, 0),
			words.Number(u.Closed.MedianMin, 0), words.Number(u.Closed.ShortMin, 0), fmt.Sprintf("%d of %d", u.Closed.UnderQuarterH, u.Closed.N), week))
	}
	t.Foot = []string{"Typical is the median, short the shortest tenth, of spells that both began and ended in occupied time. Many short runs wear plant and windows and annoy people: the dead band or the shortest run is then too small. The last column gives the weekdays on which the unit was off least and most, as shares of occupied time."}
	return b.table(t)
}

// seasonTable shows in which months the units stayed off.
func (b *builder) seasonTable(c *changeover.Result) block {
	t := table{ID: "changeover-season", Caption: "Share of occupied time the plant units were off, by month (%)", Head: []column{col("Unit")}}
	for _, m := range []string{"Jan", "Feb", "Mar", "Apr", "May", "Jun", "Jul", "Aug", "Sep", "Oct", "Nov", "Dec"} {
		t.Head = append(t.Head, num(m))
	}
	for i := range c.Units {
		cells := []string{b.w.Foreign(c.Units[i].ID)}
		for _, v := range c.Units[i].OpenShareMonth {
			if math.IsNaN(v) {
				cells = append(cells, words.Dash)
				continue
			}
			cells = append(cells, words.Number(100*v, 0))
		}
		t.Rows = append(t.Rows, row(cells...))
	}
	t.Foot = []string{"Of the occupied time in which the unit's state is known; " + words.Dash + ": none. Heating counts as running."}
	return b.table(t)
}

func (b *builder) delayTable(c *changeover.Result) block {
	t := table{ID: "changeover-delays", Caption: "How fast zones follow",
		Head: []column{col("Zone"), num("Weather begins to suit: open after (min)"), num("never"), num("Weather ceases to suit: closed after (min)"), num("never"), num("Plant stops: open after (min)"), num("never")}}
	minutes := func(d *changeover.Delay) string {
		switch {
		case d.N < 5:
			return words.Dash
		case math.IsInf(d.MedianMin, 1):
			return "mostly never"
		}
		return words.Number(d.MedianMin, 0)
	}
	never := func(d *changeover.Delay) string { return fmt.Sprintf("%d of %d", d.Never, d.N) }
	for i := range c.Zones {
		z := &c.Zones[i]
		if b.rule.Protected(z.Index) {
			continue
		}
		t.Rows = append(t.Rows, row(b.w.Zone(z.Index), minutes(&z.ToOpen), never(&z.ToOpen), minutes(&z.ToClose), never(&z.ToClose), minutes(&z.Released), never(&z.Released)))
	}
	t.Foot = []string{"Medians over occupied time; never: the occasion (suitable weather, plant off, or the occupied day) was over first. " + words.Dash + ": fewer than five occasions."}
	return b.table(t)
}

// curves draws the changeover curves of the units with outdoor limits.
func (b *builder) curves(c *changeover.Result) []block {
	var out []block
	perHour := 3600 / float64(b.in.Grid.StepS)
	for i := range c.Units {
		u := &c.Units[i]
		d := chart.ChangeoverCurveData{Caption: chart.Caption{Title: "Changeover of " + b.w.Foreign(u.ID) + " by outdoor temperature",
			Desc: "Share of open moments at which open mode ended within the hour, and of closed moments at which it began, by outdoor temperature, seen and by the fitted limits."}}
		within := func(p float64) float64 { return 100 * (1 - math.Pow(1-math.Min(1, p), perHour)) }
		points := func(list []changeover.CurvePoint) (seen, fitted []chart.XY) {
			for _, p := range list {
				x := (p.FromC + p.ToC) / 2
				if p.Moments >= int(perHour) {
					seen = append(seen, chart.XY{X: x, Y: within(float64(p.Changed) / float64(p.Moments))})
				}
				fitted = append(fitted, chart.XY{X: x, Y: within(p.Fitted)})
			}
			return
		}
		d.Closing, d.Closed = points(u.Closing.Curve)
		d.Opening, d.Opened = points(u.Opening.Curve)
		for _, l := range u.Limits() {
			if l.Zone >= 0 || l.Undetermined != "" {
				continue
			}
			label := "ends"
			if l.Opening {
				label = "begins"
			}
			d.Limits = append(d.Limits, chart.LimitBand{Value: l.LevelC, Low: l.LowC, High: l.HighC, Opening: l.Opening,
				Label: fmt.Sprintf("%s %s", label, words.Number(l.LevelC, 1)+" °C")})
		}
		if len(d.Limits) == 0 {
			continue
		}
		out = append(out, b.draw(fmt.Sprintf("changeover-%d", len(out)+1),
			"When "+b.w.Foreign(u.ID)+" changes over. Where the squares jump to the top, open mode does not last; where the discs lie on the floor, it is not allowed to begin. Upright lines are outdoor limits with their 95 % intervals; changes elsewhere are made by rooms' thermostats.",
			"No change of "+b.w.Foreign(u.ID)+" was seen.", func(o chart.Options) (chart.SVG, error) { return chart.ChangeoverCurve(d, o) }))
		if len(out) == 4 {
			break
		}
	}
	return out
}

// leaders shows whose thermostat starts the plant.
func (b *builder) leaders() []block {
	r := b.in.Results.Leaders
	if r == nil || len(r.Units) == 0 {
		return nil
	}
	out := []block{heading("Who closes the building")}
	if len(r.Leaders) == 0 {
		return append(out, text("No room's thermostat stands out as the one that starts a plant unit which serves several rooms."))
	}
	k := b.span.PerYear
	if n := fewest(r); n > 0 {
		e := r.Explained[n-1]
		out = append(out, text(fmt.Sprintf("%s explain %s of all missed hours of all rooms (95 %% interval %s to %s): the plant started when such a room passed its limit, and the other rooms it serves lost open mode with it. A cause here is a thermostat and where it hangs, not a person.",
			strings.ToUpper(words.Plural(n, "thermostat", "thermostats")[:1])+words.Plural(n, "thermostat", "thermostats")[1:], words.Share(e.Share.Value), words.Share(e.Share.Low), words.Share(e.Share.High))))
	}
	t := table{ID: "leaders", Caption: "Rooms whose thermostat starts the plant",
		Head: []column{col("Zone"), col("Unit"), num("Starts led"), num("Calls from (°C)"), num("Warmer than usual by (K)"), num("Others lost (h)"), num("at least to at most"), num("person-h"), num("If ignored: freed (h)"), num("own warm (h)"), num("If moved: freed (h)"), num("If two calls: freed (h)")}}
	for i := range r.Leaders {
		l := &r.Leaders[i]
		calls, excess := words.Number(l.LimitC, 1), words.Number(l.ExcessK.Value, 1)
		if b.rule.Protected(l.Zone) {
			calls, excess = words.Dash, words.Dash
		}
		warm := words.HoursNumber(l.Ignored.OwnWarmLowH*k) + " to " + words.HoursNumber(l.Ignored.OwnWarmHighH*k)
		t.Rows = append(t.Rows, row(b.w.Zone(l.Zone), b.w.Foreign(b.in.Site.Plant[l.Unit].ID), fmt.Sprint(l.Starts), calls, excess,
			words.HoursNumber(l.LostH*k), words.HoursNumber(l.AloneH*k)+" to "+words.HoursNumber(l.MostH*k), words.HoursNumber(l.LostPersonH*k),
			words.HoursNumber(l.Ignored.FreedH*k), warm, words.HoursNumber(l.Moved.FreedH*k), words.HoursNumber(l.TwoCalls.FreedH*k)))
	}
	t.Foot = []string{"Hours " + b.span.Words + ", summed over rooms. Warmer than usual: at the starts it led, against the same room at the same time of day in like weather without a start. " +
		"At least: hours in which nothing else asked for the plant; at most: all hours of the runs it started. Moved: the thermostat reads the mean of the unit's other rooms. Two calls: the plant starts only when two rooms call. " +
		"Own warm: hours the leading room would have been above its comfort limit; freed hours are at most those given, since rooms are warmer without cooling."}
	return append(out, b.table(t))
}

// fewest is how many leaders explain most of what all of them do.
func fewest(r *leaders.Result) int {
	if len(r.Explained) == 0 {
		return 0
	}
	all := r.Explained[len(r.Explained)-1].Share.Value
	for _, e := range r.Explained {
		if e.Share.Value >= 0.6*all {
			return e.N
		}
	}
	return len(r.Explained)
}
