package configs

import (
	"fmt"
	"sort"
	"strings"

	"github.com/agnivade/levenshtein"
)

// Problem is one mistake in a file that a person wrote: where, what, and what
// to do about it. Line and Col are 1-based, 0 where they say nothing (a file
// that cannot be read, a setting from the environment).
type Problem struct {
	File      string
	Line, Col int
	Text      string
	Hint      string
}

// Error gives the form `site.yaml:3:7: text; hint: what to do`.
func (p Problem) Error() string {
	var b strings.Builder
	b.WriteString(p.File)
	if p.Line > 0 {
		fmt.Fprintf(&b, ":%d", p.Line)
		if p.Col > 0 {
			fmt.Fprintf(&b, ":%d", p.Col)
		}
	}
	if b.Len() > 0 {
		b.WriteString(": ")
	}
	b.WriteString(p.Text)
	if p.Hint != "" {
		b.WriteString("; hint: ")
		b.WriteString(p.Hint)
	}
	return b.String()
}

// Problems are all the mistakes found in one go, in the order of the files
// read and of the lines in them.
type Problems []Problem

// Error prints one problem per line.
func (ps Problems) Error() string {
	lines := make([]string, len(ps))
	for i, p := range ps {
		lines[i] = p.Error()
	}
	return strings.Join(lines, "\n")
}

// Limits that keep messages readable when a wrong file was named.
const (
	problemsPerFile = 200
	textMax         = 600 // characters of one problem's text
)

// tidy sorts the problems within each file, drops repetitions and cuts what
// nobody would read.
func (ps Problems) tidy() Problems {
	rank := map[string]int{}
	for _, p := range ps {
		if _, ok := rank[p.File]; !ok {
			rank[p.File] = len(rank)
		}
	}
	sort.SliceStable(ps, func(i, j int) bool {
		a, b := ps[i], ps[j]
		if rank[a.File] != rank[b.File] {
			return rank[a.File] < rank[b.File]
		}
		if a.Line != b.Line {
			return a.Line < b.Line
		}
		return a.Col < b.Col
	})
	var out Problems
	n := map[string]int{}
	for i, p := range ps {
		if i > 0 && p == ps[i-1] {
			continue
		}
		if n[p.File]++; n[p.File] <= problemsPerFile {
			p.Text, p.Hint = clip(p.Text), clip(p.Hint)
			out = append(out, p)
		}
	}
	for _, p := range ps {
		if more := n[p.File] - problemsPerFile; more > 0 {
			out = append(out, Problem{File: p.File, Text: fmt.Sprintf("%d more problems", more)})
			n[p.File] = 0
		}
	}
	return out
}

// clip shortens a text in the middle.
func clip(s string) string {
	r := []rune(s)
	if len(r) <= textMax {
		return s
	}
	return string(r[:textMax/2]) + " ... " + string(r[len(r)-textMax/3:])
}

// nearest returns the known word that is closest to what was written, or ""
// when none is close enough to be worth asking about.
func nearest(written string, known []string) string {
	w := strings.ToLower(strings.TrimSpace(written))
	if w == "" || len(w) > 64 {
		return ""
	}
	best, at := "", max(1, len([]rune(w))/3)
	for _, k := range known {
		if d := levenshtein.ComputeDistance(w, strings.ToLower(k)); d <= at && (best == "" || d < at) {
			best, at = k, d
		}
	}
	return best
}

// didYouMean is the hint for a word that is not known: the nearest one, else
// the list of what is allowed when it is short enough to read.
func didYouMean(written string, known []string) string {
	if n := nearest(written, known); n != "" {
		return fmt.Sprintf("did you mean %q?", n)
	}
	if len(known) == 0 {
		return ""
	}
	return "allowed are " + list(known)
}

// onlyNearest is the hint where the message itself lists what is allowed.
func onlyNearest(written string, known []string) string {
	if n := nearest(written, known); n != "" {
		return fmt.Sprintf("did you mean %q?", n)
	}
	return ""
}

// list joins words for a message, cut where it would get too long.
func list(words []string) string {
	const most = 40
	if len(words) > most {
		return strings.Join(words[:most], ", ") + fmt.Sprintf(" and %d more", len(words)-most)
	}
	return strings.Join(words, ", ")
}
