package advice

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"sashlog/configs/site"
)

// between writes hours no finer than their bounds allow: 217.3 between 180 and
// 260 is "about 220 h (180 to 260 h)"; without bounds, two figures. The unit
// says whether hours of several zones were added up.
func between(h, low, high float64, unit string) string {
	step := 1.0
	if w := high - low; w > 0 {
		step = math.Pow(10, math.Floor(math.Log10(w/2)))
		if h > 0 { // wide bounds must not swallow the figure itself
			step = math.Min(step, math.Pow(10, math.Floor(math.Log10(h))))
		}
		step = math.Max(1, step)
	} else if h >= 100 {
		step = math.Pow(10, math.Floor(math.Log10(h))-1)
	}
	lo, hi := math.Floor(low/step+1e-9)*step, math.Ceil(high/step-1e-9)*step
	text := fmt.Sprintf("about %s %s", whole(math.Round(h/step)*step), unit)
	if math.Round(h/step) == 0 {
		text = fmt.Sprintf("under %s %s", whole(step), unit)
	}
	if hi-lo < step/2 || high-low < step/2 {
		return text
	}
	if unit == "h" {
		return fmt.Sprintf("%s (%s to %s h)", text, whole(lo), whole(hi))
	}
	return fmt.Sprintf("%s (%s to %s)", text, whole(lo), whole(hi))
}

// about writes hours to two figures.
func about(h float64) string { return between(h, h, h, "h") }

// unitOf is the unit of hours added up over zones.
func unitOf(zones []int) string {
	if len(zones) > 1 {
		return "zone-hours"
	}
	return "h"
}

// whole writes a number without decimals, with commas between thousands.
func whole(v float64) string {
	s := strconv.FormatFloat(math.Round(v), 'f', 0, 64)
	for i := len(s) - 3; i > 0; i -= 3 {
		s = s[:i] + "," + s[i:]
	}
	return s
}

func count(n int, one, many string) string {
	if n == 1 {
		return "1 " + one
	}
	return whole(float64(n)) + " " + many
}

func percent(share float64) string { return fmt.Sprintf("%.0f %%", share*100) }

// list joins names: "A", "A and B", "A, B and 3 more".
func list(names []string, most int) string {
	switch n := len(names); {
	case n == 0:
		return ""
	case n == 1:
		return names[0]
	case n <= most:
		return strings.Join(names[:n-1], ", ") + " and " + names[n-1]
	default:
		return fmt.Sprintf("%s and %d more", strings.Join(names[:most-1], ", "), n-most+1)
	}
}

func (a *adviser) names(zones []int) string {
	var out []string
	for _, z := range zones {
		out = append(out, a.Site.Zones[z].ID)
	}
	return list(out, 4)
}

// inZones is "in zone A" or "in zones A, B and 3 more".
func (a *adviser) inZones(zones []int) string {
	if len(zones) == 1 {
		return "in zone " + a.names(zones)
	}
	return "in zones " + a.names(zones)
}

// period is "in the 365 days audited".
func (a *adviser) period() string {
	days := int(math.Round(float64(a.Grid.PeriodTo-a.Grid.PeriodFrom) * a.Grid.StepH() / 24))
	if days <= 1 {
		return "in the day audited"
	}
	return fmt.Sprintf("in the %d days audited", days)
}

// servingIDs names the plant units that serve any of the zones.
func (a *adviser) servingIDs(zones []int) []string {
	var out []string
	for u := range a.Site.Plant {
		if a.servesAny(u, zones) {
			out = append(out, a.Site.Plant[u].ID)
		}
	}
	return out
}

func (a *adviser) servesAny(u int, zones []int) bool {
	for _, id := range a.Site.Plant[u].Serves {
		for _, z := range zones {
			if a.Site.Zones[z].ID == id {
				return true
			}
		}
	}
	return false
}

// plantWords is "plant unit AHU-1", "plant units A and B" or "the plant".
func (a *adviser) plantWords(zones []int) string {
	ids := a.servingIDs(zones)
	switch len(ids) {
	case 0:
		return "the plant"
	case 1:
		return "plant unit " + ids[0]
	}
	return "plant units " + list(ids, 4)
}

func capital(s string) string {
	if s == "" {
		return s
	}
	return strings.ToUpper(s[:1]) + s[1:]
}

// points lists at most eight points with readings of some quantities that
// belong to the zones, the units serving them, or the site.
func (a *adviser) points(zones []int, quantities ...site.Quantity) []string {
	var out []string
	for _, q := range quantities {
		for i := range a.Site.Points {
			p := &a.Site.Points[i]
			if p.Quantity != q || i >= len(a.Grid.Columns) || a.Grid.Columns[i].Mean == nil || len(out) == 8 {
				continue
			}
			of := p.Owner == site.OwnerSite || (p.Owner == site.OwnerPlant && p.Index < len(a.Site.Plant) && a.servesAny(p.Index, zones))
			if p.Owner == site.OwnerZone {
				for _, z := range zones {
					of = of || z == p.Index
				}
			}
			if of {
				out = append(out, p.ID())
			}
		}
	}
	return out
}

// confidence follows the width of the bounds and what stands behind them.
func confidence(s size, events, eventsForHigh int) string {
	width := s.high - s.low
	switch {
	case width <= 0.4*s.h && events >= eventsForHigh:
		return "high"
	case width <= 1.2*s.h && events >= 5:
		return "fair"
	}
	return "low"
}

// Cautions.
const (
	codes         = "local codes and licensed practice decide"
	windowCaution = "Before windows stand open more, check guards against falls, security, rain, smoke and noise; " + codes
	plantCaution  = "Keep frost protection, smoke control and the required minimum of outdoor air in force; " + codes
)

// Who normally does it.
const (
	controlsFirm = "controls contractor, on the facilities manager's order"
	manager      = "facilities manager"
	servicesFirm = "building services contractor, on the facilities manager's order"
)
