package main

import (
	"context"
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
	for _, e := range entries {
		target := filepath.Join(into, e.Name())
		if err := os.RemoveAll(target); err != nil {
			return failed(err)
		}
		if err := os.Rename(filepath.Join(dir, e.Name()), target); err != nil {
			return failed(err)
		}
	}
	return nil
}
