package words

import (
	"strings"

	"sashlog/analyze/hours"
)

// Summary is page one in about ten lines for the end of an audit on a
// terminal, with the same figures as page one.
func Summary(in Input) []string {
	f, b := FrontOf(in), in.Results.Summary.Building
	out := []string{in.Marked() + ", " + f.Period, f.Answer}
	for _, x := range f.Figures {
		if x.PerDay == Dash && x.PerYear == Dash {
			continue
		}
		line := x.Label + ": " + x.PerDay
		if x.PerYear != Dash {
			line += " per working day, " + x.PerYear + " " + x.Span
		}
		out = append(out, line)
	}
	if lost := LostTo(in); lost != "" && in.CanSay() == Full {
		out = append(out, "What could have been open was lost to, per working day: "+lost)
	}
	if b.H[hours.COccupied] > 0 && len(f.Worst) > 0 {
		var names []string
		for _, w := range f.Worst {
			names = append(names, w.Zone+" ("+w.People+")")
		}
		out = append(out, "Worst zones: "+List(names, 0))
	}
	for i, a := range f.First {
		out = append(out, Count(int64(i+1))+". "+strings.TrimSuffix(a.What, ".")+". Look: "+a.Look)
	}
	if len(f.Sure) > 0 {
		out = append(out, f.Sure[0])
	}
	out = append(out, "These figures support a judgement; they never certify compliance.")
	for i := range out {
		out[i] = strings.ReplaceAll(out[i], nbsp, " ")
	}
	return out
}
