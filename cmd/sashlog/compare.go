package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"path/filepath"
	"strings"

	"github.com/spf13/cobra"

	"sashlog/analyze/compare"
	"sashlog/configs"
	"sashlog/configs/site"
	"sashlog/report/page"
	"sashlog/report/privacy"
	"sashlog/report/table"
	"sashlog/report/words"
)

func newCompare(p process) *cobra.Command {
	var job auditJob
	var before, after, scheduleFile string
	var untouched []string
	var spans [2]compare.Span
	cmd := &cobra.Command{
		Use:   "compare SITE.yaml (--before FROM..TO --after FROM..TO | --schedule FILE)",
		Short: "say whether a change worked: two periods, the weather allowed for",
		Long: `compare audits two periods of one building and says whether it ran open more of
the time it could have, whether people were more or less comfortable on one
criterion, and whether the air was fresher, on days of like weather. Zones the
change did not reach, named with --untouched, show what happened anyway.

With --schedule it gives the verdict of a trial that "sashlog trial" planned, by
drawing its days again: what was run as scheduled, what was not, and whether
the difference is more than the drawing alone gives.

It writes comparison.html and comparison.json, and says when the periods are
too short or their weather too unlike for an answer.`,
		Example: `  sashlog compare site.yaml --before 2025-05-01..2025-06-30 --after 2026-05-01..2026-06-30
  sashlog compare site.yaml --before 2025-05-01..2025-06-30 --after 2025-07-01..2025-08-31 --untouched L2.01,L2.02
  sashlog compare site.yaml --schedule sashlog-trial/schedule.csv`,
		Args: oneSite,
		RunE: func(c *cobra.Command, args []string) error {
			job.siteFile = args[0]
			job.quiet, _ = c.Flags().GetBool("quiet")
			if c.Flags().Changed("schedule") {
				if before != "" || after != "" || len(untouched) > 0 {
					return fail(exitUsage, errors.New("--schedule says which days and zones are compared; hint: leave --before, --after and --untouched out"))
				}
				job.command = "sashlog compare " + filepath.Base(job.siteFile) + " --schedule " + filepath.Base(scheduleFile)
				return job.verdict(c.Context(), p, scheduleFile)
			}
			var err error
			for k, text := range []string{before, after} {
				if spans[k], err = spanFlag([]string{"--before", "--after"}[k], text); err != nil {
					return err
				}
			}
			if !spans[0].To.Before(spans[1].From) && !spans[1].To.Before(spans[0].From) {
				return fail(exitUsage, fmt.Errorf("--before %s and --after %s share days; hint: a day belongs to one of them", before, after))
			}
			job.from, job.to = spans[0].From, spans[1].To
			if spans[1].From.Before(spans[0].From) {
				job.from, job.to = spans[1].From, spans[0].To
			}
			job.command = "sashlog compare " + filepath.Base(job.siteFile) + " --before " + before + " --after " + after
			if len(untouched) > 0 {
				job.command += " --untouched " + strings.Join(untouched, ",")
			}
			return job.compare(c.Context(), p, spans, untouched)
		},
	}
	cmd.Flags().StringVar(&job.into, "into", "", "output folder (default: sashlog-comparison beside the site file)")
	cmd.Flags().StringVar(&before, "before", "", "days before the change, as 2025-05-01..2025-06-30, both included")
	cmd.Flags().StringVar(&after, "after", "", "days after the change")
	cmd.Flags().StringSliceVar(&untouched, "untouched", nil, "zones the change did not reach, parted by commas")
	cmd.Flags().StringVar(&scheduleFile, "schedule", "", "schedule.csv of a trial: its verdict, in place of two periods")
	return cmd
}

// spanFlag reads two days parted by two dots.
func spanFlag(name, text string) (compare.Span, error) {
	from, to, ok := strings.Cut(text, "..")
	if !ok {
		if text == "" {
			return compare.Span{}, fail(exitUsage, fmt.Errorf("%s is missing; hint: write it as %s 2025-05-01..2025-06-30", name, name))
		}
		return compare.Span{}, fail(exitUsage, fmt.Errorf("%s %q is no period; hint: write it as 2025-05-01..2025-06-30", name, text))
	}
	var s compare.Span
	var err error
	if s.From, err = dateFlag(name, from); err != nil {
		return s, err
	}
	if s.To, err = dateFlag(name, to); err != nil {
		return s, err
	}
	if s.From.IsZero() || s.To.IsZero() || s.To.Before(s.From) {
		return s, fail(exitUsage, fmt.Errorf("%s %q ends before it begins; hint: both days belong to the period", name, text))
	}
	return s, nil
}

// compare audits the days of both periods and sets them against each other.
func (job auditJob) compare(ctx context.Context, p process, spans [2]compare.Span, untouched []string) error {
	a, err := job.analyse(ctx, p)
	if err != nil {
		return err
	}
	var zones []int
	for _, id := range untouched {
		z := a.site.ZoneIndex(id)
		if z < 0 {
			return fail(exitUsage, fmt.Errorf("--untouched names zone %q, which the site file does not have; hint: its zones are %s", id, zoneList(a.site)))
		}
		zones = append(zones, z)
	}
	res := a.results
	r := compare.Periods(compare.Input{Site: a.site, Criteria: a.criteria, Grid: a.grid, Calendar: res.Calendar, Outdoor: res.Outdoor, Indoor: res.Indoor,
		Running: res.Running, Exceedance: res.Exceedance, Record: res.Hours, Before: spans[0], After: spans[1], Untouched: zones, Seed: 1})
	if job.into == "" {
		job.into = filepath.Join(filepath.Dir(job.siteFile), "sashlog-comparison")
	}
	path, err := writeOutputs(ctx, job.into, "comparison.html", []output{
		{"comparison.json", func(w io.Writer) error { return table.WriteComparisonJSON(w, a.tables(), r) }},
		{"comparison.html", func(w io.Writer) error { return page.WriteComparison(w, a.pages(), r) }},
	})
	if err != nil {
		return err
	}
	fmt.Fprintln(p.stdout, path)
	if !job.quiet {
		for _, line := range words.Compared(r) {
			fmt.Fprintln(p.stderr, printable(line))
		}
	}
	return a.tolerated()
}

// verdict audits the days of a trial's schedule and says what it showed.
func (job auditJob) verdict(ctx context.Context, p process, file string) error {
	s, err := configs.ReadSchedule(file)
	if err != nil {
		return fail(exitUsage, err)
	}
	job.from, job.to = s.Days[0].Date, s.Days[len(s.Days)-1].Date
	a, err := job.analyse(ctx, p)
	if err != nil {
		return err
	}
	rule := privacy.For(a.site)
	var zones [2][]int
	for k, ids := range [][]string{s.Zones, s.Untouched} {
		if zones[k], err = zonesNamed(a.site, ids, rule.ID); err != nil {
			return fail(exitUsage, err)
		}
	}
	res := a.results
	r := compare.Trial(compare.Input{Site: a.site, Criteria: a.criteria, Grid: a.grid, Calendar: res.Calendar, Outdoor: res.Outdoor, Indoor: res.Indoor,
		Running: res.Running, Exceedance: res.Exceedance, Record: res.Hours, Seed: s.Seed}, s, zones[0], zones[1])
	if job.into == "" {
		job.into = filepath.Join(filepath.Dir(job.siteFile), "sashlog-comparison")
	}
	path, err := writeOutputs(ctx, job.into, "comparison.html", []output{
		{"comparison.json", func(w io.Writer) error { return table.WriteTrialVerdictJSON(w, a.tables(), r) }},
		{"comparison.html", func(w io.Writer) error { return page.WriteTrialVerdict(w, a.pages(), r) }},
	})
	if err != nil {
		return err
	}
	fmt.Fprintln(p.stdout, path)
	if !job.quiet {
		for _, line := range words.Tried(r) {
			fmt.Fprintln(p.stderr, printable(line))
		}
	}
	return a.tolerated()
}

func zoneList(s *site.Site) string {
	var ids []string
	for i := range s.Zones {
		ids = append(ids, s.Zones[i].ID)
	}
	return words.List(ids, 12)
}
