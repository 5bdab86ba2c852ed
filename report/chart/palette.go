package chart

import (
	"fmt"
	"image/color"
)

// Class names what a stretch of time was: the outcome of an occupied hour, a
// running state, or a side of a comfort limit. Its zero value draws nothing.
type Class uint8

// The outcomes of an hour, the running states and the sides of a limit.
const (
	None Class = iota // no value: nothing is drawn
	Unoccupied

	AchievedOK         // ran open, comfortable and fresh
	AchievedWarm       // ran open, too warm
	AchievedCool       // ran open, too cool
	AchievedStale      // ran open, short of fresh air
	AchievedUnassessed // ran open, comfort or air not measured
	Missed             // could have been open
	NotNeeded          // suited, not open, nothing wanted
	IllTimed           // open outside limits
	ClosedUnsuited     // closed, weather unsuitable
	NoOpening          // zone without opening to outdoors
	Unjudged           // cannot be assessed

	Open    // window open, plant off
	Mech    // window shut, plant on
	Both    // window open, plant on
	Shut    // window shut, plant off
	Unknown // running state unknown

	TooWarm
	TooCool

	Occupied // all occupied hours, as a total
	Suited   // all suited hours, as a total

	classCount
)

// Hatch is the second channel beside colour, for grey prints and for readers
// who cannot tell two colours apart.
type Hatch uint8

// The hatches, by the direction of their lines.
const (
	Solid   Hatch = iota
	Rising        // lines from bottom left to top right
	Falling       // lines from top left to bottom right
	Level         // horizontal lines
	Upright       // vertical lines
	Crossed       // rising and falling lines
)

// Look is how a class is drawn: its fill, the hatch laid over it in Ink, and
// its words for a legend.
type Look struct {
	Fill  color.RGBA
	Ink   color.RGBA
	Hatch Hatch
	Label string
}

// Hex gives the fill as a CSS colour, so that legends and tables in HTML use
// the colours of the figures.
func (l Look) Hex() string { return hex(l.Fill) }

// InkHex gives the hatch colour as a CSS colour.
func (l Look) InkHex() string { return hex(l.Ink) }

func hex(c color.RGBA) string { return fmt.Sprintf("#%02x%02x%02x", c.R, c.G, c.B) }

func rgb(v uint32) color.RGBA {
	return color.RGBA{R: uint8(v >> 16), G: uint8(v >> 8), B: uint8(v), A: 255}
}

// Label is the class in the words of the report.
func (c Class) Label() string { return c.Look().Label }

// Look returns the house style of the class. Hues are those of Okabe and Ito,
// "Color Universal Design" (2008), some lightened or darkened so that
// neighbours in a stack differ in luminance, and hours achieved from hours
// missed even in a grey print of the carpet; where they do not, a hatch tells them apart.
func (c Class) Look() Look {
	black := rgb(0x3A3A3A)
	switch c {
	case Unoccupied:
		return Look{rgb(0xFFFFFF), black, Solid, "not occupied"}
	case AchievedOK:
		return Look{rgb(0x00508A), black, Solid, "ran open, comfortable and fresh"}
	case AchievedWarm:
		return Look{rgb(0xE69F00), black, Rising, "ran open, too warm"}
	case AchievedCool:
		return Look{rgb(0x56B4E9), black, Falling, "ran open, too cool"}
	case AchievedStale:
		return Look{rgb(0xF0E442), black, Level, "ran open, stale"}
	case AchievedUnassessed:
		return Look{rgb(0xB5D8EE), rgb(0x0072B2), Upright, "ran open, not assessed"}
	case Missed:
		return Look{rgb(0xD55E00), black, Solid, "could have been open"}
	case NotNeeded:
		return Look{rgb(0x4DB596), black, Solid, "open mode not needed"}
	case IllTimed:
		return Look{rgb(0xCC79A7), black, Crossed, "open outside limits"}
	case ClosedUnsuited:
		return Look{rgb(0xD4D4D4), black, Solid, "closed, weather unsuitable"}
	case NoOpening:
		return Look{rgb(0xF1E3BF), rgb(0x8A7A50), Falling, "zone has no opening"}
	case Unjudged:
		return Look{rgb(0xFFFFFF), rgb(0x707070), Rising, "cannot be assessed"}
	case Open:
		return Look{rgb(0x00508A), black, Solid, "window open, plant off"}
	case Mech:
		return Look{rgb(0xE69F00), black, Solid, "mechanical"}
	case Both:
		return Look{rgb(0xCC79A7), black, Crossed, "windows open with plant running"}
	case Shut:
		return Look{rgb(0xCECECE), black, Solid, "window shut, plant off"}
	case Unknown:
		return Look{rgb(0xFFFFFF), rgb(0x707070), Rising, "unknown"}
	case TooWarm:
		return Look{rgb(0xD55E00), black, Solid, "too warm"}
	case TooCool:
		return Look{rgb(0x56B4E9), black, Solid, "too cool"}
	case Occupied:
		return Look{rgb(0xF3F3F3), black, Solid, "occupied"}
	case Suited:
		return Look{rgb(0xDCEBF3), black, Solid, "weather suitable"}
	}
	return Look{rgb(0xFFFFFF), black, Solid, "no value"}
}

// Outcomes lists the outcome classes in the order in which figures stack them.
func Outcomes() []Class {
	return []Class{AchievedOK, AchievedWarm, AchievedCool, AchievedStale, AchievedUnassessed,
		Missed, NotNeeded, IllTimed, ClosedUnsuited, NoOpening, Unjudged}
}

// RunningStates lists the running states in the order in which figures stack them.
func RunningStates() []Class { return []Class{Open, Mech, Both, Shut, Unknown} }

// The greys of axes, grids and text.
var (
	inkText   = rgb(0x262626)
	inkAxis   = rgb(0x808080)
	inkGrid   = rgb(0xDEDEDE)
	inkFaint  = rgb(0x5C5C5C)
	inkBand   = rgb(0xE3EEF5)
	inkShade  = color.NRGBA{R: 0xD5, G: 0x5E, A: 46} // lies over the comfort band
	inkIndoor = rgb(0xB34700)
	inkOutdor = rgb(0x0072B2)
)
