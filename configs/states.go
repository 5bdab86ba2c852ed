package configs

import (
	"math"
	"strings"

	"sashlog/configs/site"
)

// states reads open_value and values: the words of a log and what they mean.
func (b *builder) states(r *row, p *site.Point, t site.Trait) {
	p.OpenValue = r.cell("open_value")
	text := r.cell("values")
	if p.OpenValue != "" && t.Kind != site.Switch {
		r.at("open_value", "leave it empty", "open_value is for things that are open or shut, on or off; %s is not", p.Quantity)
	}
	if text == "" {
		return
	}
	var allowed []string
	switch t.Kind {
	case site.Status:
		allowed = []string{"off", "on", "vent", "heat", "cool"}
	case site.Switch:
		allowed = []string{"open", "shut", "on", "off"}
	default:
		r.at("values", "leave it empty", "values says what the words of a state mean; %s is a number", p.Quantity)
		return
	}
	if p.OpenValue != "" {
		r.at("values", "keep values", "open_value and values are both given: they may contradict each other")
	}
	p.Values = map[string]string{}
	seen := map[string]bool{}
	for _, part := range strings.FieldsFunc(text, func(c rune) bool { return c == ';' || c == ',' || c == '|' }) {
		if strings.TrimSpace(part) == "" {
			continue
		}
		i := strings.LastIndexByte(part, '=')
		if i < 0 {
			r.at("values", "write for instance Run=on;Stop=off", "values holds %q without =", strings.TrimSpace(part))
			continue
		}
		from, to := strings.TrimSpace(part[:i]), strings.ToLower(strings.TrimSpace(part[i+1:]))
		low := strings.ToLower(from)
		switch {
		case from == "":
			r.at("values", "write for instance Run=on;Stop=off", "values holds %q: the word of the log is missing", strings.TrimSpace(part))
		case !contains(allowed, to):
			r.at("values", onlyNearest(to, allowed), "values says %q means %q: must be one of %s", from, to, list(allowed))
		case seen[low]:
			r.at("values", "case does not matter here", "values names %q twice", from)
		default:
			p.Values[from] = to
		}
		seen[low] = true
	}
}

// shares checks the shares of each zone's openings, by quantity.
func (b *builder) shares(first int, rows []row) {
	type group struct {
		index int
		q     site.Quantity
	}
	sum, given, all := map[group]float64{}, map[group]int{}, map[group]int{}
	s := b.out.Site
	for i := range s.Points {
		p := &s.Points[i]
		if p.Owner != site.OwnerZone || p.Index < 0 || !p.Quantity.HasShare() {
			continue
		}
		g := group{p.Index, p.Quantity}
		all[g]++
		if !math.IsNaN(p.Share) {
			given[g]++
			sum[g] += p.Share
		}
	}
	done := map[group]bool{}
	for i := len(s.Points) - 1; i >= first; i-- {
		p := &s.Points[i]
		g := group{p.Index, p.Quantity}
		if p.Owner != site.OwnerZone || p.Index < 0 || done[g] || given[g] == 0 {
			continue
		}
		done[g] = true
		r := &rows[i-first]
		if sum[g] > 1+1e-6 {
			r.at("share", "the shares of a zone add up to 1, or less when some openings have no contact",
				"the shares of %s in zone %q add up to %.4g: more than 1", p.Quantity, p.BelongsTo, sum[g])
		} else if given[g] < all[g] {
			r.at("share", "give a share to every one, or to none", "only %d of %d points %s of zone %q have a share", given[g], all[g], p.Quantity, p.BelongsTo)
		}
	}
}
