package leaders

// Why a unit started, where no room led it.
const (
	Unknown  = -1
	Outdoors = -2
	Clock    = -3
)

// Start is one start of a unit to cool or ventilate in occupied time.
type Start struct {
	Unit, FromStep, ToStep int
	// Led is the index of the leading zone, or one of the constants above.
	Led int
	// Followed are the other zones the unit serves that had not reached a limit.
	Followed []int
}

// Interval is a figure with its 95 % interval.
type Interval struct{ Value, Low, High float64 }

// Instead is what would have happened to the runs a room led.
type Instead struct {
	// FreedH are missed hours of the other rooms in which nothing else asked for
	// the run, summed over rooms; FreedPersonH the same times their people.
	FreedH, FreedPersonH float64
	// OwnWarmLowH and OwnWarmHighH bracket the occupied hours the leading room
	// would have been above its comfort limit, beyond those it was.
	OwnWarmLowH, OwnWarmHighH float64
	// Runs that would not have begun.
	RunsAvoided int
}

// Leader is a room whose thermostat starts a unit.
type Leader struct {
	Zone, Unit int
	LimitC     float64 // at which it starts the unit
	Starts     int
	// ExcessK: how much warmer the room was at the starts it led than at matched
	// moments; OthersExcessK the mean of the other rooms at the same starts.
	ExcessK, OthersExcessK Interval
	// LostH are missed hours of the other rooms during the runs it led, as long as
	// it went on calling or nothing else asked for them; AloneH the part with no
	// other reason to run (the least), MostH all of those runs. Person hours are NaN where people are not
	// given.
	LostH, LostPersonH, AloneH, MostH float64
	OwnLostH                          float64
	Ignored, Moved, TwoCalls          Instead
}

// Unit sums the starts of a unit up.
type Unit struct {
	ID                               string
	Starts, ByClock, ByOutdoors, Led int
	Unexplained                      int
}

// Explained is how much the first N leaders explain of all missed hours.
type Explained struct {
	N     int
	Share Interval
}

// Result is the answer for the building; leaders with most lost hours first.
type Result struct {
	Starts  []Start
	Leaders []Leader
	Units   []Unit
	// Explained[k] is for the first k+1 leaders.
	Explained []Explained
	MissedH   float64 // of all rooms
}
