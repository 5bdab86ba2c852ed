//go:build tools

// Package influxd pins the database server that the tests of ingest/influx
// start. It is a module of its own so that the server's libraries stay out of
// the program's.
package influxd

import _ "github.com/influxdata/influxdb/cmd/influxd"
