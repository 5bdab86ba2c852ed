// Package influx reads logs kept in an InfluxDB (2.x, or 1.8 through its
// v2-compatible API) and writes a site's file logs into one.
//
// A reading is a field of a measurement; a tag says which point it belongs
// to. Reading goes month by month (universal time):
//
//  1. Open asks which series there are, since when and until when, and decides
//     for each point how it is read (series.go, decide.go).
//  2. Read asks how many readings each point has in each month and makes a
//     list of jobs (jobs.go).
//  3. Each job fetches its readings (raw.go, means.go). A job that fails is
//     tried again from its beginning, so that a server that was restarted
//     costs one job. Nothing is handed over before the answer is known to be
//     whole: the number of readings must be the one the server counted.
//  4. The readings are decoded like cells of a file and handed to the sink
//     (hand.go).
//
// # Means
//
// A point is read as means over the grid's steps, which the server computes,
// when that gives what its readings would give: a sampled number, logged at a
// fixed interval shorter than a step and dividing it. Then the time-weighted
// mean of a step is the plain mean of its readings, wherever none of them is
// missing, late or impossible. Where one is, and in the steps beside it, the
// readings themselves are fetched (windows.go); so the step means are those of
// the raw log to within the 1e-4 of the unit that readings are rounded to.
// Everything else (states, changes of value, directions, amounts of rain per
// interval, irregular times, intervals not below a step) is read as logged:
// there a mean of the server would weigh the readings wrongly, or save
// nothing.
package influx
