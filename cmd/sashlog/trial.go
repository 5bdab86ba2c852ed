package main

import (
	"context"
	"fmt"
	"io"
	"path/filepath"
	"slices"
	"strings"

	"github.com/spf13/cobra"

	"sashlog/analyze/trial"
	"sashlog/configs/schedule"
	"sashlog/configs/site"
	"sashlog/report/page"
	"sashlog/report/table"
	"sashlog/report/words"
)

func newTrial(p process) *cobra.Command {
	var job auditJob
	var begin, by, step string
	var seed uint64
	cmd := &cobra.Command{
		Use:   "trial SITE.yaml",
		Short: "plan the next safe trial: which setting, which days, when to stop",
		Long: `trial audits a building and plans the next safe step where its logs have only
seen weather under today's limits: which changeover limit to move by 1 K, on
which days of alternate weeks (drawn at random, and printed), which untouched
zones stand beside, what to watch, when to stop, and how long until a verdict.

It writes into the output folder:

  trial.html    the plan, to print and hang up
  schedule.csv  the days; note in its column "ran" what was really run
                (trial, usual, or stopped; empty: not noted)
  trial.json    every figure, for other programs

After the trial: sashlog compare SITE.yaml --schedule schedule.csv

Local codes and licensed practice decide whether a trial may be run.`,
		Example: `  sashlog trial site.yaml
  sashlog trial site.yaml --begin 2026-05-04 --by weeks`,
		Args: oneSite,
		RunE: func(c *cobra.Command, args []string) error {
			job.siteFile = args[0]
			job.quiet, _ = c.Flags().GetBool("quiet")
			from, err := dateFlag("--begin", begin)
			if err != nil {
				return err
			}
			if !slices.Contains(schedule.Designs(), schedule.Design(by)) {
				return fail(exitUsage, fmt.Errorf("--by %q is not known; hint: days or weeks", by))
			}
			if job.paper != "A4" && job.paper != "Letter" {
				return fail(exitUsage, fmt.Errorf("--paper %q is not known; hint: A4 or Letter", job.paper))
			}
			job.command = "sashlog trial " + filepath.Base(job.siteFile) + flagWords(" --begin ", begin) + flagWords(" --step ", step) + fmt.Sprintf(" --by %s --seed %d", by, seed)
			return job.trial(c.Context(), p, trial.Input{Design: schedule.Design(by), From: from, Step: step, Seed: seed})
		},
	}
	cmd.Flags().StringVar(&job.into, "into", "", "output folder (default: sashlog-trial beside the site file)")
	cmd.Flags().StringVar(&begin, "begin", "", "earliest first day, as 2026-05-04 (default: the season that gains most, after the logs end)")
	cmd.Flags().StringVar(&by, "by", string(schedule.ByDays), "what alternates: days, or weeks where a setting cannot be changed every morning")
	cmd.Flags().StringVar(&step, "step", "", "which limit to move, as the plan's table names them (default: the one that gains most)")
	cmd.Flags().Uint64Var(&seed, "seed", 1, "seed of the drawing; the same seed draws the same days")
	cmd.Flags().StringVar(&job.paper, "paper", "A4", "paper the plan prints to: A4 or Letter")
	return cmd
}

func (job auditJob) trial(ctx context.Context, p process, in trial.Input) error {
	a, err := job.analyse(ctx, p)
	if err != nil {
		return err
	}
	res := a.results
	in.Site, in.Criteria, in.Grid, in.Calendar, in.Outdoor, in.Indoor = a.site, a.criteria, a.grid, res.Calendar, res.Outdoor, res.Indoor
	in.Running, in.Exceedance, in.Record, in.Changeover, in.Lost = res.Running, res.Exceedance, res.Hours, res.Changeover, res.Lost
	plan := trial.Next(in)
	if in.Step != "" && plan.Chosen < 0 && len(plan.Steps) > 0 {
		return fail(exitUsage, fmt.Errorf("--step: %s", plan.Unusable))
	}
	if job.into == "" {
		job.into = filepath.Join(filepath.Dir(job.siteFile), "sashlog-trial")
	}
	pages := a.pages()
	pages.Paper = job.paper
	outputs := []output{
		{"trial.json", func(w io.Writer) error { return table.WriteTrialJSON(w, a.tables(), plan) }},
		{"trial.html", func(w io.Writer) error { return page.WriteTrial(w, pages, plan) }},
	}
	if plan.Unusable == "" {
		outputs = append(outputs, output{"schedule.csv", func(w io.Writer) error { return table.WriteScheduleCSV(w, a.tables(), &plan.Schedule) }})
	}
	path, err := writeOutputs(ctx, job.into, "trial.html", outputs)
	if err != nil {
		return err
	}
	fmt.Fprintln(p.stdout, path)
	if !job.quiet {
		for _, line := range words.Planned(words.Input{Site: a.site, Criteria: a.criteria, Grid: a.grid, Ledger: a.ledger, Results: a.results}, plan) {
			fmt.Fprintln(p.stderr, printable(strings.ReplaceAll(line, "\u00a0", " ")))
		}
	}
	return a.tolerated()
}

// zonesNamed are the indexes of zones by their ids, or by the codes a schedule
// for sharing holds.
func zonesNamed(s *site.Site, ids []string, code func(int) string) ([]int, error) {
	var out []int
	for _, id := range ids {
		z := s.ZoneIndex(id)
		for k := 0; z < 0 && k < len(s.Zones); k++ {
			if code(k) == id {
				z = k
			}
		}
		if z < 0 {
			return nil, fmt.Errorf("the schedule names zone %q, which the site file does not have; hint: its zones are %s", id, zoneList(s))
		}
		out = append(out, z)
	}
	return out, nil
}
