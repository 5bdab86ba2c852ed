// Package pdf prints a report to PDF through a browser of the machine, without
// network access: the report's own style has the pages, running heads and page
// numbers.
package pdf

import (
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"os/exec"
	"path/filepath"
	"runtime"
	"strings"
	"time"
)

// ErrNoBrowser says that no browser was found that can print.
var ErrNoBrowser = errors.New("no Chromium browser was found")

// Variable names the environment variable with the path of the browser.
const Variable = "SASHLOG_CHROMIUM"

// patience is how long the browser may take.
const patience = 3 * time.Minute

// Find returns the path of a browser: the one the environment names, else the
// first of the usual names on the path.
func Find(env func(string) string) (string, error) {
	if named := env(Variable); named != "" {
		if path, err := exec.LookPath(named); err == nil {
			return path, nil
		}
		return "", fmt.Errorf("%w: %s names %q, which cannot be run", ErrNoBrowser, Variable, named)
	}
	for _, name := range []string{"chromium", "chromium-browser", "google-chrome", "google-chrome-stable", "chrome", "msedge", "microsoft-edge"} {
		if path, err := exec.LookPath(name); err == nil {
			return path, nil
		}
	}
	return "", ErrNoBrowser
}

// Print writes the PDF of an HTML document to w: tagged, with an outline of its
// headings.
func Print(ctx context.Context, browser string, document func(io.Writer) error, w io.Writer) error {
	dir, err := os.MkdirTemp("", "sashlog-print-*")
	if err != nil {
		return fmt.Errorf("cannot make a temporary folder: %w", err)
	}
	defer os.RemoveAll(dir)
	page, out := filepath.Join(dir, "report.html"), filepath.Join(dir, "report.pdf")
	f, err := os.Create(page)
	if err != nil {
		return fmt.Errorf("cannot write a temporary file: %w", err)
	}
	if err := errors.Join(document(f), f.Close()); err != nil {
		return err
	}
	ctx, cancel := context.WithTimeout(ctx, patience)
	defer cancel()
	args := []string{"--headless", "--disable-gpu", "--disable-dev-shm-usage", "--disable-extensions", "--no-first-run", "--user-data-dir=" + filepath.Join(dir, "profile"),
		// Nothing may be fetched, whatever the document says.
		"--host-resolver-rules=MAP * ~NOTFOUND",
		"--no-pdf-header-footer", "--export-tagged-pdf", "--generate-pdf-document-outline", "--print-to-pdf=" + out}
	if runtime.GOOS == "linux" && os.Geteuid() == 0 {
		args = append(args, "--no-sandbox") // the browser refuses its sandbox to root
	}
	c := exec.CommandContext(ctx, browser, append(args, "file://"+filepath.ToSlash(page))...)
	said, err := c.CombinedOutput()
	if ctx.Err() != nil {
		return fmt.Errorf("printing with %s: %w", filepath.Base(browser), ctx.Err())
	}
	if err != nil {
		return fmt.Errorf("printing with %s: %w: %s", filepath.Base(browser), err, tail(string(said)))
	}
	printed, err := os.Open(out)
	if err != nil {
		return fmt.Errorf("%s printed nothing: %s", filepath.Base(browser), tail(string(said)))
	}
	defer printed.Close()
	if _, err := io.Copy(w, printed); err != nil {
		return fmt.Errorf("cannot copy the PDF: %w", err)
	}
	return nil
}

// tail is the last line a browser said, as far as a message needs it.
func tail(s string) string {
	lines := strings.Split(strings.TrimSpace(s), "\n")
	last := lines[len(lines)-1]
	if len(last) > 200 {
		last = last[:200]
	}
	return fmt.Sprintf("%q", last)
}
