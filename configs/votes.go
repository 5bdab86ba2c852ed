package configs

import (
	"math"
	"strconv"
	"strings"

	"sashlog/configs/site"
)

// voteColumns are the columns of the table of votes; time and zone are needed,
// and in every row at least one of the votes.
var voteColumns = []string{"time", "zone", "sensation", "acceptable", "preference", "complaint", "note"}

// sensationWords are the seven points of the thermal sensation scale of
// ISO 7730 and ASHRAE 55.
var sensationWords = map[string]float64{"cold": -3, "cool": -2, "slightly cool": -1, "neutral": 0, "slightly warm": 1, "warm": 2, "hot": 3}

var (
	yesWords = map[string]int8{"yes": 1, "y": 1, "1": 1, "true": 1, "acceptable": 1, "no": 0, "n": 0, "0": 0, "false": 0, "unacceptable": 0}
	// preferences follow the three-point scale in use with that question.
	preferences = map[string]int8{"cooler": -1, "-1": -1, "no change": 0, "0": 0, "warmer": 1, "1": 1}
	complaints  = []site.Complaint{site.TooWarmComplaint, site.TooCoolComplaint, site.StuffyComplaint, site.DraughtComplaint, site.NoiseComplaint, site.OtherComplaint}
)

// readVotes reads occupants' votes and complaints into the site. Times are
// local; a row stands for one person at one moment.
func (b *builder) readVotes(file string, raw []byte) {
	t := openTable(file, raw, voteColumns, 2, &b.tables)
	if t == nil {
		return
	}
	width := 0
	for _, i := range t.columns {
		width = max(width, i+1)
	}
	for {
		r, ok := t.next()
		if !ok {
			return
		}
		r.tooLong(width)
		v := site.Vote{Sensation: math.NaN(), Acceptable: site.NotAsked, Preference: site.NotAsked, Line: r.line}
		at, day, okT := b.moment(&r, "time", true)
		if okT && day {
			r.at("time", "write 2025-03-31 14:30", "time is %q: a day without a time", r.cell("time"))
		}
		v.UnixS = at.Unix()
		v.Zone = b.out.Site.ZoneIndex(r.cell("zone"))
		if v.Zone < 0 {
			r.at("zone", didYouMean(r.cell("zone"), b.zoneIDs()), "zone is %q: there is no such zone", r.cell("zone"))
		}
		asked := false
		if text := strings.ToLower(r.cell("sensation")); text != "" {
			asked = true
			if s, ok := sensation(text); ok {
				v.Sensation = s
			} else {
				r.at("sensation", "a number from -3 (cold) to 3 (hot), or one of cold, cool, slightly cool, neutral, slightly warm, warm, hot", "sensation is %q", r.cell("sensation"))
			}
		}
		if text := strings.ToLower(r.cell("acceptable")); text != "" {
			asked = true
			if v.Acceptable, ok = yesWords[text]; !ok {
				r.at("acceptable", "write yes or no", "acceptable is %q", r.cell("acceptable"))
			}
		}
		if text := strings.ToLower(r.cell("preference")); text != "" {
			asked = true
			if v.Preference, ok = preferences[text]; !ok {
				r.at("preference", "write cooler, no change or warmer", "preference is %q", r.cell("preference"))
			}
		}
		if text := strings.ToLower(r.cell("complaint")); text != "" {
			asked = true
			if v.Complaint = site.Complaint(text); !contains(words(complaints), text) {
				r.at("complaint", didYouMean(text, words(complaints)), "unknown complaint %q", r.cell("complaint"))
			}
		}
		if !asked {
			r.at("zone", "fill in at least one of sensation, acceptable, preference and complaint, or take the row out", "the row holds no vote")
		}
		b.out.Site.Votes = append(b.out.Site.Votes, v)
	}
}

func sensation(text string) (float64, bool) {
	if s, ok := sensationWords[text]; ok {
		return s, true
	}
	v, err := strconv.ParseFloat(strings.Replace(strings.Replace(text, ",", ".", 1), "\u2212", "-", 1), 64)
	return v, err == nil && v >= -3 && v <= 3
}
