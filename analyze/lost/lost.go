// Package lost answers: which suitable hours were missed, and what were they
// lost to?
//
// Steps:
//
//  1. spells: runs of missed steps per zone, short interruptions bridged
//  2. patterns: what the whole period shows (starts by the clock, changeover
//     limits the zone behaves as if it had, openings never used, ...)
//  3. causes: every test says which steps of a spell it explains; the first that
//     explains at least half takes the spell (where only several together do,
//     the one that explains most), the others are contributing
//  4. sums: whole seconds per zone and cause, so that causes add up to the
//     missed hours exactly
package lost

// Cause is why an episode was missed.
type Cause uint8

// Causes, in the order they are tested: the first sufficient one takes the
// episode, the others are listed as contributing. What no setting of the plant
// could mend comes first (an opening nobody uses), then what is sure (a window
// open with the plant running), then what recurs, and the single occasion last.
const (
	Unexplained    Cause = iota
	NeverUsed            // the opening is never used
	NotInterlocked       // windows open with the plant running
	Overridden           // a manual override was on
	ClockStart           // the plant started by the clock
	LimitTooTight        // changeover limit tighter than the climate allows
	SlowToReopen
	LockedOut     // windows locked with nothing running
	BadThermostat // a thermostat that does not represent its space
	FewRoom       // few-room changeover
	ShortCycling
	NotOpened // windows by hand that nobody opened while nothing mechanical ran
	NumCauses
)

var causeWords = [NumCauses]string{"unexplained", "opening never used", "windows and plant not interlocked",
	"manual override", "plant started by the clock", "changeover limit tighter than the climate allows", "slow to reopen",
	"windows locked without need", "thermostat that does not represent its space", "few-room changeover", "short cycling", "windows not opened"}

func (c Cause) String() string { return causeWords[c] }

// Episode is a run of missed steps in one zone, short interruptions bridged.
type Episode struct {
	Zone                                            int
	FromStep, ToStep                                int     // half-open grid steps
	Hours                                           float64 // missed hours within
	Running                                         string  // the state most of it was spent in
	OutdoorTempC, IndoorTempC, ComfortHighC, CO2PPM float64 // means over the missed steps
	Cause                                           Cause
	Contributing                                    []Cause
	// Evidence is one sentence with numbers.
	Evidence        string
	People, PersonH float64 // NaN when the usual number is not given
	// Led is the zone whose start led a few-room changeover, -1 otherwise.
	Led int
	// Indoors: the limit that is too tight is one indoors.
	Indoors bool
}

// Result is all episodes and the hours by cause; causes sum to the missed
// hours (short ones included under the cause of their kind).
type Result struct {
	Episodes []Episode
	// ByCauseH[zone][cause] are missed hours; BuildingH are weighted like the
	// building's figures.
	ByCauseH  [][NumCauses]float64
	BuildingH [NumCauses]float64
	// Doc of each test in words, for the methods appendix.
	Tests []Test
	// ByCauseS are the same in whole seconds: they sum exactly.
	ByCauseS [][NumCauses]int64
	// AloneH are the hours only this cause explains, AnyH those it took or
	// contributes to: the least and the most mending it would bring.
	AloneH, AnyH [][NumCauses]float64
	// IndoorLimitH is the part of each zone's hours lost to a limit too tight
	// that is lost to one indoors.
	IndoorLimitH []float64
	// Units say which zones each plant unit (index as Site.Plant) follows.
	Units []UnitPattern
	// LedH[zone][leader] are the few-room hours of a zone by leading zone.
	LedH     []map[int]float64
	Patterns []Pattern
}

// Pattern is what the whole period shows of one zone.
type Pattern struct {
	Clock   ClockPattern
	Limit   LimitPattern
	Opening OpeningUse
}

// Test describes how one cause is recognised.
type Test struct {
	Cause    Cause
	Rule     string
	Standing string
}
