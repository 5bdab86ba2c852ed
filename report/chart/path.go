package chart

import (
	"math"
	"strconv"

	"gonum.org/v1/plot/vg"
)

// pathData writes SVG path data with relative commands. Positions are kept as
// whole hundredths of a point: rounding happens once, on the absolute
// position, so that relative steps never drift and bytes are the same for the
// same data.
type pathData struct {
	buf            []byte
	x, y           int64 // current position
	startX, startY int64 // start of the current sub-path
	begun          bool
	last           byte // last command letter
}

func hundredths(v float64) int64 { return int64(math.Round(v * 100)) }

// appendHundredths appends v/100 in its shortest form: ".5", "-3.25", "12".
func appendHundredths(b []byte, v int64) []byte {
	if v < 0 {
		b = append(b, '-')
		v = -v
	}
	whole, frac := v/100, v%100
	if whole > 0 || frac == 0 {
		b = strconv.AppendInt(b, whole, 10)
	}
	if frac > 0 {
		b = append(b, '.', byte('0'+frac/10))
		if frac%10 > 0 {
			b = append(b, byte('0'+frac%10))
		}
	}
	return b
}

func (p *pathData) command(c byte) {
	if p.last == c && c != 'M' && c != 'z' {
		return // a repeated command letter may be left out
	}
	p.buf = append(p.buf, c)
	p.last = c
}

func (p *pathData) number(v int64) {
	if n := len(p.buf); v >= 0 && n > 0 {
		if c := p.buf[n-1]; c >= '0' && c <= '9' || c == '.' {
			p.buf = append(p.buf, ' ')
		}
	}
	p.buf = appendHundredths(p.buf, v)
}

func (p *pathData) move(x, y float64) {
	hx, hy := hundredths(x), hundredths(y)
	if !p.begun {
		p.command('M')
		p.number(hx)
		p.number(hy)
		p.begun = true
	} else {
		p.buf = append(p.buf, 'm')
		p.number(hx - p.x)
		p.number(hy - p.y)
	}
	p.last = 'm' // following pairs would be read as lines: never leave out the letter
	p.x, p.y, p.startX, p.startY = hx, hy, hx, hy
}

func (p *pathData) line(x, y float64) {
	hx, hy := hundredths(x), hundredths(y)
	dx, dy := hx-p.x, hy-p.y
	switch {
	case dx == 0 && dy == 0:
		return
	case dy == 0:
		p.command('h')
		p.number(dx)
	case dx == 0:
		p.command('v')
		p.number(dy)
	default:
		p.command('l')
		p.number(dx)
		p.number(dy)
	}
	p.x, p.y = hx, hy
}

func (p *pathData) curve(letter byte, pts ...vg.Point) {
	p.command(letter)
	var hx, hy int64
	for _, pt := range pts {
		hx, hy = hundredths(float64(pt.X)), hundredths(float64(pt.Y))
		p.number(hx - p.x)
		p.number(hy - p.y)
	}
	p.x, p.y = hx, hy
}

func (p *pathData) arc(r float64, large, sweep bool, x, y float64) {
	hx, hy, hr := hundredths(x), hundredths(y), hundredths(r)
	flag := func(b bool) int64 {
		if b {
			return 100
		}
		return 0
	}
	p.command('a')
	for _, v := range []int64{hr, hr, 0, flag(large), flag(sweep), hx - p.x, hy - p.y} {
		p.number(v)
	}
	p.x, p.y = hx, hy
}

func (p *pathData) close() {
	p.command('z')
	p.x, p.y = p.startX, p.startY
}
