// Package provenance says how an audit's outputs came about, for every output
// alike. Inputs and their hashes are in the ledger of readings.
package provenance

// Provenance is what identifies one audit beside its inputs.
type Provenance struct {
	Version string
	// Generated is the time of making as text, passed in: outputs have no clock.
	Generated string
	// Command is the command that made the outputs.
	Command string
	// CriteriaHash identifies the criteria in force, so that next year's audit
	// can be held to the same.
	CriteriaHash string
	// ConfigFiles are the site file, the points table and the diary.
	ConfigFiles []File
	// Settings are further settings in force, in the order to be shown.
	Settings []Setting
}

// File is one file with its SHA-256 in hexadecimal digits.
type File struct {
	Path   string
	SHA256 string
	Bytes  int64
}

// Setting is one setting in force.
type Setting struct{ Name, Value string }
