package page

import (
	"fmt"
	"math"

	"sashlog/analyze/longterm"
	"sashlog/report/words"
)

// longTerm shows who is worse off than the average, and the published
// long-term indices of every zone.
func (b *builder) longTerm(zones []int, foot string) []block {
	lt := b.in.Results.LongTerm
	if lt == nil {
		return nil
	}
	out := []block{heading("Does the average hide somebody?")}
	out = append(out, texts(b.hiddenWords(lt)...)...)
	out = append(out, heading("Long-term indices"),
		text("Researchers compare seasons by published indices. TM52 asks three things of warm hours (how many, how bad the worst day was, and how hot it ever got); a room that fails two of them overheats. The allowed deviation asks that no more than 3 % or 5 % of occupied time lie outside, in every day, week and month. The predicted percentage dissatisfied (PPD) estimates how many people would be unhappy; it is never below 5 %."))
	t := table{ID: "comfort-long-term", Caption: "Long-term indices of comfort over occupied time", Head: []column{col("Zone"),
		num("TM52 1: time 1 K or more too warm"), num("TM52 2: worst day (K·h)"), num("TM52 3: most (K)"), keep("TM52"),
		num("Days over 5 %"), num("Weeks over 5 %"), num("Mean PPD (%)"), num("Weighted warm (h)"), num("Weighted cool (h)")}}
	for _, z := range zones {
		if z >= len(lt.Zones) {
			continue
		}
		o := &lt.Zones[z]
		if o.KnownH == 0 {
			t.Rows = append(t.Rows, row(b.w.Zone(z), words.Dash, words.Dash, words.Dash, words.Dash, words.Dash, words.Dash, words.Dash, words.Dash, words.Dash))
			continue
		}
		verdict, share, worst, most := "not known", words.Dash, words.Dash, words.Dash
		if tm := &o.TM52; tm.AnythingJudged {
			verdict = "passes"
			if tm.Overheats {
				verdict = "overheats"
			}
			share, worst, most = words.Share(tm.ExceededShare), words.Number(tm.WorstDayKh, 0), words.Number(tm.MaxExcessK, 0)
		}
		t.Rows = append(t.Rows, row(b.w.Zone(z), share, worst, most, verdict, over(o.Deviations[longterm.Day]), over(o.Deviations[longterm.Week]),
			words.Number(o.MeanPPDPct, 0), words.HoursNumber(o.WeightedH.Warm*b.span.PerYear), words.HoursNumber(o.WeightedH.Cool*b.span.PerYear)))
	}
	season := "May to September"
	if lt.Southern {
		season = "November to March (our reading of a southern season)"
	}
	t.Foot = []string{"TM52 limits: 3 % of occupied time from " + season + ", 6 K·h on the worst day, 4 K at any time; only days with a running mean of 10 to 30 °C, where its limits end; written for buildings without cooling, so here a calculation only. " +
		"Weighted hours count more the further a zone is outside (ISO 7730 Annex H, method B), " + b.span.Words + ". Days and weeks: those with more than 5 % of known occupied time outside, of those at least half known. " +
		words.Dash + " not known."}
	if foot != "" {
		t.Foot = append(t.Foot, foot)
	}
	if !math.IsNaN(lt.RoomsWithin5) {
		t.Foot = append(t.Foot, fmt.Sprintf("Rooms within 3 %% over the whole period: %s; within 5 %%: %s (by %s).", words.Share(lt.RoomsWithin3), words.Share(lt.RoomsWithin5), lt.RoomsBy))
	}
	out = append(out, b.table(t), b.spans(lt, zones, foot))
	return append(out, b.homes(lt)...)
}

// spans shows how the time outside spreads over days, weeks, months and the
// whole period.
func (b *builder) spans(lt *longterm.Result, zones []int, foot string) block {
	t := table{ID: "comfort-deviation", Caption: "Allowed deviation: spans with more than 3 % and more than 5 % of occupied time outside", Small: true,
		Head: []column{col("Zone")}}
	for s := longterm.Day; s <= longterm.Period; s++ {
		name := map[longterm.Span]string{longterm.Day: "Days", longterm.Week: "Weeks", longterm.Month: "Months", longterm.Period: "Period"}[s]
		t.Head = append(t.Head, num(name+" over 3 % / 5 %"), num("worst"))
	}
	for _, z := range zones {
		if z >= len(lt.Zones) {
			continue
		}
		r := row(b.w.Zone(z))
		for _, d := range lt.Zones[z].Deviations {
			if d.Spans == 0 {
				r = append(r, cell{Text: words.Dash}, cell{Text: words.Dash})
				continue
			}
			r = append(r, cell{Text: words.Count(int64(d.Over3)) + "\u00a0/\u00a0" + words.Count(int64(d.Over5)) + " of " + words.Count(int64(d.Spans))}, cell{Text: words.Share(d.WorstShare)})
		}
		t.Rows = append(t.Rows, r)
	}
	t.Foot = []string{"Worst: the greatest share of known occupied time outside in one span. Spans less than half known do not count. EN 15251 Annex G (from memory) allows 3 % or 5 % in each span; CEN/TR 16798-2 keeps the idea."}
	if foot != "" {
		t.Foot = append(t.Foot, foot)
	}
	return b.table(t)
}

// homes shows TM59's criteria for the zones of homes, or why there are none.
func (b *builder) homes(lt *longterm.Result) []block {
	t := table{ID: "comfort-homes", Caption: "Overheating of homes (TM59)", Small: true, Head: []column{col("Zone"), keep("Criterion"),
		num("Time 1 K or more too warm, season"), num("Nights above 26 °C (h)"), num("Occupied above 26 °C (h)"), keep("Outcome")}}
	for _, z := range b.order {
		if z >= len(lt.Zones) || lt.Zones[z].Home.NotApplicable != "" {
			continue
		}
		o := &lt.Zones[z].Home
		which, nights, occupied := "a", words.Dash, words.Dash
		if o.NightH+o.NightUnknownH > 0 {
			which, nights = "a and b", words.HoursNumber(o.NightOver26H)+" of "+words.HoursNumber(o.NightH)
		}
		if o.Mechanical {
			which, occupied = "no opening", words.HoursNumber(o.Over26H)+" of "+words.HoursNumber(o.OccupiedH)
		}
		outcome := "not known"
		switch {
		case o.Known && o.Passes:
			outcome = "passes"
		case o.Known:
			outcome = "overheats"
		}
		t.Rows = append(t.Rows, row(b.w.Zone(z), which, words.Share(o.AShare), nights, occupied, outcome))
	}
	if len(t.Rows) == 0 {
		return []block{text("TM59, the criteria for homes, does not apply: the site file names no bedroom, living room or kitchen with a logged temperature.")}
	}
	t.Foot = []string{"a: at most 3 % of occupied time in the season 1 K or more above TM52's limit; b, bedrooms: at most 1 % of the hours from 22:00 to 07:00 above 26 °C (33 hours of a year fail); no opening: at most 3 % of occupied hours above 26 °C. Hours audited, not brought to a year."}
	return []block{b.table(t)}
}

func over(d longterm.Deviation) string {
	if d.Spans == 0 {
		return words.Dash
	}
	return words.Count(int64(d.Over5)) + " of " + words.Count(int64(d.Spans))
}

func (b *builder) hiddenWords(lt *longterm.Result) []string {
	s := &lt.Spread
	if s.KnownH == 0 {
		return []string{"Nobody's comfort is known, so it cannot be said whether an average hides anybody."}
	}
	k := b.span.PerYear
	all := fmt.Sprintf("Of all person-hours whose comfort is known, %s were too warm and %s too cool; together %s of them lay outside the limits, counting the unknown ones either way (%s).",
		words.Share(s.PersonWarmShare), words.Share(s.PersonCoolShare), words.ShareBetween(s.PersonOutsideShare.Value, s.PersonOutsideShare.Low, s.PersonOutsideShare.High), s.WeightedBy)
	if s.HiddenH == 0 {
		return []string{all, "Whenever the building's average was comfortable, fewer than one in five people were outside their limits: the average hides nobody for long."}
	}
	hidden := fmt.Sprintf("In %s %s the average temperature was comfortable while at least one in five people were not.", words.Hours(s.HiddenH*k), b.span.Words)
	var names []string
	for _, h := range s.Hidden {
		side := fmt.Sprintf("%s (%s too warm, %s too cool)", b.w.Zone(h.Zone), words.Hours(h.WarmH*k), words.Hours(h.CoolH*k))
		switch {
		case h.CoolH == 0:
			side = fmt.Sprintf("%s (%s too warm)", b.w.Zone(h.Zone), words.Hours(h.WarmH*k))
		case h.WarmH == 0:
			side = fmt.Sprintf("%s (%s too cool)", b.w.Zone(h.Zone), words.Hours(h.CoolH*k))
		}
		names = append(names, side)
	}
	return []string{all, hidden + " Outside most in those hours: " + words.List(names, 4) + "."}
}
