package page_test

import (
	"context"
	"fmt"
	"html"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"strconv"
	"strings"
	"testing"
	"time"

	"sashlog/report/internal/sample"
)

// need skips a test without its tools, or fails it where they are required.
func need(t *testing.T, tools ...string) {
	t.Helper()
	for _, tool := range tools {
		if _, err := exec.LookPath(tool); err != nil {
			if os.Getenv("SASHLOG_REQUIRE_TOOLS") == "1" {
				t.Fatalf("%s is not installed and SASHLOG_REQUIRE_TOOLS=1 asks for it", tool)
			}
			t.Skipf("%s is not installed: the printed page is not tested (Debian: apt-get install chromium poppler-utils fonts-liberation)", tool)
		}
	}
}

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

func browse(t *testing.T, file string, args ...string) string {
	t.Helper()
	base := []string{"--headless", "--no-sandbox", "--disable-gpu", "--disable-dev-shm-usage", "--hide-scrollbars", "--user-data-dir=" + t.TempDir()}
	return run(t, "chromium", append(append(base, args...), "file://"+file)...)
}

func save(t *testing.T, name, doc string) string {
	t.Helper()
	path := filepath.Join(t.TempDir(), name)
	if err := os.WriteFile(path, []byte(doc), 0o644); err != nil {
		t.Fatal(err)
	}
	return path
}

// TestPrint prints to both papers. Sizes in points: ISO 216 (A4, 210 × 297 mm)
// and ANSI/ASME Y14.1 (Letter, 8.5 × 11 in).
func TestPrint(t *testing.T) {
	need(t, "chromium", "pdfinfo", "pdftotext", "pdffonts")
	for _, p := range []struct {
		paper         string
		width, height float64
	}{{"A4", 595.28, 841.89}, {"Letter", 612, 792}} {
		t.Run(p.paper, func(t *testing.T) {
			in := input(sample.Make(sample.Options{Days: 365, Zones: 12}))
			in.Paper = p.paper
			pdf := filepath.Join(t.TempDir(), "report.pdf")
			browse(t, save(t, "report.html", write(t, in)), "--no-pdf-header-footer", "--print-to-pdf="+pdf)
			info := run(t, "pdfinfo", pdf)
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
			if n < 10 || n > 40 {
				t.Errorf("%d pages", n)
			}
			for i := 1; i <= n; i++ {
				text := run(t, "pdftotext", "-layout", "-f", strconv.Itoa(i), "-l", strconv.Itoa(i), pdf, "-")
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
			box := regexp.MustCompile(`yMin="([\d.]+)" xMax="[\d.]+" yMax="([\d.]+)">Harbour<`).FindAllStringSubmatch(run(t, "pdftotext", "-bbox", "-l", "1", pdf, "-"), -1)
			tallest := 0.0
			for _, m := range box {
				top, _ := strconv.ParseFloat(m[1], 64)
				bottom, _ := strconv.ParseFloat(m[2], 64)
				tallest = max(tallest, bottom-top)
			}
			if tallest < 21.5 || tallest > 23 {
				t.Errorf("the title is %.1f points tall, want about 22: something wider than the paper shrinks the print", tallest)
			}
			for _, line := range strings.Split(strings.TrimSpace(run(t, "pdffonts", pdf)), "\n")[2:] {
				if f := strings.Fields(line); len(f) > 5 && f[len(f)-5] != "yes" {
					t.Errorf("font is not embedded: %s", line)
				}
			}
			// Headings of long tables stand again on their later pages.
			all := run(t, "pdftotext", "-layout", pdf, "-")
			if strings.Count(all, "95 % below") < 2 {
				t.Error("the heading of the CO2 table is not repeated on its second page")
			}
		})
	}
}

// TestNarrow opens the report in frames of a phone's and a desk's width and
// asks the browser for anything that makes the page wider than its frame.
func TestNarrow(t *testing.T) {
	need(t, "chromium")
	long := strings.Repeat("Unbreakablenamewithoutanyspace", 8)
	for _, c := range []struct {
		name string
		o    sample.Options
	}{
		{"year", sample.Options{Days: 365, Zones: 12}},
		{"long names", sample.Options{Days: 14, Zones: 3, Names: []string{long, long + "2", "c"}, People: []float64{9, 9, 9}}},
	} {
		in := input(sample.Make(c.o))
		in.Provenance.Command = "sashlog audit /" + long + "/site.yaml"
		doc := write(t, in)
		for _, width := range []int{360, 1280} {
			wrapper := fmt.Sprintf(`<!DOCTYPE html><body><iframe id="f" style="width:%dpx;height:3000px;border:0" srcdoc="%s"></iframe><pre id="out">not measured</pre><script>
document.getElementById("f").onload = e => {
  const d = e.target.contentDocument, wide = [];
  for (const x of d.body.querySelectorAll("*")) {
    if (x.closest(".scroll") && !x.matches(".scroll") || x.matches(".skip") || x.closest("svg")) continue;
    if (x.getBoundingClientRect().right > %d + 0.5) wide.push(x.tagName + "." + x.className);
  }
  const bare = [...d.querySelectorAll("svg[role=img]")].filter(s => !s.querySelector("title")).length;
  const all = d.documentElement.scrollWidth;
  e.target.remove();
  document.getElementById("out").textContent = "width " + all + " wide [" + wide.slice(0, 5) + "] untitled " + bare;
};
</script></body>`, width, html.EscapeString(doc), width)
			dom := browse(t, save(t, "frame.html", wrapper), "--virtual-time-budget=20000", "--dump-dom", "--window-size=1400,3200")
			m := regexp.MustCompile(`<pre id="out">(.*?)</pre>`).FindStringSubmatch(dom)
			if want := fmt.Sprintf("width %d wide [] untitled 0", width); m == nil || m[1] != want {
				t.Errorf("%s at %d px: got %q, want %q", c.name, width, m, want)
			}
		}
	}
}
