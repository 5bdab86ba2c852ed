// Package running answers: when was each zone occupied, and what was it doing?
package running

// State is what a zone is doing in a step.
type State uint8

// Running states.
const (
	Unknown State = iota
	Open          // window open, plant off
	Mech          // window shut, plant on: "mechanical"
	Both          // window open and plant on: "windows open with heating / cooling / fan"
	Shut          // window shut, plant off
	NumStates
)

var stateNames = [NumStates]string{"unknown", "open", "mech", "both", "shut"}

// String returns the name used in tables.
func (s State) String() string { return stateNames[s] }

// Occupancy of a step.
type Occupancy uint8

// Occupancies.
const (
	Vacant Occupancy = iota
	Occupied
	OccupancyUnknown
)

// PlantUnknown marks a step whose plant state is not known in Zone.Plant;
// other values are site.PlantState codes.
const PlantUnknown uint8 = 255

// Zone is one zone on the grid; slices have one value per step.
type Zone struct {
	State    []State
	Occupied []Occupancy
	// Plant is the strongest plant evidence, PlantUnknown where missing.
	Plant []uint8
	// OpenShare is the area-weighted share open, NaN where unknown. AnyOpen is
	// true where a known opening is above the threshold, also when others are
	// unknown.
	OpenShare []float32
	// Rain-proof facts about the evidence.
	HasContacts, ServedByPlant, HasPlantEvidence, NoOpening bool
	// PeopleCanOpen: the zone's people can open windows themselves.
	PeopleCanOpen bool
	// OpenHoursAt is the answer's sensitivity to the threshold: occupied hours
	// in which the zone counts as open with any opening, 25 % and 50 %.
	OpenHoursAny, OpenHours25, OpenHours50 float64
	// ModeDisagreeH: occupied hours in which a logged mode signal disagrees
	// with the state; ModeH those with both known.
	ModeDisagreeH, ModeH float64
}

// Result is the answer for all zones (same index as Site.Zones).
type Result struct {
	Zones    []Zone
	Schedule string // in words: how occupied time was established
	// Weights are the zones' weights in the building's figures, summing to 1
	// over zones with openings; WeightedBy says by what.
	Weights    []float64
	WeightedBy string
	// Units is each plant unit's own state per step (index as Site.Plant), nil
	// where neither its status nor its air flow is logged; see UnitState.
	Units [][]uint8
}
