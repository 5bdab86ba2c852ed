package main

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"unicode"

	"github.com/spf13/cobra"
	"github.com/vbauerster/mpb/v8"
	"github.com/vbauerster/mpb/v8/decor"

	"sashlog/configs"
	"sashlog/configs/site"
	"sashlog/ingest"
	"sashlog/ingest/influx"
)

func newLoad(p process) *cobra.Command {
	var into string
	cmd := &cobra.Command{
		Use:   "load SITE.yaml",
		Short: "write a site's file logs into its InfluxDB",
		Long: `load reads the file logs of a site, maps them as the points table says, and writes
the readings into the InfluxDB that the site file names under logs:

  - name: store
    influx: {address: "http://127.0.0.1:8086", organisation: house, bucket: building}

The token comes from the environment (SASHLOG_INFLUX_TOKEN, or the variable named
in token_env). Numbers are written in the canonical unit of their quantity, states
as numbers: 0 and 1, and 0 to 4 for off, on, vent, heat and cool of plant. Loading
again changes nothing; the server's counts are checked at the end.

Beside the site file it writes points-NAME.csv, the points table that reads the
readings back: name it under points in the site file to audit from the database.`,
		Example: `  sashlog load building/site.yaml
  sashlog load building/site.yaml --into-log store`,
		Args: oneSite,
		RunE: func(c *cobra.Command, args []string) error {
			quiet, _ := c.Flags().GetBool("quiet")
			return load(c.Context(), p, args[0], into, quiet)
		},
	}
	cmd.Flags().StringVar(&into, "into-log", "", "name of the log that is the database, when there are several")
	return cmd
}

func load(ctx context.Context, p process, siteFile, name string, quiet bool) error {
	loaded, err := configs.Load(siteFile, p.env)
	if err != nil {
		return err
	}
	log, err := database(loaded.Site, name)
	if err != nil {
		return fail(exitUsage, err)
	}
	bar := newProgress(p.stderr, quiet, p.env)
	if bar.container != nil {
		bar.bar = bar.container.AddBar(1, mpb.BarRemoveOnComplete(), mpb.PrependDecorators(decor.Name("writing "), decor.CountersNoUnit("%d of %d readings")),
			mpb.AppendDecorators(decor.AverageETA(decor.ET_STYLE_GO, decor.WCSyncSpace)))
	}
	done, err := ingest.Load(ctx, loaded.Site, log, bar.at)
	bar.end()
	var failed *influx.Failure
	switch {
	case errors.As(err, &failed):
		return fail(exitWrite, err)
	case errors.Is(err, ingest.ErrNoReadings):
		return fail(exitUsage, fmt.Errorf("no file log of the site has a mapped point; hint: load reads files, and points says where its columns belong"))
	case err != nil:
		return sourceFailure(err)
	}
	table := filepath.Join(filepath.Dir(siteFile), "points-"+fileName(log.Name)+".csv")
	var text bytes.Buffer
	if err := influx.WritePoints(&text, done.Files, log, done.Points); err != nil {
		return fail(exitWrite, err)
	}
	if err := replaceFile(table, text.Bytes()); err != nil {
		return fail(exitWrite, err)
	}
	fmt.Fprintln(p.stdout, table)
	if !quiet {
		for _, q := range done.Problems {
			fmt.Fprintln(p.stderr, printable(fmt.Sprintf("note: %s: %s", q.Where.File, q.Text)))
		}
		fmt.Fprintln(p.stderr, printable(loadWords(log, done)))
		fmt.Fprintln(p.stderr, printable(fmt.Sprintf("to audit from the database, write into %s: points: %s", filepath.Base(siteFile), filepath.Base(table))))
	}
	return nil
}

// database finds the log to write into.
func database(s *site.Site, name string) (*site.Log, error) {
	var found []string
	var log *site.Log
	for i := range s.Logs {
		if l := &s.Logs[i]; l.Influx != nil && (name == "" || l.Name == name) {
			found = append(found, l.Name)
			log = l
		}
	}
	switch {
	case len(found) == 1:
		return log, nil
	case len(found) > 1:
		return nil, fmt.Errorf("the site file names several databases: %s; hint: choose one with --into-log", strings.Join(found, ", "))
	case name != "":
		return nil, fmt.Errorf("no log called %q is an InfluxDB; hint: compare --into-log with the names under logs in the site file", name)
	}
	return nil, errors.New("the site file names no InfluxDB; hint: sashlog load --help shows the entry it needs under logs")
}

// loadWords is what was done, in a line.
func loadWords(log *site.Log, done *ingest.Loaded) string {
	var written, duplicates, conflicts, rejects int64
	for _, l := range done.Points {
		written += l.Written
		duplicates += l.Duplicates
		conflicts += l.Conflicts
		rejects += l.Rejects + l.Unfit
	}
	return fmt.Sprintf("%d readings of %d points are in %s (counted there); left out: %d duplicates, %d that contradict each other, %d cells that are no readings",
		written, len(done.Points), log.Influx.Address+"/"+log.Influx.Bucket, duplicates, conflicts, rejects)
}

// fileName keeps of a name what every file system takes.
func fileName(name string) string {
	return strings.Map(func(r rune) rune {
		if unicode.IsLetter(r) || unicode.IsDigit(r) || r == '-' || r == '_' {
			return r
		}
		return '_'
	}, name)
}

// replaceFile writes a file under a temporary name and renames it.
func replaceFile(path string, text []byte) error {
	f, err := os.CreateTemp(filepath.Dir(path), "."+filepath.Base(path)+"-*")
	if err != nil {
		return err
	}
	_, err = f.Write(text)
	err = errors.Join(err, f.Chmod(0o644), f.Close())
	if err == nil {
		err = os.Rename(f.Name(), path)
	}
	if err != nil {
		err = errors.Join(err, os.Remove(f.Name()))
	}
	return err
}
