package words

import (
	"fmt"
	"math"

	"sashlog/analyze/compare"
)

// measure is how a measure reads in a sentence.
var measure = [compare.NumMeasures]struct{ Name, Short string }{
	compare.AchievedShare: {"the share of possible open hours that was reached", "open hours reached"},
	compare.OutsideShare:  {"the share of person-hours outside comfort", "outside comfort"},
	compare.StaleShare:    {"the share of occupied hours above the CO2 limit", "above the CO2 limit"},
	compare.ClashShare:    {"the share of occupied hours with windows open and plant running", "windows open with plant running"},
}

// MeasureName names what is compared.
func MeasureName(m compare.Measure) string { return capital(measure[m].Short) }

// Points writes a difference of shares in percentage points with its interval.
func Points(e compare.Estimate) string {
	if !known(e.Value) {
		return Dash
	}
	s := signed(e.Value)
	if known(e.Low) && known(e.High) {
		s += " (" + signed(e.Low) + " to " + signed(e.High) + ")"
	}
	return s
}

func signed(v float64) string {
	p := Number(math.Abs(v*100), 0)
	switch {
	case p == "0":
		return "0"
	case v < 0:
		return "−" + p
	}
	return "+" + p
}

// Compared answers in plain sentences whether the change worked, the main
// measure first.
func Compared(r *compare.Result) []string {
	if r.Unusable != "" {
		return []string{"Whether the change worked cannot be said: " + r.Unusable + "."}
	}
	var out []string
	for m := compare.Measure(0); m < compare.NumMeasures; m++ {
		o := &r.Outcomes[m]
		if o.Unusable != "" {
			out = append(out, capital(measure[m].Name)+" cannot be compared: "+o.Unusable+".")
			continue
		}
		was, is := Share(o.BeforeAdjusted), Share(o.AfterMatched)
		d := Points(o.Difference) + " percentage points"
		if len(r.Untouched) > 0 {
			d = Points(o.Difference) + " percentage points once the change of the untouched zones (" + Points(compare.Estimate{Value: o.Untouched.Value, Low: math.NaN(), High: math.NaN()}) + ") is taken off"
		}
		var t string
		switch o.Verdict {
		case compare.Better:
			t = fmt.Sprintf("%s got better: %s before, in weather like that after, and %s after; %s.", capital(measure[m].Name), was, is, d)
		case compare.Worse:
			t = fmt.Sprintf("%s got worse: %s before, in weather like that after, and %s after; %s.", capital(measure[m].Name), was, is, d)
		default:
			t = fmt.Sprintf("No change is shown in %s: %s before, in weather like that after, and %s after; %s, which may be chance.", measure[m].Name, was, is, d)
		}
		if known(o.ProbabilityBetter) && o.Verdict == compare.NotShown {
			t += " The chance that it got better is about " + Share(o.ProbabilityBetter) + "."
		}
		out = append(out, t)
	}
	return out
}

func capital(s string) string {
	if s == "" {
		return s
	}
	return string(s[0]-'a'+'A') + s[1:]
}
