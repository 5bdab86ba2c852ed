package guess

import (
	"math"
	"sort"
	"strings"

	"sashlog/configs/site"
	"sashlog/ingest/cell"
	"sashlog/ingest/reading"
)

// Track is one logged column: where it stands, what it is called and what its
// values look like.
type Track struct {
	Log    *Log
	Source string // as points.csv names it
	Column string
	// Name parts: what the column itself is called, and what stands around it
	// (the key of a long log's rows, the file, the sheet).
	name, around string
	unitText     string // unit written beside the values
	// Stamp is where in its interval a value stands, empty when not known.
	Stamp site.Stamp
	index int

	Guess
	names *naming
	// counted: another track of the same name counts above 1.
	counted bool

	n, empty, missing int
	number            int
	words             map[string]int // texts that are no numbers, capped
	order             []string       // words in the order met
	marks             map[string]int // missing markers met
	min, max          float64
	minN, maxN        int
	sum               float64
	whole             bool
	distinct          map[float64]int // capped at distinctMax
	equal             int             // values equal to the one before
	same              float64
	sample            []float64
	stride            int
	pace              pace
	zeros             int

	bins bins
}

const (
	distinctMax = 64
	wordsMax    = 60
	valuesMax   = 4000
)

// binS is the length of a bin of a track's series, seconds.
const binS = 900

// bins is a track's series in steps of a quarter hour of written time: means
// of numbers, the last state's code. Steps without a record keep the value
// before for at most a day and an hour.
type bins struct {
	from   int64 // index of the first bin: seconds / binS
	mean   []float32
	count  int // records in the bin filled last
	filled bool
	sum    float64
}

const (
	binsMax  = 400_000
	holdBins = 100
)

func (b *bins) add(t int64, v float64, state bool) {
	k := t / binS
	if !b.filled {
		b.from, b.filled = k, true
	}
	i := k - b.from
	if i < 0 || i >= binsMax {
		return
	}
	last := int64(len(b.mean)) - 1
	switch {
	case i < last: // out of order: only empty bins are filled
		if math.IsNaN(float64(b.mean[i])) {
			b.mean[i] = float32(v)
		}
		return
	case i == last:
		b.count++
		b.sum += v
	default:
		hold := float32(math.NaN())
		if last >= 0 && i-last <= holdBins {
			hold = b.mean[last]
		}
		for int64(len(b.mean)) < i {
			b.mean = append(b.mean, hold)
		}
		b.mean = append(b.mean, 0)
		b.count, b.sum = 1, v
	}
	if state {
		b.mean[i] = float32(v)
		return
	}
	b.mean[i] = float32(b.sum / float64(b.count))
}

// at is the value of a bin by absolute index, NaN where there is none.
func (b *bins) at(k int64) float64 {
	i := k - b.from
	if i < 0 || i >= int64(len(b.mean)) {
		return math.NaN()
	}
	return float64(b.mean[i])
}

// adder fills a track; it keeps the decoder that knows missing markers.
type adder struct {
	t     *Track
	style cell.Style
	dec   *cell.Decoder
}

func newAdder(t *Track, style cell.Style) *adder {
	t.words, t.marks, t.distinct = map[string]int{}, map[string]int{}, map[float64]int{}
	t.whole, t.stride, t.same = true, 1, math.NaN()
	t.min, t.max = math.Inf(1), math.Inf(-1)
	p := site.Point{Quantity: site.SetpointHeat}
	return &adder{t: t, style: style, dec: cell.NewDecoder(-1, &p, style, nil)}
}

// add takes one cell. at is the time on the written clock, dated whether it is
// known.
func (a *adder) add(b []byte, at int64, dated bool) {
	t := a.t
	t.n++
	if v, k := cell.Short(b, a.style.Mark); k > 0 && k == len(b) && v > -999 {
		t.value(v, at, dated)
		return
	}
	if len(b) == 0 {
		t.empty++
		return
	}
	text := strings.TrimSpace(cell.Text(b, a.style.Latin))
	if text == "" {
		t.empty++
		return
	}
	v, rest, ok := a.style.Number([]byte(text))
	if ok && (len(rest) == 0 || isUnit(string(rest))) {
		if v == -999 || v == -9999 || v == -99999 {
			t.missing++
			t.mark(text)
			return
		}
		if len(rest) > 0 && t.unitText == "" {
			t.unitText = string(rest)
		}
		t.value(v, at, dated)
		return
	}
	if _, why, _ := a.dec.Decode([]byte(text)); why == reading.Missing {
		t.missing++
		t.mark(text)
		return
	}
	if t.words[text] == 0 {
		if len(t.words) >= wordsMax {
			text = "" // too many to be states
		}
		if t.words[text] == 0 {
			t.order = append(t.order, text)
		}
	}
	t.words[text]++
	if dated {
		t.pace.add(at)
		code := 0
		for i, w := range t.order {
			if w == text {
				code = i
			}
		}
		if float64(code) == t.same {
			t.equal++
		}
		t.same = float64(code)
		t.bins.add(at, float64(code), true)
	}
}

func (t *Track) mark(s string) {
	if len(t.marks) < 8 || t.marks[s] > 0 {
		t.marks[s]++
	}
}

func (t *Track) value(v float64, at int64, dated bool) {
	t.number++
	switch {
	case v < t.min:
		t.min, t.minN = v, 1
	case v == t.min:
		t.minN++
	}
	switch {
	case v > t.max:
		t.max, t.maxN = v, 1
	case v == t.max:
		t.maxN++
	}
	t.sum += v
	t.whole = t.whole && v == math.Trunc(v)
	if v == 0 {
		t.zeros++
	}
	if v == t.same {
		t.equal++
	}
	t.same = v
	if len(t.distinct) < distinctMax || t.distinct[v] > 0 {
		t.distinct[v]++
	}
	if (t.number-1)%t.stride == 0 {
		t.sample = append(t.sample, v)
		if len(t.sample) == valuesMax {
			for i := 0; i < valuesMax/2; i++ {
				t.sample[i] = t.sample[2*i]
			}
			t.sample = t.sample[:valuesMax/2]
			t.stride *= 2
		}
	}
	if dated {
		t.pace.add(at)
		t.bins.add(at, v, false)
	}
}

// finish sorts the sample.
func (t *Track) finish() {
	sort.Float64s(t.sample)
}

// q is a quantile of the sampled values, NaN without any.
func (t *Track) q(p float64) float64 {
	if len(t.sample) == 0 {
		return math.NaN()
	}
	return t.sample[int(p*float64(len(t.sample)-1)+0.5)]
}

// textual reports a column of words.
func (t *Track) textual() bool { return len(t.words) > 0 && t.number*4 < t.wordN() }

func (t *Track) wordN() int {
	n := 0
	for _, c := range t.words {
		n += c
	}
	return n
}

// binary reports numbers that are only 0 and 1.
func (t *Track) binary() bool {
	if t.number == 0 || t.textual() {
		return false
	}
	for v := range t.distinct {
		if v != 0 && v != 1 {
			return false
		}
	}
	return true
}

// daily is the middle of the daily swings (highest less lowest quarter-hour),
// NaN without whole days.
func (t *Track) daily() float64 {
	var swings []float64
	for i := 0; i < len(t.bins.mean); {
		to := min(len(t.bins.mean), i+int(96-(t.bins.from+int64(i))%96))
		lo, hi, n := math.Inf(1), math.Inf(-1), 0
		for _, v := range t.bins.mean[i:to] {
			if v == v {
				lo, hi = math.Min(lo, float64(v)), math.Max(hi, float64(v))
				n++
			}
		}
		if n > 72 {
			swings = append(swings, hi-lo)
		}
		i = to
	}
	return half(swings)
}
