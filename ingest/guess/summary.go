package guess

import (
	"crypto/sha256"
	"encoding/hex"
	"fmt"
	"math"
	"strings"
	"time"

	"sashlog/configs/site"
	"sashlog/ingest/grid"
)

// Counts are how many columns were mapped and left open.
func (p *Proposal) Counts() (mapped, open int) {
	for _, t := range p.Tracks {
		if t.Mapped() {
			mapped++
		} else {
			open++
		}
	}
	return mapped, open
}

// listed is how many lines of one kind a summary shows.
const listed = 8

// Found says in a few lines what the scan found.
func (p *Proposal) Found() []string {
	mapped, open := p.Counts()
	out := []string{fmt.Sprintf("%s looked at, %s found; of %s %d are mapped and %d left open",
		count(len(p.Files), "file", "files"), count(len(p.Logs), "log", "logs"), count(mapped+open, "column", "columns"), mapped, open)}
	var ids []string
	for i := range p.Zones {
		ids = append(ids, p.Zones[i].ID)
	}
	if len(ids) > 0 {
		out = append(out, fmt.Sprintf("%s: %s", count(len(ids), "zone", "zones"), strings.Join(first(ids, 20), ", ")))
	}
	ids = nil
	for i := range p.Plant {
		ids = append(ids, p.Plant[i].ID)
	}
	if len(ids) > 0 {
		out = append(out, fmt.Sprintf("%s: %s", count(len(ids), "plant unit", "plant units"), strings.Join(first(ids, 20), ", ")))
	}
	if w := p.weatherWords(); w != "" {
		out = append(out, "weather: "+w)
	}
	for _, l := range p.Logs {
		if l.Setting.DateOrder != "" && l.DateProof != "" {
			out = append(out, fmt.Sprintf("dates of %s: %s", l.Name, l.DateProof))
		}
	}
	if len(p.Occupied) > 0 {
		t := p.Occupied[0]
		out = append(out, fmt.Sprintf("people seem to be there %s, %s to %s (from %s)", strings.Trim(dayWords(t.Days), "[]"), hhmm(t.FromMin), hhmm(t.ToMin), p.OccupiedWhy))
	}
	return out
}

func (p *Proposal) weatherWords() string {
	var out []string
	seen := map[site.Quantity]bool{}
	for _, t := range p.Tracks {
		if t.Mapped() && t.Quantity.IsWeather() && !seen[t.Quantity] {
			seen[t.Quantity] = true
			tr, _ := t.Quantity.Trait()
			out = append(out, tr.Words)
		}
	}
	return strings.Join(out, ", ")
}

// Uncertain lists the mapped columns that deserve a look, the least certain
// first, and the columns left open.
func (p *Proposal) Uncertain() (mapped, open []string) {
	for c := MapAt; c < 1.01; c += 0.05 {
		for _, t := range p.sorted(true) {
			conf := min(t.Confidence, t.OwnerConf)
			if conf < c && conf >= c-0.05 && (conf < 0.75 || len(t.Doubts) > 0) {
				why := t.Doubts
				if len(why) == 0 {
					why = t.Reasons
				}
				mapped = append(mapped, fmt.Sprintf("%s / %s taken for %s of %s, %.0f %% sure: %s", t.Source, t.Column, t.Quantity, t.Owner, 100*conf, strings.Join(why, "; ")))
			}
		}
	}
	for _, t := range p.sorted(false) {
		open = append(open, fmt.Sprintf("%s / %s %s", t.Source, t.Column, t.Note()))
	}
	return shorten(mapped), shorten(open)
}

func shorten(list []string) []string {
	if len(list) <= listed {
		return list
	}
	return append(list[:listed:listed], fmt.Sprintf("and %d more", len(list)-listed))
}

// Person lists what only a person can say.
func (p *Proposal) Person() []string {
	out := []string{"name and time zone of the site"}
	if p.Typical == nil {
		out = append(out, "its latitude, longitude and elevation")
	} else {
		out = append(out, "its latitude, longitude and elevation (those of the typical-year file stand in)")
	}
	for _, l := range p.Logs {
		switch {
		case l.Undated:
			out = append(out, fmt.Sprintf("the dates of %s, which holds times of day only", l.Name))
		case l.DateOpen:
			out = append(out, fmt.Sprintf("the order of day and month in %s: %s", l.Name, l.DateProof))
		}
	}
	switch {
	case len(p.Occupied) > 0:
	case p.OccupiedHint != "":
		out = append(out, "when people are there in local time: they seem to be there "+p.OccupiedHint)
	default:
		out = append(out, "when people are there: nothing in the logs says so")
	}
	var none []string
	for i := range p.Plant {
		if len(p.Plant[i].Serves) == 0 {
			none = append(none, p.Plant[i].ID)
		}
	}
	if len(none) > 0 {
		out = append(out, "which zones are served by "+strings.Join(first(none, 10), ", "))
	}
	if len(p.Plant) > len(none) {
		out = append(out, "whether the zones proposed for each plant unit are right, and what air the units bring")
	}
	windowless := 0
	for i := range p.Zones {
		if !p.Zones[i].HasWindow {
			windowless++
		}
	}
	if windowless > 0 {
		out = append(out, fmt.Sprintf("whether the %s without a window contact can be opened at all", count(windowless, "zone", "zones")))
	}
	if len(p.Zones) > 0 {
		out = append(out, "of each zone: floor area, height, people, the directions its openings face, where its sensors hang")
	}
	if unsaid := p.unsaidClocks(); len(unsaid) > 0 {
		out = append(out, "whether the clocks of "+strings.Join(first(unsaid, 6), ", ")+" follow daylight saving, and whether a value is stamped with the start or the end of its interval")
	}
	return out
}

func (p *Proposal) unsaidClocks() (out []string) {
	for _, l := range p.Logs {
		if l.ClockWhy == "" && !l.Undated {
			out = append(out, l.Name)
		}
	}
	return out
}

// Sketch returns the proposal as a site with a coarse grid, good for asking
// which points have readings when, and for nothing else: times are taken as
// written. Units whose zones are not known serve all that no other serves.
func (p *Proposal) Sketch() (*site.Site, *grid.Grid) {
	s := &site.Site{Location: time.UTC, StepS: binS, OutdoorCO2PPM: math.NaN(), LatitudeDeg: math.NaN(), LongitudeDeg: math.NaN(), ElevationM: math.NaN()}
	served := map[string]bool{}
	for _, z := range p.Zones {
		people := math.NaN()
		if z.People > 0 {
			people = float64(z.People)
		}
		s.Zones = append(s.Zones, site.Zone{ID: z.ID, Name: z.ID, AreaM2: math.NaN(), HeightM: math.NaN(), FanSpeedMS: math.NaN(), People: people, Openings: site.Openings{Outdoors: true}})
	}
	for _, u := range p.Plant {
		for _, z := range u.Serves {
			served[z] = true
		}
	}
	for _, u := range p.Plant {
		pl := site.Plant{ID: u.ID, Name: u.ID, Serves: u.Serves, RatedPowerKW: math.NaN()}
		if len(pl.Serves) == 0 {
			for _, z := range p.Zones {
				if !served[z.ID] {
					pl.Serves = append(pl.Serves, z.ID)
				}
			}
		}
		s.Plant = append(s.Plant, pl)
	}
	lo, hi := int64(math.MaxInt64), int64(math.MinInt64)
	for _, t := range p.Tracks {
		if t.Mapped() && t.bins.filled {
			lo, hi = min(lo, t.bins.from), max(hi, t.bins.from+int64(len(t.bins.mean)))
		}
	}
	if hi <= lo || hi-lo > 4*binsMax {
		lo, hi = 0, 1
	}
	g := &grid.Grid{StartUTC: lo * binS, StepS: binS, N: int(hi - lo), PeriodTo: int(hi - lo), Loc: time.UTC}
	for _, t := range p.Tracks {
		if !t.Mapped() {
			continue
		}
		index := 0
		switch t.OwnerKind {
		case site.OwnerZone:
			index = s.ZoneIndex(t.Owner)
		case site.OwnerPlant:
			index = s.PlantIndex(t.Owner)
		}
		s.Points = append(s.Points, site.Point{Source: t.Source, Column: t.Column, BelongsTo: t.Owner, Owner: t.OwnerKind, Index: index, Quantity: t.Quantity, Unit: t.Unit, Share: math.NaN()})
		c := grid.Column{}
		if t.bins.filled {
			c.Mean = make([]float32, g.N)
			for i := range c.Mean {
				c.Mean[i] = float32(t.bins.at(lo + int64(i)))
			}
		}
		g.Columns = append(g.Columns, c)
	}
	return s, g
}

// stampLead begins the last line of a proposed site file; the rest of the line
// is a checksum that shows whether a person has edited the proposal since.
const stampLead = "# as written by sashlog scan: "

// Stamp returns the line that ends a proposed site file.
func Stamp(siteText, pointsText []byte) string {
	h := sha256.New()
	h.Write(siteText)
	h.Write([]byte{0})
	h.Write(pointsText)
	return stampLead + hex.EncodeToString(h.Sum(nil)[:12]) + "\n"
}

// Untouched reports whether a site file and its points table stand as a scan
// wrote them.
func Untouched(siteText, pointsText []byte) bool {
	i := strings.LastIndex(string(siteText), stampLead)
	return i >= 0 && Stamp(siteText[:i], pointsText) == string(siteText[i:])
}
