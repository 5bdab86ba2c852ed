package advice

import (
	"strings"
	"testing"

	"sashlog/analyze/lost"
)

// Overrides, locks, misleading thermostats and short cycling have a finding with all its
// fields, sized by what the cause took.
func TestControlCauses(t *testing.T) {
	for _, c := range []lost.Cause{lost.Overridden, lost.LockedOut, lost.BadThermostat, lost.ShortCycling} {
		in := quiet()
		lose(&in, 0, c, 22, 4, -1)
		out := Advise(in)
		if len(out) != 1 {
			t.Errorf("%s: %d findings", c, len(out))
			continue
		}
		f := out[0]
		filled(t, f)
		if f.Hours != 22 || f.PersonH != 22*20 || f.Evidence.TypicalDay == "" || !strings.Contains(f.What, "22 h") {
			t.Errorf("%s: %v h, %v person-hours, typical day %q: %s", c, f.Hours, f.PersonH, f.Evidence.TypicalDay, f.What)
		}
		if low := strings.ToLower(f.Caution); !strings.Contains(low, "local codes and licensed practice decide") {
			t.Errorf("%s: the caution defers to nobody: %s", c, f.Caution)
		}
	}
}
