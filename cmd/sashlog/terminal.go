package main

import (
	"io"
	"os"
	"strings"
	"unicode"

	"github.com/vbauerster/mpb/v8"
	"github.com/vbauerster/mpb/v8/decor"
	"golang.org/x/term"
)

// printable makes foreign text harmless in a terminal: control characters and
// marks that turn the direction of writing become spaces; line ends stay.
func printable(s string) string {
	return strings.Map(func(r rune) rune {
		switch {
		case r == '\n' || r == '\t':
			return r
		case unicode.IsControl(r), unicode.Is(unicode.Cf, r), r == '\u2028', r == '\u2029':
			return ' '
		}
		return r
	}, s)
}

// progress shows a bar over bytes on a terminal and nothing elsewhere.
type progress struct {
	container *mpb.Progress
	bar       *mpb.Bar
}

// newProgress is silent unless stderr is a terminal that can redraw.
func newProgress(stderr io.Writer, quiet bool, env func(string) string) *progress {
	f, isFile := stderr.(*os.File)
	if quiet || !isFile || !term.IsTerminal(int(f.Fd())) || env("TERM") == "dumb" || env("CI") != "" {
		return &progress{}
	}
	return &progress{container: mpb.New(mpb.WithOutput(stderr), mpb.WithWidth(40))}
}

// at sets how many bytes of how many are read.
func (p *progress) at(done, total int64) {
	if p.container == nil {
		return
	}
	if p.bar == nil {
		p.bar = p.container.AddBar(total,
			mpb.BarRemoveOnComplete(),
			mpb.PrependDecorators(decor.Name("reading "), decor.CountersKibiByte("% .1f of % .1f")),
			mpb.AppendDecorators(decor.AverageETA(decor.ET_STYLE_GO, decor.WCSyncSpace)))
	}
	p.bar.SetTotal(total, false)
	p.bar.SetCurrent(done)
}

// end removes the bar.
func (p *progress) end() {
	if p.container == nil {
		return
	}
	if p.bar != nil {
		p.bar.Abort(true)
	}
	p.container.Wait()
}
