// Command pairs runs programs in turn, round after round, and compares them as
// pairs: the machine's speed drifts, a ratio within one round does not. It
// prints the wall time, processor time, peak memory and throughput of each
// (medians) and the median of each one's ratio to the first of its job.
//
//	pairs [-rounds N] JOBS.txt
//
// A line of JOBS.txt is: job, name, file read, rows, command; parted by tabs.
// Lines whose command does not exist are named and left out.
package main

import (
	"bufio"
	"cmp"
	"flag"
	"fmt"
	"os"
	"os/exec"
	"runtime"
	"slices"
	"strconv"
	"strings"
	"time"

	"gonum.org/v1/gonum/stat"
)

type job struct {
	job, name, file string
	rows            float64
	args            []string
	runs            []measured
}

type measured struct{ wallS, cpuS, peakMiB float64 }

func main() {
	rounds := flag.Int("rounds", 3, "how often each program runs")
	flag.Parse()
	if flag.NArg() != 1 {
		fmt.Fprintln(os.Stderr, "usage: pairs [-rounds N] JOBS.txt")
		os.Exit(2)
	}
	jobs, err := read(flag.Arg(0))
	if err == nil {
		err = measure(jobs, *rounds)
	}
	if err != nil {
		fmt.Fprintln(os.Stderr, "pairs:", err)
		os.Exit(1)
	}
	show(jobs)
}

func read(path string) ([]*job, error) {
	f, err := os.Open(path)
	if err != nil {
		return nil, err
	}
	defer f.Close()
	var jobs []*job
	lines := bufio.NewScanner(f)
	for no := 1; lines.Scan(); no++ {
		cells := strings.Split(lines.Text(), "\t")
		if len(cells) != 5 {
			return nil, fmt.Errorf("%s:%d: %d cells, not 5", path, no, len(cells))
		}
		rows, err := strconv.ParseFloat(cells[3], 64)
		if err != nil {
			return nil, fmt.Errorf("%s:%d: rows %q is no number", path, no, cells[3])
		}
		args := strings.Fields(cells[4])
		if _, err := exec.LookPath(args[0]); err != nil {
			fmt.Fprintf(os.Stderr, "left out: %s for %s: %v\n", cells[1], cells[0], err)
			continue
		}
		jobs = append(jobs, &job{job: cells[0], name: cells[1], file: cells[2], rows: rows, args: args})
	}
	return jobs, lines.Err()
}

func measure(jobs []*job, rounds int) error {
	for round := range rounds {
		for _, j := range jobs {
			fmt.Fprintf(os.Stderr, "round %d of %d: %s, %s\n", round+1, rounds, j.job, j.name)
			c := exec.Command(j.args[0], j.args[1:]...)
			c.Env = append(os.Environ(), "THREADS="+strconv.Itoa(runtime.GOMAXPROCS(0)))
			begin := time.Now()
			text, err := c.CombinedOutput()
			if err != nil {
				return fmt.Errorf("%s: %w: %s", strings.Join(j.args, " "), err, text)
			}
			j.runs = append(j.runs, measured{time.Since(begin).Seconds(),
				(c.ProcessState.UserTime() + c.ProcessState.SystemTime()).Seconds(), peakMiB(c.ProcessState)})
		}
	}
	return nil
}

func show(jobs []*job) {
	fmt.Printf("%-14s %-22s %9s %9s %9s %9s %12s %18s\n", "job", "program", "wall s", "cpu s", "peak MiB", "MB/s", "rows/s", "wall, paired")
	var first *job
	for _, j := range jobs {
		if first == nil || first.job != j.job {
			first = j
		}
		wall := median(j, func(m measured) float64 { return m.wallS })
		size := 0.0
		if fi, err := os.Stat(j.file); err == nil {
			size = float64(fi.Size()) / 1e6
		}
		ratios := make([]float64, len(j.runs))
		for i := range j.runs {
			ratios[i] = j.runs[i].wallS / first.runs[i].wallS
		}
		slices.Sort(ratios)
		fmt.Printf("%-14s %-22s %9.2f %9.2f %9.0f %9.0f %12.0f %6.3f (%.3f to %.3f)\n", j.job, j.name, wall,
			median(j, func(m measured) float64 { return m.cpuS }), median(j, func(m measured) float64 { return m.peakMiB }),
			size/wall, j.rows/wall, stat.Quantile(0.5, stat.Empirical, ratios, nil), ratios[0], ratios[len(ratios)-1])
	}
}

func median(j *job, of func(measured) float64) float64 {
	list := make([]float64, len(j.runs))
	for i, m := range j.runs {
		list[i] = of(m)
	}
	slices.SortFunc(list, cmp.Compare[float64])
	return stat.Quantile(0.5, stat.Empirical, list, nil)
}
