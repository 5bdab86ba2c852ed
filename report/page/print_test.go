package page_test

import (
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"slices"
	"strconv"
	"strings"
	"testing"
	"time"

	"sashlog/report/internal/browser"
	"sashlog/report/internal/sample"
	"sashlog/report/pdf"
)

func run(t *testing.T, name string, args ...string) string {
	t.Helper()
	ctx, cancel := context.WithTimeout(context.Background(), 2*time.Minute)
	defer cancel()
	cmd := exec.CommandContext(ctx, name, args...)
	var out, errs strings.Builder
	cmd.Stdout, cmd.Stderr = &out, &errs
	if err := cmd.Run(); err != nil {
		t.Fatalf("%s: %v\n%.2000s", name, err, errs.String())
	}
	return out.String()
}

// TestPrint prints to both papers. Sizes in points: ISO 216 (A4, 210 × 297 mm)
// and ANSI/ASME Y14.1 (Letter, 8.5 × 11 in).
func TestPrint(t *testing.T) {
	browser.Need(t, "chromium", "pdfinfo", "pdftotext", "pdffonts")
	for _, p := range []struct {
		paper         string
		width, height float64
	}{{"A4", 595.28, 841.89}, {"Letter", 612, 792}} {
		t.Run(p.paper, func(t *testing.T) {
			in := input(sample.Make(sample.Options{Days: 365, Zones: 12}))
			in.Paper = p.paper
			in.PrintOnly = true
			doc := write(t, in)
			file := printed(t, doc)
			info := run(t, "pdfinfo", file)
			if !regexp.MustCompile(`Tagged:\s+yes`).MatchString(info) {
				t.Error("the PDF is not tagged")
			}
			outlined(t, file)
			size := regexp.MustCompile(`Page size:\s+([\d.]+) x ([\d.]+)`).FindStringSubmatch(info)
			pages := regexp.MustCompile(`Pages:\s+(\d+)`).FindStringSubmatch(info)
			if size == nil || pages == nil {
				t.Fatalf("no size or pages in %s", info)
			}
			w, _ := strconv.ParseFloat(size[1], 64)
			h, _ := strconv.ParseFloat(size[2], 64)
			if w < p.width-1.5 || w > p.width+1.5 || h < p.height-1.5 || h > p.height+1.5 {
				t.Errorf("page of %g × %g points, want %g × %g", w, h, p.width, p.height)
			}
			n, _ := strconv.Atoi(pages[1])
			if n < 10 || n > 50 {
				t.Errorf("%d pages", n)
			}
			sheets := strings.Split(run(t, "pdftotext", "-layout", file, "-"), "\f")
			for i := 1; i <= n; i++ {
				text := sheets[i-1]
				for _, want := range []string{"Harbour Sheds (invented)", fmt.Sprintf("page %d of %d", i, n), "never certify compliance"} {
					if !strings.Contains(text, want) {
						t.Errorf("page %d: no %q", i, want)
					}
				}
				if i == 1 && (!strings.Contains(text, "Before windows or plant are run differently") || !strings.Contains(text, "What to do first")) {
					t.Error("page one does not hold the actions and the caution: it has grown beyond one page")
				}
				if i == 2 && !strings.Contains(text, "Chapters") {
					t.Error("page two does not begin the chapters")
				}
			}
			// A table wider than the paper would make the browser print everything
			// smaller: the title must keep its 20 points (Liberation Serif: line
			// box of a word 1.107 times the size).
			box := regexp.MustCompile(`yMin="([\d.]+)" xMax="[\d.]+" yMax="([\d.]+)">Harbour<`).FindAllStringSubmatch(run(t, "pdftotext", "-bbox", "-l", "1", file, "-"), -1)
			tallest := 0.0
			for _, m := range box {
				top, _ := strconv.ParseFloat(m[1], 64)
				bottom, _ := strconv.ParseFloat(m[2], 64)
				tallest = max(tallest, bottom-top)
			}
			if tallest < 21.5 || tallest > 23 {
				t.Errorf("the title is %.1f points tall, want about 22: something wider than the paper shrinks the print", tallest)
			}
			for _, line := range strings.Split(strings.TrimSpace(run(t, "pdffonts", file)), "\n")[2:] {
				if f := strings.Fields(line); len(f) > 5 && f[len(f)-5] != "yes" {
					t.Errorf("font is not embedded: %s", line)
				}
			}
			// Headings of long tables stand again on their later pages.
			if strings.Count(strings.Join(sheets, ""), "95 % below") < 2 {
				t.Error("the heading of the CO2 table is not repeated on its second page")
			}
			wholeFigures(t, doc, sheets, p.width, p.height)
		})
	}
}

// printed prints a document the way the command does.
func printed(t *testing.T, doc string) string {
	t.Helper()
	program, err := pdf.Find(func(string) string { return "" })
	if err != nil {
		t.Fatal(err)
	}
	file := filepath.Join(t.TempDir(), "report.pdf")
	out, err := os.Create(file)
	if err != nil {
		t.Fatal(err)
	}
	err = pdf.Print(context.Background(), program, func(w io.Writer) error { _, err := io.WriteString(w, doc); return err }, out)
	if err := errors.Join(err, out.Close()); err != nil {
		t.Fatal(err)
	}
	return file
}

// outlined: the PDF has an outline with an entry per chapter at least (ISO
// 32000-1, 12.3.3: the outline dictionary counts its entries).
func outlined(t *testing.T, file string) {
	t.Helper()
	raw, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	entries := regexp.MustCompile(`/Type\s*/Outlines[^>]*/Count (\d+)|/Count (\d+)[^>]*/Type\s*/Outlines`).FindSubmatch(raw)
	if entries == nil {
		t.Error("no outline")
		return
	}
	if n, _ := strconv.Atoi(string(entries[1]) + string(entries[2])); n < 1 {
		t.Errorf("%d entries in the outline", n)
	}
}

// wholeFigures: every figure fits the paper, may not be split, and stands on
// the page of its caption with its longest words.
func wholeFigures(t *testing.T, doc string, sheets []string, width, height float64) {
	t.Helper()
	const mm = 72 / 25.4
	// Margins as in the style: 20 mm at the sides, 33 or 28 mm above and below.
	across := (width - 40*mm) * 96 / 72
	down := (height - 33*mm) * 96 / 72
	p := openedWith(t, doc, int(across), 1000, func(p *browser.Page) {
		p.Call(t, "Emulation.setEmulatedMedia", map[string]any{"media": "print"}, nil)
	})
	var figures []struct {
		Name, Break   string
		Right, Height float64
		Words         []string
	}
	p.Ask(t, `[...document.querySelectorAll("figure")].map(f => {
		const r = f.getBoundingClientRect(), right = Math.max(r.right, ...[...f.querySelectorAll("svg, svg text")].map(e => e.getBoundingClientRect().right));
		const words = [...f.querySelectorAll("svg text")].map(e => [...e.childNodes].filter(n => n.nodeType === 3).map(n => n.textContent).join("").trim()).sort((a, b) => b.length - a.length).slice(0, 5);
		return {name: f.querySelector("figcaption").textContent.trim().slice(0, 40), break: getComputedStyle(f).breakInside, right, height: r.height, words};
	})`, &figures)
	if len(figures) < 10 {
		t.Errorf("%d figures", len(figures))
	}
	plain := func(s string) string { return strings.Join(strings.Fields(s), "") }
	for i, f := range figures {
		if f.Break != "avoid" || f.Height > down || f.Right > across+1 {
			t.Errorf("%s: %.0f px high of %.0f, reaches to %.0f px of %.0f, break inside: %s", f.Name, f.Height, down, f.Right, across, f.Break)
		}
		at := slices.IndexFunc(sheets, func(s string) bool { return strings.Contains(plain(s), plain(f.Name)) })
		if at < 0 {
			t.Errorf("%s is not printed", f.Name)
			continue
		}
		for _, w := range figures[i].Words {
			if !strings.Contains(plain(sheets[at]), plain(w)) {
				t.Errorf("%s: %q of the figure is not on its page %d", f.Name, w, at+1)
			}
		}
	}
}
