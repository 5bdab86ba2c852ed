// Package lost answers: which suitable hours were missed, and what were they
// lost to?
package lost

// Cause is why an episode was missed.
type Cause uint8

// Causes, in the order they are tested: the first sufficient one takes the
// episode, the others are listed as contributing.
const (
	Unexplained   Cause = iota
	ClockStart          // the plant started by the clock
	FewRoom             // few-room changeover
	LimitTooTight       // changeover limit tighter than the climate allows
	SlowToReopen
	NeverUsed      // the opening is never used
	NotOpened      // windows by hand that nobody opened while nothing mechanical ran
	NotInterlocked // windows open with the plant running
	NumCauses
)

var causeWords = [NumCauses]string{"unexplained", "plant started by the clock", "few-room changeover",
	"changeover limit tighter than the climate allows", "slow to reopen", "opening never used",
	"windows not opened", "windows and plant not interlocked"}

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
}

// Test describes how one cause is recognised.
type Test struct {
	Cause    Cause
	Rule     string
	Standing string
}
