package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"path/filepath"
	"runtime"
	"runtime/debug"
	"strings"
	"time"

	"github.com/spf13/cobra"
	"golang.org/x/sync/errgroup"

	"sashlog/analyze"
	"sashlog/configs"
	"sashlog/configs/criteria"
	"sashlog/configs/site"
	"sashlog/ingest"
	"sashlog/ingest/grid"
	"sashlog/ingest/reading"
	"sashlog/report/folder"
	"sashlog/report/page"
	"sashlog/report/pdf"
	"sashlog/report/provenance"
	"sashlog/report/table"
	"sashlog/report/words"
)

// auditJob is one audit as the command line asked for it.
type auditJob struct {
	siteFile string
	into     string // empty: sashlog-report beside the site file
	from, to site.Date
	quiet    bool
	pdf      bool
	figures  bool
	models   bool   // fit a thermal model to every zone
	paper    string // A4 or Letter
	command  string // as shown in the report
}

func newAudit(p process) *cobra.Command {
	var job auditJob
	var from, to string
	cmd := &cobra.Command{
		Use:   "audit SITE.yaml",
		Short: "audit a building from its logs and write the report",
		Long: `audit reads the site file and the logs it names, checks every reading, works out
where the occupied hours went, and writes into the output folder:

  report.html      the whole report in one file; open it in a browser and print it
  results.json     every figure with its bounds, for other programs
  hours.csv        the hourly record: one row per zone and hour (also hours.parquet)
  comfort.parquet  hours outside each comfort criterion
  episodes.csv     the missed episodes and their causes
  readings.csv     what became of every logged point's readings
  data-dictionary.csv  what every column and key of these files means
  figure-*         with --figures, every figure as SVG and its data as CSV
  report.pdf       with --pdf, where a Chromium browser is installed

It ends with 1 when more readings were rejected than the site file tolerates.`,
		Example: `  sashlog audit building/site.yaml
  sashlog audit building/site.yaml --from 2025-05-01 --to 2025-09-30 --into summer`,
		Args: oneSite,
		RunE: func(c *cobra.Command, args []string) error {
			job.siteFile = args[0]
			job.quiet, _ = c.Flags().GetBool("quiet")
			var err error
			if job.from, err = dateFlag("--from", from); err != nil {
				return err
			}
			if job.to, err = dateFlag("--to", to); err != nil {
				return err
			}
			if !job.from.IsZero() && !job.to.IsZero() && job.to.Before(job.from) {
				return fail(exitUsage, fmt.Errorf("--to %s lies before --from %s; hint: both days belong to the period", job.to, job.from))
			}
			if job.paper != "A4" && job.paper != "Letter" {
				return fail(exitUsage, fmt.Errorf("--paper %q is not known; hint: A4 or Letter", job.paper))
			}
			job.command = "sashlog audit " + filepath.Base(job.siteFile) + flagWords(" --from ", from) + flagWords(" --to ", to)
			return job.run(c.Context(), p)
		},
	}
	cmd.Flags().StringVar(&job.into, "into", "", "output folder (default: sashlog-report beside the site file)")
	cmd.Flags().StringVar(&from, "from", "", "first local day of the period, as 2025-05-01")
	cmd.Flags().StringVar(&to, "to", "", "last local day of the period, inclusive")
	cmd.Flags().BoolVar(&job.pdf, "pdf", false, "also print the report to report.pdf, with a Chromium browser of this machine")
	cmd.Flags().BoolVar(&job.models, "models", false, "also fit a thermal model to every zone and say how many missed hours it expects to have been comfortable with windows open; takes several seconds more")
	cmd.Flags().BoolVar(&job.figures, "figures", false, "also write every figure as SVG and its data as CSV, as figure-NN-name.svg and .csv")
	cmd.Flags().StringVar(&job.paper, "paper", "A4", "paper the report prints to: A4 or Letter")
	return cmd
}

func flagWords(name, value string) string {
	if value == "" {
		return ""
	}
	return name + value
}

// dateFlag reads a local day.
func dateFlag(name, text string) (site.Date, error) {
	if text == "" {
		return site.Date{}, nil
	}
	t, err := time.Parse("2006-01-02", text)
	if err != nil {
		return site.Date{}, fail(exitUsage, fmt.Errorf("%s %q is not a day; hint: write it as 2025-05-01", name, text))
	}
	return site.DateOf(t), nil
}

// audited is a site read and analysed, ready to be written.
type audited struct {
	site     *site.Site
	criteria criteria.Settings
	grid     *grid.Grid
	ledger   *reading.Ledger
	results  *analyze.Results
	origin   provenance.Provenance
}

func (a *audited) tables() table.Input {
	return table.Input{Site: a.site, Criteria: a.criteria, Grid: a.grid, Ledger: a.ledger, Results: a.results, Provenance: a.origin}
}

func (a *audited) pages() page.Input {
	return page.Input{Site: a.site, Criteria: a.criteria, Grid: a.grid, Ledger: a.ledger, Results: a.results, Provenance: a.origin}
}

// tolerated is the failure that too many rejected readings are.
func (a *audited) tolerated() error {
	if share := a.ledger.RejectedShare(); share > a.site.RejectedShareMax {
		return fail(exitRejected, fmt.Errorf("%.1f %% of the readings were rejected, more than the site's tolerance of %.1f %%; the report was written all the same; hint: readings.csv says which and why",
			100*share, 100*a.site.RejectedShareMax))
	}
	return nil
}

// analyse loads, reads and analyses.
func (job auditJob) analyse(ctx context.Context, p process) (*audited, error) {
	loaded, err := configs.Load(job.siteFile, p.env)
	if err != nil {
		return nil, err
	}
	if !job.quiet {
		for _, warning := range loaded.Warnings {
			fmt.Fprintln(p.stderr, printable("note: "+warning.Error()))
		}
	}
	bar := newProgress(p.stderr, job.quiet, p.env)
	g, ledger, err := ingest.Read(ctx, loaded.Site, ingest.Options{Progress: bar.at, From: job.from, To: job.to})
	bar.end()
	if err != nil {
		return nil, sourceFailure(err)
	}
	if err := ctx.Err(); err != nil {
		return nil, err
	}
	if !job.quiet {
		tellIssues(p, ledger)
	}
	a := &audited{site: loaded.Site, criteria: loaded.Criteria, grid: g, ledger: ledger,
		results: analyze.Run(analyze.Input{Site: loaded.Site, Criteria: loaded.Criteria, Grid: g, ZoneModels: job.models}),
		origin: provenance.Provenance{Version: versionWords(), Generated: p.now().UTC().Format(time.RFC3339), Command: job.command,
			CriteriaHash: criteria.Hash(loaded.Criteria)}}
	for _, f := range loaded.Files {
		a.origin.ConfigFiles = append(a.origin.ConfigFiles, provenance.File{Path: f.Path, SHA256: f.SHA256, Bytes: f.Bytes})
	}
	return a, ctx.Err()
}

// issuesTold is how many messages about the logs the terminal shows; all are in
// the report.
const issuesTold = 5

// tellIssues shows what the logs themselves gave rise to say.
func tellIssues(p process, l *reading.Ledger) {
	for i, is := range l.Issues {
		if i == issuesTold {
			fmt.Fprintf(p.stderr, "note: %d more messages about the logs are in the report\n", int64(len(l.Issues)-i)+l.IssuesDropped)
			return
		}
		text := is.Text
		if is.Where.File != "" {
			text = is.Where.File + ": " + text
		}
		if is.Hint != "" {
			text += "; hint: " + is.Hint
		}
		fmt.Fprintln(p.stderr, printable("note: "+text))
	}
}

// run does the audit: load, read, analyse, write, say.
func (job auditJob) run(ctx context.Context, p process) error {
	a, err := job.analyse(ctx, p)
	if err != nil {
		return err
	}
	if job.into == "" {
		job.into = filepath.Join(filepath.Dir(job.siteFile), "sashlog-report")
	}
	pages := a.pages()
	pages.Paper = job.paper
	outputs := outputsOf(a.tables(), pages)
	if job.figures {
		outputs = append(outputs, figuresOf(pages)...)
	}
	out, err := writeOutputs(ctx, job.into, "report.html", outputs)
	if err != nil {
		return err
	}
	fmt.Fprintln(p.stdout, out)
	if job.pdf {
		// Last, since everything else is worth having without it.
		if err := printPDF(ctx, p, job.into, pages); err != nil {
			return err
		}
	}
	if !job.quiet {
		for _, line := range words.Summary(words.Input{Site: a.site, Criteria: a.criteria, Grid: a.grid, Ledger: a.ledger, Results: a.results}) {
			fmt.Fprintln(p.stderr, printable(line))
		}
	}
	return a.tolerated()
}

// sourceFailure gives a failure to read its exit code.
func sourceFailure(err error) error {
	var problems configs.Problems
	if errors.Is(err, context.Canceled) || errors.As(err, &problems) {
		return err
	}
	return fail(exitSource, err)
}

// output is one file of the output folder.
type output struct {
	name string
	fill func(io.Writer) error
}

// printPDF prints the report beside the other outputs; without a browser it
// says how else to print.
func printPDF(ctx context.Context, p process, into string, pages page.Input) error {
	browser, err := pdf.Find(p.env)
	if err != nil {
		fmt.Fprintln(p.stderr, printable("note: no PDF: "+err.Error()+"; hint: open report.html in a browser and print it to PDF, or name a Chromium in "+pdf.Variable))
		return nil
	}
	out, err := writeOutputs(ctx, into, "report.pdf", []output{{"report.pdf", func(w io.Writer) error {
		return pdf.Print(ctx, browser, func(w io.Writer) error {
			pages.PrintOnly = true
			return page.Write(w, pages)
		}, w)
	}}})
	if err != nil {
		return err
	}
	fmt.Fprintln(p.stdout, out)
	return nil
}

// figuresOf are the figures of the report on their own, with their data.
func figuresOf(pages page.Input) []output {
	var out []output
	for _, f := range page.Figures(pages) {
		name := fmt.Sprintf("figure-%02d-%s", f.Number, f.ID)
		out = append(out, output{name + ".svg", func(w io.Writer) error { _, err := w.Write(f.SVG); return err }})
		if len(f.Rows) > 0 {
			out = append(out, output{name + ".csv", func(w io.Writer) error { return table.WriteFigureCSV(w, f.Header, f.Rows) }})
		}
	}
	return out
}

// outputsOf are the outputs of an audit.
func outputsOf(tables table.Input, pages page.Input) []output {
	return []output{
		{"hours.csv", func(w io.Writer) error { return table.WriteHoursCSV(w, tables) }},
		{"hours.parquet", func(w io.Writer) error { return table.WriteHoursParquet(w, tables) }},
		{"comfort.parquet", func(w io.Writer) error { return table.WriteComfortParquet(w, tables) }},
		{"episodes.csv", func(w io.Writer) error { return table.WriteEpisodesCSV(w, tables) }},
		{"readings.csv", func(w io.Writer) error { return table.WriteReadingsCSV(w, tables) }},
		{"results.json", func(w io.Writer) error { return table.WriteJSON(w, tables) }},
		{"results.schema.json", func(w io.Writer) error { _, err := w.Write(table.Schema()); return err }},
		{"data-dictionary.csv", table.WriteDictionary},
		{"report.html", func(w io.Writer) error { return page.Write(w, pages) }},
	}
}

// writeOutputs writes the outputs side by side and returns the path of the one
// to show; all of them appear, or none.
func writeOutputs(ctx context.Context, into, show string, outputs []output) (path string, err error) {
	out, err := folder.Open(into)
	if err != nil {
		return "", fail(exitWrite, err)
	}
	defer out.Discard()
	var writing errgroup.Group
	writing.SetLimit(runtime.GOMAXPROCS(0))
	for _, o := range outputs {
		writing.Go(func() error {
			if err := ctx.Err(); err != nil {
				return err
			}
			if err := out.Write(o.name, guarded(o)); err != nil {
				return fail(exitWrite, err)
			}
			return nil
		})
	}
	if err := errors.Join(writing.Wait(), ctx.Err()); err != nil {
		return "", err
	}
	if err := out.Commit(); err != nil {
		return "", fail(exitWrite, err)
	}
	return strings.TrimPrefix(out.Path(show), "./"), nil
}

// guarded turns a fault of ours in one output into an error, since a panic
// beside the main goroutine would end the process with files half written.
func guarded(o output) func(io.Writer) error {
	return func(w io.Writer) (err error) {
		defer func() {
			if r := recover(); r != nil {
				err = fmt.Errorf("a fault of sashlog itself: %v\n%s", r, debug.Stack())
			}
		}()
		return o.fill(w)
	}
}
