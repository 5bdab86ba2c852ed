package main

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"os"
	"path/filepath"

	"github.com/spf13/cobra"

	"sashlog/ingest/demo"
)

func newDemo(p process) *cobra.Command {
	var into string
	var seed uint64
	cmd := &cobra.Command{
		Use:   "demo",
		Short: "write an invented building's logs and audit them",
		Long: `demo simulates a year of an invented mixed-mode building in an invented place,
writes its logs, site file and weather the way real exports look (faults
included), and audits them. It needs nothing but this program. The folder is a
good model for a site file of your own.`,
		Example: `  sashlog demo
  sashlog demo --into somewhere --seed 7`,
		Args: noArguments,
		RunE: func(c *cobra.Command, _ []string) error {
			quiet, _ := c.Flags().GetBool("quiet")
			if !quiet {
				fmt.Fprintf(p.stderr, "inventing a building and a year of its logs in %s (nothing in it is real)\n", printable(into))
			}
			options := demo.Defaults()
			options.Seed = seed
			if err := writeDemo(c.Context(), into, options); err != nil {
				return err
			}
			job := auditJob{siteFile: filepath.Join(into, "site.yaml"), into: filepath.Join(into, "sashlog-report"), quiet: quiet, paper: "A4",
				command: fmt.Sprintf("sashlog demo --seed %d", seed)}
			return job.run(c.Context(), p)
		},
	}
	cmd.Flags().StringVar(&into, "into", "sashlog-demo", "folder for the invented building and its report")
	cmd.Flags().Uint64Var(&seed, "seed", 1, "another seed gives other weather and people")
	return cmd
}

// writeDemo writes the building beside its folder first, so that an
// interruption leaves an earlier one as it was.
func writeDemo(ctx context.Context, into string, options demo.Options) error {
	failed := func(err error) error {
		return fail(exitWrite, fmt.Errorf("the demo building could not be written: %w", err))
	}
	if err := os.MkdirAll(into, 0o755); err != nil {
		return failed(err)
	}
	dir, err := os.MkdirTemp(into, ".demo-*")
	if err != nil {
		return failed(err)
	}
	defer os.RemoveAll(dir)
	if _, err := demo.Write(dir, options); err != nil {
		return failed(err)
	}
	if err := ctx.Err(); err != nil {
		return err
	}
	entries, err := os.ReadDir(dir)
	if err != nil {
		return failed(err)
	}
	if name, ok := foreignTo(into, entries); ok {
		return failed(fmt.Errorf("%q is there already and was not written by the demo; hint: name another folder with --into", filepath.Join(into, name)))
	}
	// Earlier files stand aside until all the new ones have their places.
	aside, err := os.MkdirTemp(into, ".demo-earlier-*")
	if err != nil {
		return failed(err)
	}
	defer os.RemoveAll(aside)
	for i, e := range entries {
		target := filepath.Join(into, e.Name())
		err := os.Rename(target, filepath.Join(aside, e.Name()))
		if err == nil || os.IsNotExist(err) {
			err = os.Rename(filepath.Join(dir, e.Name()), target)
		}
		if err != nil {
			for _, done := range entries[:i+1] {
				target := filepath.Join(into, done.Name())
				if _, there := os.Lstat(filepath.Join(aside, done.Name())); there == nil {
					err = errors.Join(err, os.RemoveAll(target), os.Rename(filepath.Join(aside, done.Name()), target))
				}
			}
			return failed(err)
		}
	}
	return nil
}

// foreignTo names a file or folder that the demo would replace although it is
// not the demo's: one of its names stands in a folder whose site file does not
// say that the demo wrote it.
func foreignTo(into string, entries []os.DirEntry) (name string, ok bool) {
	if text, err := os.ReadFile(filepath.Join(into, "site.yaml")); err == nil && bytes.Contains(text, []byte(demo.WrittenBy)) {
		return "", false
	}
	for _, e := range entries {
		if _, err := os.Lstat(filepath.Join(into, e.Name())); err == nil {
			return e.Name(), true
		}
	}
	return "", false
}
