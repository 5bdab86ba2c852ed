package ingest

import (
	"context"
	"errors"
	"path"
	"slices"

	"sashlog/configs/site"
	"sashlog/ingest/influx"
	"sashlog/ingest/sources"
)

// Loaded is what Load wrote into a database.
type Loaded struct {
	// Files is the site without its databases: what was written. Points of
	// the accounts index into its Points.
	Files    *site.Site
	Points   []influx.Loaded
	Problems []sources.Problem // of the files, none of them fatal
}

// Load writes the readings of the site's file logs into one of its databases,
// as they are after mapping and before any check. Errors are those of Read;
// an influx.Failure is the database's.
func Load(ctx context.Context, s *site.Site, into *site.Log, progress func(done, total int64)) (*Loaded, error) {
	out := &Loaded{Files: files(s)}
	set, err := sources.Open(ctx, out.Files)
	if err != nil {
		return nil, err
	}
	names := make([]string, len(set.Sources))
	for i, src := range set.Sources {
		names[i] = src.Name()
	}
	// What a file lacks must be known before anything is written.
	if err := failures(out.Files, set, make([]error, len(names)), names); err != nil {
		return nil, err
	}
	out.Problems = set.Problems
	if len(set.Sources) == 0 {
		return out, ErrNoReadings
	}
	out.Points, err = influx.Load(ctx, out.Files, into, set.Sources, progress)
	if read := (*influx.ReadError)(nil); errors.As(err, &read) {
		err = &UnreadError{Causes: []string{read.Err.Error()}}
	}
	return out, err
}

// files returns a copy of the site without its databases and their points.
func files(s *site.Site) *site.Site {
	c := sources.Own(s)
	var stores []string
	c.Logs = nil
	for _, l := range s.Logs {
		if l.Influx != nil {
			stores = append(stores, l.Name)
		} else {
			c.Logs = append(c.Logs, l)
		}
	}
	c.Points = slices.DeleteFunc(c.Points, func(p site.Point) bool {
		return slices.ContainsFunc(stores, func(name string) bool {
			ok, err := path.Match(p.Source, name)
			return p.Source == name || ok && err == nil && !fileMeant(c.Logs, p.Source)
		})
	})
	return c
}

// fileMeant reports whether a source pattern means a log of files too.
func fileMeant(logs []site.Log, source string) bool {
	return slices.ContainsFunc(logs, func(l site.Log) bool {
		ok, err := path.Match(source, l.Name)
		return ok && err == nil
	})
}
