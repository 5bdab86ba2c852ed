package configs

import (
	"fmt"
	"math"
	"path"
	"regexp"
	"strconv"
	"strings"
	"time"

	"sashlog/configs/site"
)

// pointColumns are the columns of a points table; the first four are needed.
var pointColumns = []string{"source", "column", "belongs_to", "quantity", "unit", "logging", "stamp", "hold",
	"open_value", "values", "placement", "share", "note"}

// readPoints reads one points table into the site.
func (b *builder) readPoints(file string, raw []byte) {
	t := openTable(file, raw, pointColumns, 4, &b.tables)
	if t == nil {
		return
	}
	s := b.out.Site
	width := 0
	for _, i := range t.columns {
		width = max(width, i+1)
	}
	seen := map[[2]string]int{}
	for i := range s.Points {
		seen[[2]string{s.Points[i].Source, s.Points[i].Column}] = s.Points[i].Line
	}
	first := len(s.Points)
	var rows []row
	for {
		r, ok := t.next()
		if !ok {
			break
		}
		r.tooLong(width)
		p := b.point(&r)
		key := [2]string{p.Source, p.Column}
		if line, twice := seen[key]; twice && p.Column != "" {
			r.at("column", "a logged column is one point", "column %q of %q is mapped twice, first on line %d", p.Column, p.Source, line)
		} else {
			seen[key] = p.Line
		}
		s.Points = append(s.Points, p)
		rows = append(rows, r)
	}
	if len(rows) == 0 && len(b.tables) == 0 {
		t.add(1, 1, "the table holds no points", "add a row for each logged column that is to be used")
	}
	b.shares(first, rows)
}

// point reads one row. What is wrong with it is reported; the point is
// returned as far as it goes.
func (b *builder) point(r *row) site.Point {
	p := site.Point{Source: r.cell("source"), Column: r.cell("column"), BelongsTo: r.cell("belongs_to"),
		Unit: r.cell("unit"), Note: r.cell("note"), Line: r.line, Index: -1, Share: math.NaN()}
	b.source(r, p.Source)
	if p.Column == "" {
		r.at("column", "the name of the logged column, or of the point in a long log", "column is empty")
	}
	owned := b.owner(r, &p)
	p.Quantity = site.Quantity(r.cell("quantity"))
	t, known := p.Quantity.Trait()
	if !known {
		r.at("quantity", didYouMean(string(p.Quantity), words(site.Quantities())), "unknown quantity %q", string(p.Quantity))
	}
	if known && owned && !p.Quantity.MayBelong(p.Owner) {
		r.at("belongs_to", ownerHint(p.Quantity), "%s (%s) cannot belong to %s", p.Quantity, t.Words, ownerWords(&p))
	}
	if known {
		c, err := site.Convert(p.Quantity, p.Unit)
		if err != nil {
			r.at("unit", onlyNearest(p.Unit, site.Units(p.Quantity)), "%s", err)
		}
		p.Conversion = c
	}
	p.Logging = cellWord(r, "logging", site.Sampled, site.Sampled, site.COV)
	p.Stamp = cellWord(r, "stamp", site.StampInstant, site.StampInstant, site.StampStart, site.StampEnd)
	if p.Logging == site.COV && p.Stamp != site.StampInstant {
		r.at("stamp", "leave it empty", "stamp is %q, but a change of value happens at an instant", string(p.Stamp))
	}
	p.Hold = hold(r)
	p.Placement = cellWord(r, "placement", site.PlacementUnknown, site.PlacementRoom, site.PlacementReturn, site.PlacementWindow)
	if known {
		b.states(r, &p, t)
		if p.Placement != "" && !p.Quantity.HasPlacement() {
			r.at("placement", "leave it empty", "placement says where a room sensor hangs; %s has none", p.Quantity)
		}
	}
	p.Share = share(r, p.Quantity, known)
	if known && owned && p.Owner == site.OwnerZone && (p.Quantity == site.Window || p.Quantity == site.WindowOpening) &&
		b.out.Site.Zones[p.Index].Openings.None() {
		r.at("quantity", "say openings: outdoors in the site file, or remove the point", "%s of zone %q, which the site file says has no openings", p.Quantity, p.BelongsTo)
	}
	return p
}

func cellWord[T ~string](r *row, column string, def T, allowed ...T) T {
	text := r.cell(column)
	if text == "" {
		return def
	}
	for _, a := range allowed {
		if strings.EqualFold(string(a), text) {
			return a
		}
	}
	r.at(column, onlyNearest(text, words(allowed)), "%s is %q: must be one of %s, or empty", column, text, list(words(allowed)))
	return def
}

// owner resolves what the point belongs to.
func (b *builder) owner(r *row, p *site.Point) bool {
	s := b.out.Site
	if p.BelongsTo == siteID {
		p.Owner, p.Index = site.OwnerSite, 0
		return true
	}
	if i := s.ZoneIndex(p.BelongsTo); i >= 0 {
		p.Owner, p.Index = site.OwnerZone, i
		return true
	}
	if i := s.PlantIndex(p.BelongsTo); i >= 0 {
		p.Owner, p.Index = site.OwnerPlant, i
		return true
	}
	if p.BelongsTo == "" {
		r.at("belongs_to", "the id of a zone or plant unit, or site", "belongs_to is empty")
		return false
	}
	ids := append(append([]string{siteID}, b.zoneIDs()...), b.plantIDs()...)
	r.at("belongs_to", didYouMean(p.BelongsTo, ids), "belongs_to is %q: no zone or plant unit has this id", p.BelongsTo)
	return false
}

func ownerWords(p *site.Point) string {
	if p.Owner == site.OwnerSite {
		return "the site"
	}
	return p.Owner.String() + fmt.Sprintf(" (%q)", p.BelongsTo)
}

func ownerHint(q site.Quantity) string {
	var to []string
	for _, o := range q.Owners() {
		to = append(to, o.String())
	}
	h := "it belongs to " + strings.Join(to, " or ")
	if q.IsWeather() {
		h += ": write site"
	}
	if q == site.ReturnAirTemp {
		h += "; a room's sensor in its return duct is air_temp with placement return_duct"
	}
	return h
}

var holdForm = regexp.MustCompile(`^(\d+h)?(\d+m)?(\d+s)?$`)

func hold(r *row) time.Duration {
	text := r.cell("hold")
	if text == "" {
		return 0
	}
	d, err := time.ParseDuration(strings.ToLower(strings.ReplaceAll(text, " ", "")))
	if err != nil || !holdForm.MatchString(strings.ToLower(strings.ReplaceAll(text, " ", ""))) {
		r.at("hold", "write 15m, 1h or 1h30m, or leave it empty", "hold is %q: not a length of time", text)
		return 0
	}
	if d <= 0 || d > 366*24*time.Hour {
		r.at("hold", "write 15m, 1h or 25h, or leave it empty", "hold is %q: must be above 0 and at most a year", text)
		return 0
	}
	return d
}

func share(r *row, q site.Quantity, known bool) float64 {
	text := r.cell("share")
	if text == "" {
		return math.NaN()
	}
	if known && !q.HasShare() {
		r.at("share", "leave it empty", "share is the part of the opening area a window stands for; %s has none", q)
		return math.NaN()
	}
	v, err := strconv.ParseFloat(strings.Replace(text, ",", ".", 1), 64)
	if err != nil || !(v > 0 && v <= 1) {
		r.at("share", "a quarter of the opening area is 0.25", "share is %q: must be above 0 and at most 1", text)
		return math.NaN()
	}
	return v
}

// source checks that a log can be meant: by its name, by the base name of one
// of its files, or by a pattern of either.
func (b *builder) source(r *row, source string) {
	if source == "" {
		r.at("source", "the name of a log in the site file, or of one of its files", "source is empty")
		return
	}
	if _, err := path.Match(source, ""); err != nil {
		r.at("source", "* and ? stand for any text and any character", "source is %q: not a valid pattern", source)
		return
	}
	var names []string
	for i := range b.out.Site.Logs {
		l := &b.out.Site.Logs[i]
		if sourceMeans(source, l) {
			return
		}
		names = append(names, l.Name)
	}
	if len(names) > 0 {
		r.at("source", didYouMean(source, names), "source is %q: no log of the site file has this name", source)
	}
}

// sourceMeans reports whether source may mean the log or one of its files. A
// folder or archive may hold any file.
func sourceMeans(source string, l *site.Log) bool {
	if l.Influx != nil {
		ok, err := path.Match(source, l.Name)
		return source == l.Name || err == nil && ok
	}
	p := strings.ReplaceAll(l.Path, `\`, "/")
	base := path.Base(p)
	ext := strings.ToLower(path.Ext(base))
	if source == l.Name || source == base || strings.HasSuffix(p, "/") || ext == "" || ext == ".zip" {
		return true
	}
	for _, pair := range [][2]string{{source, l.Name}, {source, base}, {base, source}, {strings.TrimSuffix(base, ".gz"), source}} {
		if ok, err := path.Match(pair[0], pair[1]); err == nil && ok {
			return true
		}
	}
	return false
}
