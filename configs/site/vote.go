package site

// Vote is what one person said at one moment: a vote, a complaint, or both.
type Vote struct {
	UnixS int64
	Zone  int // index into Site.Zones
	// Sensation is on the seven-point scale, -3 cold to 3 hot, NaN when not
	// asked.
	Sensation float64
	// Acceptable is 0 or 1, Preference -1 cooler, 0 no change, 1 warmer; both
	// may be NotAsked.
	Acceptable, Preference int8
	Complaint              Complaint // empty when none
	Line                   int
}

// NotAsked stands where a vote was not given.
const NotAsked int8 = -128

// Complaint names what a complaint was about.
type Complaint string

// Kinds of complaint.
const (
	TooWarmComplaint Complaint = "too warm"
	TooCoolComplaint Complaint = "too cool"
	StuffyComplaint  Complaint = "stuffy"
	DraughtComplaint Complaint = "draught"
	NoiseComplaint   Complaint = "noise"
	OtherComplaint   Complaint = "other"
)
