package changeover

// Limit is a temperature at which a unit or zone behaves as if it had a limit.
type Limit struct {
	// Opening: it must be passed before open mode begins; else passing it ends
	// open mode.
	Opening bool
	// Zone is the index of the zone whose temperature it is, -1 for outdoors.
	Zone int
	// Above: it is closed above the level, else below.
	Above bool
	// LevelC with its 95 % interval, NaN where it explains too little. BlurK is how blurred the edge is: from 12 %
	// to 88 % closed lie 4·BlurK.
	LevelC, LowC, HighC, BlurK float64
	// Changes the limit explains, of All seen.
	Changes float64
	All     int
	// HeldOff is the number of openings that would have been expected in its
	// place (openings only).
	HeldOff float64
	// Undetermined says why the level is not to be used, empty when it is.
	Undetermined string
	// Shift is the date at which the level changed, nil when none shows.
	Shift *Shift
}

// Direction is one way of changing over.
type Direction struct {
	Limits []Limit
	// Free is the share of steps that were open with no limit passed: after an
	// open step it stayed open, after a closed one it opened.
	Free float64
	// Changes seen, of Moments steps at which one was possible.
	Changes, Moments int
	// Refused says why nothing was fitted, empty when something was.
	Refused string
	// Curve is how often it changed over by outdoor temperature.
	Curve []CurvePoint
}

// CurvePoint is one bin of outdoor temperature: Changed of Moments, and what the
// model says for the same moments. Within is the time a change may take.
type CurvePoint struct {
	FromC, ToC       float64
	Moments, Changed int
	Fitted           float64 // share, by the model
}

// Spells sums up how long a state lasted in occupied time.
type Spells struct {
	N                            int
	MedianMin, ShortMin, LongMin float64 // median, 10 % and 90 % point
	UnderHalfHour, UnderQuarterH int
	CutShort                     int // by the end of occupied time or of knowledge; not counted
}

// Delay sums up how long something took; what never came before the occasion
// ended counts as later than all others.
type Delay struct {
	N, Never            int
	MedianMin, Slow90th float64 // +Inf: did not come
}

// Subject is a plant unit or a zone.
type Subject struct {
	ID string
	// Index into Site.Plant or Site.Zones.
	Index            int
	Closing, Opening Direction
	Open, Closed     Spells
	// Switches per occupied day: changes either way.
	SwitchesPerDay, SwitchesMost float64
	Days                         int // with known state for half the occupied time
	// OpenShareWeekday (Sunday first) and OpenShareMonth (January first) are the
	// shares of known occupied time that was open, NaN where never seen.
	OpenShareWeekday [7]float64
	OpenShareMonth   [12]float64
	// ToOpen is the delay from the weather beginning to suit to open mode, ToClose
	// from ceasing to suit to closed (zones only).
	ToOpen, ToClose Delay
	// Released is the delay from the unit's stop to the zone running open (zones
	// only).
	Released Delay
	// Clock is the change of a start by the clock, nil when none shows.
	Clock *Shift
}

// Limits lists both directions' limits.
func (s *Subject) Limits() []Limit {
	return append(append([]Limit(nil), s.Closing.Limits...), s.Opening.Limits...)
}

// Result is the answer for all plant units and all zones with an opening.
type Result struct {
	Units, Zones []Subject
	// Tried is the number of behaviours whose date of change was looked for.
	Tried int
}

// Shifts lists every change of behaviour found, with the subject it belongs to.
func (r *Result) Shifts() []SubjectShift {
	var out []SubjectShift
	for _, list := range [][]Subject{r.Units, r.Zones} {
		for i := range list {
			s := &list[i]
			for _, l := range s.Limits() {
				if l.Shift != nil {
					out = append(out, SubjectShift{s.ID, l, *l.Shift})
				}
			}
			if s.Clock != nil {
				out = append(out, SubjectShift{s.ID, Limit{Zone: -1}, *s.Clock})
			}
		}
	}
	return out
}

// SubjectShift is a change of behaviour and what it belongs to.
type SubjectShift struct {
	ID    string
	Limit Limit
	Shift Shift
}
