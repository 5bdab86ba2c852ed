package main

import (
	"bytes"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"strings"

	"github.com/spf13/cobra"

	"sashlog/analyze/answerable"
	"sashlog/ingest/guess"
	"sashlog/report/folder"
)

func newScan(p process) *cobra.Command {
	var into string
	cmd := &cobra.Command{
		Use:   "scan PATH...",
		Short: "look at unknown exports and propose a site file and a points table",
		Long: `scan looks at folders and files of exports that nobody described (text, XLSX, Parquet;
plain or packed), finds out how each is written, guesses which column is what of which room
or plant unit, and writes into the output folder:

  site.yaml     the proposed site file; lines marked TO FILL IN need a person
  points.csv    which logged column is what, each with its reason and how sure it
                is; rows that begin with # are left open

It never overwrites a site file that was edited: then it writes
site.proposed.yaml and points.proposed.csv beside it.`,
		Example: `  sashlog scan exports
  sashlog scan floor1.csv weather.zip --into building`,
		Args: func(_ *cobra.Command, args []string) error {
			if len(args) == 0 {
				return fail(exitUsage, fmt.Errorf("scan takes folders or files of exports; hint: sashlog scan exports"))
			}
			return nil
		},
		RunE: func(c *cobra.Command, args []string) error {
			quiet, _ := c.Flags().GetBool("quiet")
			if into == "" {
				into = besides(args[0])
			}
			for _, path := range args {
				if _, err := os.Stat(path); err != nil {
					return fail(exitSource, fmt.Errorf("cannot read what to scan: %w; hint: name folders or files of exports", err))
				}
			}
			siteName, pointsName, err := proposalNames(into)
			if err != nil {
				return fail(exitWrite, err)
			}
			proposal, err := guess.Scan(c.Context(), guess.Options{Paths: args, Into: into, SiteFile: siteName, PointsFile: pointsName})
			if err != nil {
				return err
			}
			if len(proposal.Logs) == 0 {
				for _, f := range proposal.Files {
					fmt.Fprintln(p.stderr, printable(f.Name+": "+f.What))
				}
				return fail(exitSource, fmt.Errorf("no log was found in %s; hint: export trends as CSV or XLSX", strings.Join(args, ", ")))
			}
			path, err := writeProposal(into, proposal)
			if err != nil {
				return fail(exitWrite, err)
			}
			fmt.Fprintln(p.stdout, path)
			if !quiet {
				for _, line := range proposalWords(proposal, path, siteName) {
					fmt.Fprintln(p.stderr, printable(line))
				}
			}
			return nil
		},
	}
	cmd.Flags().StringVar(&into, "into", "", "output folder (default: sashlog-scan beside the first path)")
	return cmd
}

// besides is the default output folder for a scanned path: a new folder beside
// it, or within it where it is the current folder.
func besides(path string) string {
	clean := filepath.Clean(path)
	if clean == "." {
		return "sashlog-scan"
	}
	return filepath.Join(filepath.Dir(clean), "sashlog-scan")
}

// proposalNames picks names that overwrite nothing a person edited.
func proposalNames(into string) (siteName, pointsName string, err error) {
	for n := 0; n < 100; n++ {
		mark := ""
		switch {
		case n == 1:
			mark = ".proposed"
		case n > 1:
			mark = fmt.Sprintf(".proposed-%d", n)
		}
		siteName, pointsName = "site"+mark+".yaml", "points"+mark+".csv"
		siteText, siteErr := os.ReadFile(filepath.Join(into, siteName))
		pointsText, pointsErr := os.ReadFile(filepath.Join(into, pointsName))
		if os.IsNotExist(siteErr) && os.IsNotExist(pointsErr) || siteErr == nil && pointsErr == nil && guess.Untouched(siteText, pointsText) {
			return siteName, pointsName, nil
		}
	}
	return "", "", fmt.Errorf("%s holds a hundred proposals already; hint: name another folder with --into", into)
}

// writeProposal writes both files, or neither, and returns the site file's path.
func writeProposal(into string, proposal *guess.Proposal) (string, error) {
	var siteText, pointsText bytes.Buffer
	if err := proposal.WriteSite(&siteText); err != nil {
		return "", err
	}
	if err := proposal.WritePoints(&pointsText); err != nil {
		return "", err
	}
	siteText.WriteString(guess.Stamp(siteText.Bytes(), pointsText.Bytes()))
	out, err := folder.Open(into)
	if err != nil {
		return "", err
	}
	defer out.Discard()
	for name, text := range map[string][]byte{proposal.Options.PointsFile: pointsText.Bytes(), proposal.Options.SiteFile: siteText.Bytes()} {
		if err := out.Write(name, func(w io.Writer) error { _, err := w.Write(text); return err }); err != nil {
			return "", err
		}
	}
	if err := out.Commit(); err != nil {
		return "", err
	}
	return out.Path(proposal.Options.SiteFile), nil
}

// proposalWords is what scan says at its end.
func proposalWords(proposal *guess.Proposal, path, siteName string) []string {
	lines := proposal.Found()
	part := func(title string, list []string) {
		if len(list) == 0 {
			return
		}
		lines = append(lines, "", title)
		for _, l := range list {
			lines = append(lines, "  - "+l)
		}
	}
	mapped, open := proposal.Uncertain()
	part("Look at these guesses first:", mapped)
	part("Left open:", open)
	part("Only a person can say:", proposal.Person())
	yes, partly, no := answers(proposal)
	part("Once that is filled in, these points can answer:", yes)
	part("In part:", partly)
	part("Not:", no)
	lines = append(lines, "")
	if siteName != "site.yaml" {
		lines = append(lines, fmt.Sprintf("site.yaml or points.csv beside it was edited by a person and stays as it is; the proposal is in %s.", siteName))
	}
	return append(lines, fmt.Sprintf("Fill in the lines marked TO FILL IN, then run: sashlog audit %s", path))
}

// answers sorts the questions by what the proposed points can say.
func answers(proposal *guess.Proposal) (yes, partly, no []string) {
	s, g := proposal.Sketch()
	for _, q := range answerable.Ask(s, g) {
		switch q.Answer {
		case answerable.Yes:
			yes = append(yes, q.Question)
		case answerable.Partly:
			partly = append(partly, q.Question+" missing: "+strings.Join(q.Missing, ", "))
		default:
			no = append(no, q.Question+" it needs "+q.Needs+"; "+q.Cheapest)
		}
	}
	return yes, partly, no
}
