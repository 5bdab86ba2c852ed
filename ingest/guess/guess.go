// Package guess makes a proposal from a heap of exports that nobody described:
// how each file is written, which column is which quantity of which zone or
// plant unit, and what the data say about times, service and placement. Every
// guess carries its reason and its confidence; below [MapAt] a column is left
// open. The steps of [Scan], in the order of the files:
//
//  1. find.go: the files, and what each of them is
//  2. shape.go, column.go, group.go: layout, keys and values of each; files to logs
//  3. read.go, track.go, order.go: one pass over the rows, into a [Track] per column
//  4. word.go, lexicon.go, name.go: names to what they speak of
//  5. quantity.go, unit.go, fit.go, decide.go: names and values to a quantity
//  6. owner.go, place.go, keyplace.go, zone.go, odd.go: columns to zones, plant
//     units and the site
//  7. occupied.go, serves.go, placement.go: what the data propose
//  8. site.go, table.go, summary.go: the proposal as files and words
package guess

import (
	"context"

	"sashlog/configs/site"
)

// MapAt is the confidence from which a column is mapped; below it is left open
// for a person. Our choice: measured in the tests of this package, wrong
// guesses stay rare above it.
const MapAt = 0.6

// Options say where to look and where the site file will lie.
type Options struct {
	// Paths are files and folders; folders are searched with those below.
	Paths []string
	// Into is the folder of the site file; paths of logs are relative to it.
	Into string
	// SiteFile and PointsFile are the names the files will get; empty means
	// site.yaml and points.csv.
	SiteFile, PointsFile string
}

// Proposal is what a scan found and guesses.
type Proposal struct {
	Options Options
	Files   []FileNote
	Logs    []*Log
	// Tracks are all the logged columns met, in order of log and column.
	Tracks []*Track
	Zones  []Zone
	Plant  []Plant
	// Occupied are the proposed occupied times; empty when nothing speaks of
	// them. OccupiedWhy says what they were read from.
	Occupied    []site.Times
	OccupiedWhy string
	// OccupiedHint says in words what the logs show where it cannot be put into
	// local time.
	OccupiedHint string
	// Places and typical years that files name.
	Typical *TypicalYear

	seen map[string]bool // names of all files met
}

// FileNote says what became of one file.
type FileNote struct {
	Name string
	What string // in words
	Log  string // name of the log it went into, empty when none
}

// TypicalYear is a typical-year weather file and the place it names.
type TypicalYear struct {
	Path, Place                           string
	LatitudeDeg, LongitudeDeg, ElevationM float64
	Count                                 int // typical years met
}

// Guess is what a column is taken for.
type Guess struct {
	// Quantity is empty where the column is left open.
	Quantity site.Quantity
	// Likely is the best guess of an open column, if there is one.
	Likely     site.Quantity
	Unit       string
	UnitSure   bool
	Owner      string // id of zone or plant unit, "site", or empty
	OwnerKind  site.OwnerKind
	Logging    site.Logging
	Placement  site.Placement
	Values     string
	Confidence float64 // of the quantity
	OwnerConf  float64
	// Reasons in words, strongest first; Doubts are what could be wrong.
	Reasons, Doubts []string
}

// Mapped reports whether the column goes into the points table.
func (g *Guess) Mapped() bool { return g.Quantity != "" && g.Owner != "" }

// Zone is a proposed zone.
type Zone struct {
	ID, Floor string
	// People is the usual number, 0 when nothing speaks of it.
	People    int
	PeopleWhy string
	HasWindow bool
	Driven    bool // windows with positions or commands
	key       place
}

// Plant is a proposed plant unit.
type Plant struct {
	ID     string
	Serves []string
	Why    string
	// Sure is true when names say which zones it serves.
	Sure bool
}

// Scan looks at everything the options name. Only an ended context is an
// error; files that cannot be read are told among the notes.
func Scan(ctx context.Context, o Options) (*Proposal, error) {
	if o.SiteFile == "" {
		o.SiteFile = "site.yaml"
	}
	if o.PointsFile == "" {
		o.PointsFile = "points.csv"
	}
	p := &Proposal{Options: o}
	finds := p.find()
	p.seen = map[string]bool{}
	for _, f := range finds {
		p.seen[f.Name] = true
	}
	var shaped []*shape
	for _, f := range finds {
		if err := ctx.Err(); err != nil {
			return nil, err
		}
		shaped = append(shaped, p.look(ctx, f)...)
	}
	p.group(shaped)
	p.besideDates()
	for _, l := range p.Logs {
		if err := p.read(ctx, l); err != nil {
			return nil, err
		}
	}
	p.decide()
	p.own()
	p.proposeTimes()
	p.proposePeople()
	p.proposeServes()
	p.proposePlacement()
	return p, nil
}
