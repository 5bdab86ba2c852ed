package page

import (
	"crypto/sha256"
	"embed"
	"encoding/base64"
	"encoding/json"
	"errors"
	"fmt"
	"html/template"
	"io/fs"
	"math"
	"slices"
	"strings"
	"time"

	"sashlog/analyze/hours"
	"sashlog/analyze/potential"
	"sashlog/configs/site"
	"sashlog/report/chart"
	"sashlog/report/daydata"
	"sashlog/report/words"
)

// scripts are the parts of the day browser and the picker, in the order they
// are put together; each begins with what it is for.
//
//go:embed look/*.js
var scripts embed.FS

var scriptOrder = []string{"unpack.js", "draw.js", "day.js", "words.js", "period.js", "tables.js", "start.js"}

// look is the part of the report that answers on a screen: choose a zone, a
// range of months and a day.
type look struct {
	// None says why there is none.
	None        string
	Zones       []string
	Months      []string
	LastMonth   int
	First, Last string // days
	StepWords   string
	Data        template.JS
	Script      template.JS
}

// lookData is what the script knows beside the packed days.
type lookData struct {
	*daydata.Data
	Outcomes []lookClass           `json:"outcomes"`
	Plant    []lookClass           `json:"plant"`
	Suits    []lookClass           `json:"suits"`
	Unknown  lookClass             `json:"unknown"`
	Keys     []string              `json:"total_keys"`
	Totals   [][][]int             `json:"totals"` // month, average occupant and zones, key: hundredths of hours
	Carpets  map[string]lookCarpet `json:"carpets"`
	Zone     int                   `json:"start_zone"`
	Day      int                   `json:"start_day"`
}

// lookClass is a class as the script draws it.
type lookClass struct {
	Label string `json:"label"`
	Fill  string `json:"fill"`
	Ink   string `json:"ink,omitempty"`
	Hatch string `json:"hatch,omitempty"`
}

// lookCarpet is a carpet of the report that answers to the pointer: its hours
// one letter each, from "A" in the order of Labels, day by day.
type lookCarpet struct {
	FirstDay string   `json:"first_day"`
	Days     int      `json:"days"`
	Hours    string   `json:"hours"`
	Labels   []string `json:"labels"`
}

var hatchNames = map[chart.Hatch]string{chart.Rising: "rising", chart.Falling: "falling", chart.Level: "level", chart.Upright: "upright", chart.Crossed: "crossed"}

func lookOf(c chart.Class) lookClass {
	l := c.Look()
	return lookClass{Label: l.Label, Fill: l.Hex(), Ink: l.InkHex(), Hatch: hatchNames[l.Hatch]}
}

// lookOutcomes are the outcomes by the number they are packed as.
func lookOutcomes() []chart.Class {
	return append([]chart.Class{chart.Unoccupied}, chart.Outcomes()...)
}

// plantLooks are the plant states by their code; their colours are those of
// what they do to a room.
var plantLooks = []lookClass{site.PlantOff: {Label: "off", Fill: "#ffffff"}, site.PlantOn: {Label: "on", Fill: "#7a7a7a"},
	site.PlantVent: {Label: "ventilating", Fill: "#4db596", Ink: "#3a3a3a", Hatch: "level"},
	site.PlantHeat: {Label: "heating", Fill: "#d55e00", Ink: "#3a3a3a", Hatch: "rising"},
	site.PlantCool: {Label: "cooling", Fill: "#56b4e9", Ink: "#3a3a3a", Hatch: "falling"}}

// suitLooks are the verdicts on the weather by their code.
func suitLooks() []lookClass {
	out := make([]lookClass, potential.NumSuits)
	for s := range out {
		out[s] = lookClass{Label: potential.Suit(s).String(), Fill: "#d4d4d4"}
	}
	out[potential.Suited] = lookClass{Label: "suitable", Fill: "#7db3d8"}
	out[potential.SuitUnknown] = lookClass{Label: "not known", Fill: "#ffffff", Ink: "#707070", Hatch: "rising"}
	return out
}

// look packs the days. A report that is only printed has none.
func (b *builder) look() (look, error) {
	if b.in.PrintOnly {
		return look{}, nil
	}
	number := map[chart.Class]int{}
	for k, c := range lookOutcomes() {
		number[c] = k
	}
	code := [hours.NumClasses]int{}
	for c := range code {
		code[c] = number[classLook[c]]
	}
	packed, err := daydata.Make(daydata.Input{Site: b.in.Site, Criteria: b.in.Criteria, Grid: b.in.Grid, Results: b.in.Results, Rule: b.rule,
		Outcome:  func(z, i int) int { return code[b.in.Results.Hours.Class[z][i]] },
		Outcomes: len(number), Label: b.w.Zone})
	if errors.Is(err, daydata.ErrTooMuch) {
		return look{None: words.Sentence(err.Error()) + " An audit of fewer months (--from, --to) has the day browser."}, nil
	}
	if err != nil {
		return look{}, err
	}
	d := lookData{Data: packed, Plant: plantLooks, Suits: suitLooks(), Unknown: lookOf(chart.Unknown), Carpets: b.carpets}
	var months []time.Time
	for _, m := range packed.Months[:len(packed.Months)-1] {
		months = append(months, time.Unix(packed.StartUTC+int64(m)*packed.StepS, 0).In(b.in.Grid.Loc))
	}
	for _, c := range lookOutcomes() {
		d.Outcomes = append(d.Outcomes, lookOf(c))
	}
	d.Keys, d.Totals = b.lookTotals(months)
	d.Zone, d.Day = b.lookStart(packed)
	text, err := json.Marshal(d)
	if err != nil {
		return look{}, fmt.Errorf("page: day data: %w", err)
	}
	script, err := script()
	if err != nil {
		return look{}, err
	}
	l := look{Data: template.JS(text), Script: template.JS(script), First: packed.FirstDay, StepWords: words.Plural(int(packed.StepS/60), "minute", "minutes")}
	for z := range packed.Zones {
		l.Zones = append(l.Zones, packed.Zones[z].Label)
	}
	for _, m := range months {
		l.Months = append(l.Months, m.Format("January 2006"))
	}
	l.LastMonth = len(l.Months) - 1
	first, err := time.Parse("2006-01-02", packed.FirstDay)
	l.Last = first.AddDate(0, 0, len(packed.Days)-2).Format("2006-01-02")
	return l, err
}

// script puts the parts together in one function of their own.
func script() (string, error) {
	var s strings.Builder
	s.WriteString("(() => {\n'use strict';\n")
	for _, name := range scriptOrder {
		part, err := fs.ReadFile(scripts, "look/"+name)
		if err != nil {
			return "", fmt.Errorf("page: %w", err)
		}
		s.Write(part)
	}
	s.WriteString("})();\n")
	return s.String(), nil
}

// lookUnknown stands for hours that nothing was logged to count.
const lookUnknown = -1

// lookTotals are the hours of each month: first of the average occupant, then
// of the zones.
func (b *builder) lookTotals(months []time.Time) (keys []string, totals [][][]int) {
	var cols [][]hours.Col
	for _, c := range lookOutcomes() {
		keys, cols = append(keys, c.Label()), append(cols, outcomeCols[c])
	}
	for _, c := range []struct {
		key string
		col hours.Col
	}{{"occupied", hours.COccupied}, {"suited", hours.CSuited}, {"over", hours.COver}, {"under", hours.CUnder}, {"co2_over", hours.CCO2Over}} {
		keys, cols = append(keys, c.key), append(cols, []hours.Col{c.col})
	}
	warmth, air := make([]bool, len(b.in.Site.Zones)), make([]bool, len(b.in.Site.Zones))
	for z := range b.in.Site.Zones {
		c := b.headline(z)
		warmth[z] = c != nil && c.AppliesH > 0
		air[z] = z < len(b.in.Results.Indoor) && b.in.Results.Indoor[z].CO2PPM != nil
	}
	of := func(t hours.Total, warmth, air bool) []int {
		out := make([]int, len(cols))
		for k, list := range cols {
			if !warmth && (keys[k] == "over" || keys[k] == "under") || !air && keys[k] == "co2_over" {
				out[k] = lookUnknown
				continue
			}
			sum := 0.0
			for _, c := range list {
				sum += t.H[c]
			}
			out[k] = int(math.Round(sum * 100))
		}
		return out
	}
	totals = make([][][]int, len(months))
	for m := range totals {
		var month hours.Month
		for _, have := range b.in.Results.Summary.Months {
			if have.Year == months[m].Year() && have.Month == int(months[m].Month()) {
				month = have
			}
		}
		totals[m] = append(totals[m], of(month.Building, slices.Contains(warmth, true), slices.Contains(air, true)))
		for z := range b.in.Site.Zones {
			var t hours.Total
			if z < len(month.Zones) {
				t = month.Zones[z]
			}
			totals[m] = append(totals[m], of(t, warmth[z], air[z]))
		}
	}
	return keys, totals
}

// keepCarpet keeps a carpet for the pointer.
func (b *builder) keepCarpet(id string, first time.Time, days [][24]chart.Class) {
	c := lookCarpet{FirstDay: first.Format("2006-01-02"), Days: len(days)}
	letter := map[chart.Class]byte{}
	var text []byte
	for _, day := range days {
		for _, class := range day {
			if _, ok := letter[class]; !ok {
				letter[class] = byte('A' + len(letter))
				c.Labels = append(c.Labels, class.Label())
			}
			text = append(text, letter[class])
		}
	}
	c.Hours = string(text)
	b.carpets[id] = c
}

// lookStart is the zone to begin with, the first in the order of the report
// that may be shown by day, and its day with most missed.
func (b *builder) lookStart(d *daydata.Data) (zone, day int) {
	zone = -1
	for _, z := range b.order {
		if !d.Zones[z].Protected {
			zone = z
			break
		}
	}
	if zone < 0 {
		return b.order[0], 0
	}
	rec, most := b.in.Results.Hours, -1
	for at, n := 0, 0; at+1 < len(d.Days); at++ {
		missed := 0
		end := d.StartUTC + int64(d.Days[at+1])*d.StepS
		for ; n < len(rec.Hours) && rec.Hours[n].StartUTC < end; n++ {
			missed += int(rec.Seconds[hours.CMissed][rec.Row(zone, n)])
		}
		if missed > most {
			most, day = missed, at
		}
	}
	return zone, day
}

// policy is the content security policy of a document whose style and script
// are those in it and whatever they are: nothing else may run, be styled or be
// fetched.
func policy(style, script string) string {
	p := "default-src 'none'; style-src " + digest(style) + "; img-src data:"
	if script != "" {
		p += "; script-src " + digest(script)
	}
	return p + "; base-uri 'none'; form-action 'none'"
}

func digest(text string) string {
	sum := sha256.Sum256([]byte(text))
	return "'sha256-" + base64.StdEncoding.EncodeToString(sum[:]) + "'"
}
