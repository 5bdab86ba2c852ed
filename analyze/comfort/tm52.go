package comfort

import (
	"math"

	"sashlog/analyze/method"
)

// TM52Doc documents [TM52] and [TM59BedroomOK].
var TM52Doc = method.Doc{
	Title:    "Overheating criteria (CIBSE TM52:2013, TM59:2017)",
	Question: "Does a naturally ventilated zone overheat?",
	Formula: "T_max = 0.33 T_rm + 21.8 (category II; I +20.8, III +22.8); ΔT = T_op - T_max rounded to whole kelvin; " +
		"1: hours with ΔT ≥ 1 K from May to September ≤ 3 % of occupied hours; " +
		"2: daily Σ hours · ΔT (ΔT > 0) ≤ 6; 3: ΔT ≤ 4 K always; overheats when two of three fail",
	Limits: []string{
		"naturally ventilated hours; a screening for overheating, no comfort survey",
		"the season is May to September north of the equator; south of it November to March (our assumption)",
		"running mean between 10 and 30 °C, the range of EN 15251's lines (TM52 gives none of its own)",
		"with data missing, shares are of the occupied hours that could be judged",
		"TM59, bedrooms 22:00 to 07:00: above 26 °C for at most 1 % of the year's hours",
	},
	Sources: []string{
		method.Public("CIBSE TM52:2013 6.1.2; CIBSE Journal, August 2013"),
		method.Memory("halves round up"),
		method.Public("CIBSE TM59:2017, criteria a and b"),
	},
	Standing: method.Published,
}

// TM52MaxC returns T_max at a running mean outdoor temperature (EN, alpha 0.8);
// NaN for categories other than I to III. TM52 gives no limits of validity of
// its own; EN 15251's 10 to 30 °C are the caller's to apply.
func TM52MaxC(runningMeanC float64, c Category) float64 {
	if c < CategoryI || c > CategoryIII {
		return math.NaN()
	}
	return 0.33*runningMeanC + 20.8 + float64(c-CategoryI)
}

// TM52ExcessK returns T_op - T_max rounded to whole kelvin, halves upward.
func TM52ExcessK(operativeC, maxC float64) float64 {
	return math.Floor(round3(operativeC-maxC) + 0.5)
}

// TM52InSeason reports whether a month (1 to 12) counts for criterion 1.
func TM52InSeason(month int, southern bool) bool {
	if southern {
		return month >= 11 || month <= 3
	}
	return month >= 5 && month <= 9
}

// TM52 gathers the three criteria over occupied time. The zero value is ready.
// Feed it occupied steps in order of day with [TM52.Add].
type TM52 struct {
	seasonH, exceededH float64
	unknownH           float64
	day, worstDay      int
	dayKh, worstKh     float64
	maxExcessK         float64
	judged             bool
}

// Add counts an occupied step: a day number that never falls, whether the day
// is in the season, the step's occupied hours, operative temperature and
// T_max. A step with either temperature unknown counts as unknown only.
func (t *TM52) Add(day int, inSeason bool, occupiedH, operativeC, maxC float64) {
	excess := TM52ExcessK(operativeC, maxC)
	if math.IsNaN(excess) {
		t.unknownH += occupiedH
		return
	}
	if !t.judged || day != t.day {
		t.day, t.dayKh = day, 0
	}
	if !t.judged || excess > t.maxExcessK {
		t.maxExcessK = excess
	}
	t.judged = true
	if inSeason {
		t.seasonH += occupiedH
		if excess >= 1 {
			t.exceededH += occupiedH
		}
	}
	if excess > 0 {
		t.dayKh += occupiedH * excess
		if t.dayKh > t.worstKh {
			t.worstKh, t.worstDay = t.dayKh, day
		}
	}
}

// TM52Result is the outcome of the three criteria.
type TM52Result struct {
	SeasonH        float64 // occupied hours judged in the season
	ExceededH      float64 // of them with ΔT ≥ 1 K (H_e)
	ExceededShare  float64 // NaN without any
	WorstDayKh     float64 // greatest daily weighted exceedance (W_e)
	WorstDay       int     // its day number, meaningful when WorstDayKh > 0
	MaxExcessK     float64 // greatest rounded ΔT, NaN when nothing was judged
	UnknownH       float64 // occupied hours that could not be judged
	Fails          [3]bool // criteria 1, 2, 3
	Overheats      bool    // at least two fail
	AnythingJudged bool
}

// Result closes the account.
func (t *TM52) Result() TM52Result {
	r := TM52Result{
		SeasonH: t.seasonH, ExceededH: t.exceededH, ExceededShare: math.NaN(),
		WorstDayKh: t.worstKh, WorstDay: t.worstDay, MaxExcessK: math.NaN(),
		UnknownH: t.unknownH, AnythingJudged: t.judged,
	}
	if t.seasonH > 0 {
		r.ExceededShare = t.exceededH / t.seasonH
	}
	if t.judged {
		r.MaxExcessK = t.maxExcessK
	}
	// Steps of 5 min add up with rounding error: compare to 1e-6.
	r.Fails[0] = r.ExceededShare > 0.03+1e-9
	r.Fails[1] = r.WorstDayKh > 6+1e-6
	r.Fails[2] = r.MaxExcessK > 4
	fails := 0
	for _, f := range r.Fails {
		if f {
			fails++
		}
	}
	r.Overheats = fails >= 2
	return r
}

// TM59BedroomOK reports whether hours above 26 °C between 22:00 and 07:00 stay
// within 1 % of the year's hours in that window (nightH, 3285 for 365 nights).
// CIBSE TM59:2017 criterion b: of 3285 h, 32 pass and 33 fail.
func TM59BedroomOK(over26H, nightH float64) bool {
	return over26H <= 0.01*nightH
}
