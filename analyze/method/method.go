// Package method carries a method's documentation as data, so that the report
// and the list of methods print from what the code itself declares.
package method

// Doc describes one method.
type Doc struct {
	// Title names the method with its standard or paper.
	Title string
	// Question is what it answers, in plain words.
	Question string
	// Formula is the working equation with its symbols and units.
	Formula string
	// Limits are the ranges and conditions it was made for, one each.
	Limits []string
	// Sources are the publications, each made by [Public], [Recomputed] or
	// [Memory] so that it says how well it is known here.
	Sources []string
	// Standing says how far to trust the implementation, one of the
	// constants below.
	Standing string
}

// Values of [Doc.Standing]. Standards are known here from public texts; none
// was checked against the purchased document.
const (
	// Published: equation and numbers read in a public text.
	Published = "published: read in a public text, not checked against the purchased standard"
	// FromMemory: part of the numbers is from memory.
	FromMemory = "from memory, to be checked against the standard"
	// OurAssumption: no publication says so.
	OurAssumption = "our assumption"
)

// Public marks a source that was read in a public text.
func Public(source string) string { return source + " (read in a public text)" }

// Recomputed marks a source whose published equations were recomputed and
// whose check values agree.
func Recomputed(source string) string {
	return source + " (read in a public text; check values recomputed and agree)"
}

// Memory marks a source that is from memory.
func Memory(source string) string {
	return source + " (from memory, to be checked against the standard)"
}
