package reading

import "sashlog/configs/site"

// Ledger counts what became of every cell.
type Ledger struct {
	Points []PointLedger
	Files  []FileLedger
	// Unmapped rows of long files, by the name they carried.
	Unmapped map[string]int64
	Issues   []Issue
	// IssuesDropped counts issues beyond the cap.
	IssuesDropped int64
	Checks        []Check
	Clock         []ClockNote
	// Clocks has one verdict per log.
	Clocks []ClockVerdict
}

// PointLedger is the account of one point (same index as Site.Points).
// RowsRead equals the sum over Counts.
type PointLedger struct {
	RowsRead          int64
	Counts            [NumReasons]int64 // Counts[Accepted] are the accepted readings
	FirstUTC, LastUTC int64             // of accepted readings; 0,0 when none
	Gaps              int
	LongestGapS       int64
	// IntervalS is the usual time between readings, 0 when unknown.
	IntervalS int64
	// HoldS is the hold limit in force.
	HoldS int64
	// Coverage is the covered share of the period's steps' time.
	Coverage float64
	// Examples holds the first few rejected texts, for messages.
	Examples []Issue
	// Min, Max, Mean of accepted readings in the canonical unit; NaN if none.
	Min, Max, Mean float64
	// Disordered is true when readings came out of time order and were sorted.
	Disordered bool
}

// Rejected returns the number of rejected cells.
func (p *PointLedger) Rejected() int64 { return p.RowsRead - p.Counts[Accepted] }

// FileLedger is the account of one input.
type FileLedger struct {
	Path   string // relative to the site file
	SHA256 string
	Bytes  int64
	Rows   int64
	// What was found out about it, in words: encoding, separator, date order
	// and its proof, time column.
	Dialect []string
}

// CheckKind names a check on readings, in the order they run.
type CheckKind string

// Checks.
const (
	CheckUnit          CheckKind = "unit mistaken"
	CheckClock         CheckKind = "clock"
	CheckRange         CheckKind = "out of range"
	CheckFrozen        CheckKind = "frozen"
	CheckSpike         CheckKind = "spike"
	CheckDuplicate     CheckKind = "duplicates"
	CheckOrder         CheckKind = "out of order"
	CheckGap           CheckKind = "gaps"
	CheckCO2Low        CheckKind = "CO2 below outdoor air"
	CheckCO2Drift      CheckKind = "CO2 baseline drifts"
	CheckNeverChanges  CheckKind = "contact never changes"
	CheckInverted      CheckKind = "contact looks inverted"
	CheckSuspectGroup  CheckKind = "contacts suspiciously alike"
	CheckChatter       CheckKind = "contact chatters"
	CheckPlantContra   CheckKind = "plant status contradicts supply air"
	CheckReturnDuct    CheckKind = "return-duct sensor, fan off"
	CheckHoliday       CheckKind = "looks like undeclared holidays"
	CheckDisagree      CheckKind = "sensors of one zone disagree"
	CheckDeclaredFault CheckKind = "declared fault"
)

// Effect says what a check did.
type Effect string

// Effects.
const (
	EffectWarned    Effect = "warned"
	EffectRemoved   Effect = "removed"
	EffectCorrected Effect = "corrected"
)

// Check is one verdict on one point (or several) with its evidence.
type Check struct {
	Kind   CheckKind
	Points []int // indexes into Site.Points
	Zone   int   // index into Site.Zones, -1 when none
	Effect Effect
	// FromUTC, ToUTC bound the time concerned, unix seconds, half-open; 0,0
	// means the whole record.
	FromUTC, ToUTC int64
	// Readings removed or corrected.
	Readings int64
	// Evidence is a sentence with numbers; DoNext says what to do.
	Evidence, DoNext string
}

// ClockNote reports what a source's clock met: skipped or repeated hours.
type ClockNote struct {
	File      string
	Text      string
	Skipped   int64 // readings in skipped local hours
	Repeated  int64 // readings in repeated hours that order resolved
	Ambiguous int64 // those it did not
}

// Title returns a name for a point that a reader recognises.
func Title(s *site.Site, point int) string {
	if point < 0 || point >= len(s.Points) {
		return ""
	}
	p := &s.Points[point]
	t, _ := p.Quantity.Trait()
	if p.Owner == site.OwnerSite {
		return t.Words
	}
	return p.BelongsTo + " " + t.Words
}

// RejectedShare is the share of rejected among all readings of the period.
// Empty cells and missing markers say that nothing was measured, readings
// outside the period were not asked for, and exports that overlap say the same
// twice: none of these counts.
func (l *Ledger) RejectedShare() float64 {
	var all, rejected int64
	for i := range l.Points {
		p := &l.Points[i]
		aside := p.Counts[Missing] + p.Counts[OutsidePeriod] + p.Counts[Duplicate]
		all += p.RowsRead - aside
		rejected += p.Rejected() - aside
	}
	if all <= 0 {
		return 0
	}
	return float64(rejected) / float64(all)
}

// ClockFound is what the check of a log's clock came to.
type ClockFound string

// What a check of a clock can come to.
const (
	ClockFits           ClockFound = "fits"
	ClockUntold         ClockFound = "cannot be told"
	ClockIgnoredSaving  ClockFound = "ignored daylight saving"
	ClockFollowedSaving ClockFound = "followed daylight saving"
	ClockOtherZone      ClockFound = "ran in another zone"
	ClockForATime       ClockFound = "wrong for a time"
	ClockDrifted        ClockFound = "drifted"
)

// ClockVerdict is what was found of the clock of one log, as it is read with
// the corrections of the site file.
type ClockVerdict struct {
	Log    string
	Points []int
	// Declared is the clock the site file gives, with its corrections.
	Declared string
	Verdict  ClockFound
	// ShiftMin is how many minutes the log runs ahead of the truth, negative
	// behind, NaN when nothing is wrong or known; a drift grows to EndShiftMin;
	// of a clock on a fixed offset they are the shift outside daylight saving
	// and within.
	ShiftMin, EndShiftMin float64
	// FromUTC, ToUTC bound the time concerned, unix seconds; 0, 0 without.
	FromUTC, ToUTC int64
	// HeldAgainst says what the log was compared with; Fit is the best
	// correlation at the shift found, FitWithout at none. Better of Days days
	// that can tell fit better with the shift.
	HeldAgainst     string
	Fit, FitWithout float64
	Better, Days    int
	// Sure findings take readings out where the clock is wrong by half an hour
	// or more.
	Sure bool
	// Evidence and DoNext are sentences; SiteFile is the line that corrects it.
	Evidence, DoNext, SiteFile string
}
