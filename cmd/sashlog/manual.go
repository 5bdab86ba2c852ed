package main

import (
	"errors"
	"fmt"
	"os"
	"path/filepath"

	"github.com/spf13/cobra"
	"github.com/spf13/cobra/doc"
)

// newManual writes the manual pages from the same texts as --help.
func newManual(p process) *cobra.Command {
	var into string
	cmd := &cobra.Command{
		Use:   "manual",
		Short: "write the manual pages of all commands",
		Long: `manual writes a manual page for every command (sashlog.1, sashlog-audit.1 and so
on), from the same texts as --help. Where man looks for pages of your own:

  sashlog manual --into ~/.local/share/man/man1`,
		Args: noArguments,
		RunE: func(c *cobra.Command, _ []string) error {
			if err := os.MkdirAll(into, 0o755); err != nil {
				return fail(exitWrite, fmt.Errorf("cannot make the folder %q: %w; hint: name another with --into", into, err))
			}
			// Into a folder beside it first, so that no page is ever half written.
			dir, err := os.MkdirTemp(into, ".manual-*")
			if err != nil {
				return fail(exitWrite, fmt.Errorf("cannot write to %q: %w; hint: name another with --into", into, err))
			}
			defer os.RemoveAll(dir)
			date := p.now()
			root := c.Root()
			root.DisableAutoGenTag = true
			header := &doc.GenManHeader{Title: "SASHLOG", Section: "1", Source: root.Version, Manual: "sashlog", Date: &date}
			if err := doc.GenManTree(root, header, dir); err != nil {
				return fail(exitWrite, fmt.Errorf("cannot write the manual pages: %w", err))
			}
			pages, err := os.ReadDir(dir)
			for _, page := range pages {
				err = errors.Join(err, os.Rename(filepath.Join(dir, page.Name()), filepath.Join(into, page.Name())))
			}
			if err != nil {
				return fail(exitWrite, fmt.Errorf("cannot write the manual pages: %w", err))
			}
			fmt.Fprintln(p.stdout, filepath.Join(into, "sashlog.1"))
			return nil
		},
	}
	cmd.Flags().StringVar(&into, "into", "man", "folder for the pages")
	return cmd
}
