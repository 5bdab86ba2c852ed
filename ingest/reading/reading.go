// Package reading holds what readers of logs yield: readings, rejects and the
// ledger that counts both. Every row a reader meets ends up accepted or
// rejected with a reason.
package reading

import (
	"context"
	"math"
)

// Reason is why a reading was rejected.
type Reason uint8

// Reasons, in the order the ledger prints them.
const (
	Accepted      Reason = iota
	Missing              // empty or a missing marker
	NotNumber            // text where a number belongs
	UnknownWord          // status text the mapping does not know
	BadTime              // a timestamp that cannot be read
	SkippedHour          // local time that daylight saving skipped
	AmbiguousHour        // repeated local hour that the file's order does not resolve
	OutsidePeriod        // before the weather lead-in or after the period
	Duplicate            // same point, same instant, same value as another
	Conflict             // same point, same instant, different values
	OutOfRange           // physically impossible in the stated unit
	Spike                // a single reading far from both neighbours
	Frozen               // unchanging where the quantity always moves
	ClockDoubt           // the logger's clock is wrong and not yet corrected
	Inverted             // a contact wired the wrong way round, not yet declared
	StillAir             // a return-duct sensor while the fan is off
	Drifted              // a baseline too far from outdoor air
	DeclaredFault        // the diary says not to use it
	Truncated            // a row shorter than its header
	Unmapped             // a long-format row of a point nobody mapped
	NumReasons
)

var reasonWords = [NumReasons]string{
	"accepted", "missing", "not a number", "unknown word", "unreadable time", "skipped local hour",
	"ambiguous hour", "outside the period", "duplicate", "conflicting values", "out of range", "spike",
	"frozen", "clock doubtful", "contact inverted", "still air in the duct", "drifted baseline",
	"declared fault", "short row", "not mapped",
}

func (r Reason) String() string {
	if r < NumReasons {
		return reasonWords[r]
	}
	return "unknown reason"
}

// Where is a place in a source: 1-based line (or row) and byte column, 0 when
// not applicable.
type Where struct {
	File string
	Line int64
	Col  int
}

// Issue is a message about a source that is shown to the user; it never ends
// the run. Text quotes foreign text with %q.
type Issue struct {
	Where Where
	Point int // index into Site.Points, -1 when none
	Text  string
	Hint  string
}

// Sink takes what a reader yields. Point indexes Site.Points. A sink is not
// safe for concurrent use unless its maker says so.
type Sink interface {
	// Reading hands over one value in the point's canonical unit (Switch: 0 or
	// 1; Status: a site.PlantState code) at an instant in unix seconds.
	Reading(point int, unixS int64, value float64)
	// Reject counts one cell that was not a reading. The line is for the
	// first few examples only.
	Reject(point int, r Reason, at Where, text string)
	// Issue reports something about the source as a whole.
	Issue(Issue)
}

// Gapper is a sink that can be told when a point fell silent: a record at an
// instant says that there is no value (a missing marker, a word nobody knows),
// so the value before it does not hold beyond that instant.
type Gapper interface{ Gap(point int, unixS int64) }

// BlockRows is how many rows a block takes. It is odd, so that the places of one
// row, a column apart, do not fall on each other in the processor's cache.
const BlockRows = 63

// Block holds rows of a wide log column by column: what several points said at
// the same instants.
type Block struct {
	// Points are indexes into Site.Points, each once.
	Points []int
	// UnixS are the instants of the rows, in the order met.
	UnixS []int64
	// Values has BlockRows places per point, in the order of Points: a value, NaN
	// where the point fell silent, or Nothing.
	Values []float64
}

// Nothing stands in a block where a row holds no reading of the point: it was
// rejected, or nothing was written. No reading has this value.
var Nothing = math.Inf(-1)

// NewBlock returns an empty block for points that are all different.
func NewBlock(points []int) *Block {
	return &Block{Points: points, UnixS: make([]int64, 0, BlockRows), Values: make([]float64, BlockRows*len(points))}
}

// Column is what point i of Points said, row by row.
func (b *Block) Column(i int) []float64 { return b.Values[i*BlockRows:][:len(b.UnixS)] }

// Blocker is a sink that takes whole blocks, which costs less than reading by
// reading. It may keep the block and returns an empty one for the same points.
type Blocker interface{ Block(*Block) *Block }

// Source is one file or database query that yields readings.
type Source interface {
	// Name is shown in messages: a path relative to the site file.
	Name() string
	// Points are the indexes this source may yield.
	Points() []int
	// Read yields everything to the sink in the order met. Bad rows are
	// rejected; only failures of input or output are errors.
	Read(ctx context.Context, to Sink) error
}
