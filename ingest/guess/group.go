package guess

import (
	"fmt"
	"path"
	"regexp"
	"sort"
	"strings"

	"sashlog/configs/site"
)

// Log is one group of files that were written the same way.
type Log struct {
	Name    string
	Setting site.Log // as it goes into the site file
	Charset string
	// DateProof says in words how the order of day and month is known;
	// DateOpen that it is not.
	DateProof string
	DateOpen  bool
	Undated   bool
	Clock     string
	ClockWhy  string
	Missing   []string
	// Blank are columns without any value.
	Blank         []string
	Notes, Doubts []string
	Files         int
	FirstS, LastS int64 // on the written clock
	IntervalS     int64

	shapes   []*shape
	lead     int  // words that all names begin with
	bySource bool // points name the file, since several share a name of column
	tracks   map[string]*Track
}

// group puts shapes that were written the same way into one log.
func (p *Proposal) group(shapes []*shape) {
	type family struct{ list []*shape }
	families := map[string]*family{}
	var order []string
	for _, s := range shapes {
		sig := strings.Join(s.names, "\x01")
		dir := path.Dir(s.file.Name)
		if a := s.file.Archive(); a != "" {
			dir = s.file.Name[:strings.Index(s.file.Name, a)+len(a)]
		}
		if s.generic {
			sig = "one value/" + fmt.Sprint(len(s.names))
		}
		key := fmt.Sprint(dir, "\x02", s.log.Layout, "\x02", sig, "\x02", s.log.Sheet, "\x02", s.undated)
		if families[key] == nil {
			families[key] = &family{}
			order = append(order, key)
		}
		families[key].list = append(families[key].list, s)
	}
	var single []*shape // members of archives that no family joins
	for _, k := range order {
		list := families[k].list
		switch {
		case list[0].generic && (len(list) > 1 || speaks(tokens(list[0].file.Stem()))), len(list) >= 3 && len(list[0].values) == 1 && list[0].log.Layout == site.Wide && overlap(list):
			p.perPoint(list)
		case len(list) > 1 && !overlap(list) && p.glob(list) != "":
			p.add(list, p.glob(list), stemOf(list))
		default:
			single = append(single, p.parts(list)...)
		}
	}
	p.singles(single)
	p.nameLogs()
}

// parts joins files of one thing split by date ("room 101 2025-01.csv") and
// returns those that stand alone.
func (p *Proposal) parts(list []*shape) (single []*shape) {
	byStem := map[string][]*shape{}
	var order []string
	for _, s := range list {
		var stem []string
		ts := tokens(s.file.Stem())
		for i := 0; i < len(ts); i++ {
			var next *token
			if i+1 < len(ts) {
				next = &ts[i+1]
			}
			if ts[i].number && dateLike(ts[i].fold, next) {
				for i+1 < len(ts) && ts[i+1].number && len(ts[i+1].fold) <= 2 {
					i++
				}
				continue
			}
			stem = append(stem, ts[i].fold)
		}
		k := strings.Join(stem, " ")
		if byStem[k] == nil {
			order = append(order, k)
		}
		byStem[k] = append(byStem[k], s)
	}
	for _, k := range order {
		group := byStem[k]
		if len(group) > 1 && group[0].file.Archive() == "" && !overlap(group) && p.glob(group) != "" {
			p.add(group, p.glob(group), k)
			continue
		}
		single = append(single, group...)
	}
	return single
}

// overlap reports whether the files' times overlap by more than a day: then
// they are different things and not parts of one.
func overlap(list []*shape) bool {
	by := append([]*shape{}, list...)
	sort.SliceStable(by, func(i, j int) bool { return by[i].firstS < by[j].firstS })
	for i := 1; i < len(by); i++ {
		if by[i].firstS < by[i-1].lastS-86400 || by[i].undated {
			return true
		}
	}
	return false
}

var figures = regexp.MustCompile(`[0-9]+`)

// glob is a pattern for the files of one folder (or their archive) that
// matches no other file met; empty when there is none.
func (p *Proposal) glob(list []*shape) string {
	if a := list[0].file.Archive(); a != "" {
		return list[0].file.Name[:strings.Index(list[0].file.Name, a)+len(a)]
	}
	names := make([]string, len(list))
	for i, s := range list {
		names[i] = s.file.Name
	}
	pre, suf := names[0], names[0]
	for _, n := range names[1:] {
		for !strings.HasPrefix(n, pre) {
			pre = pre[:len(pre)-1]
		}
		for !strings.HasSuffix(n, suf) {
			suf = suf[1:]
		}
	}
	if strings.LastIndexByte(pre, '/') < strings.LastIndexByte(names[0], '/') || len(pre)+len(suf) > len(names[0]) {
		return ""
	}
	pattern := pre + "*" + suf
	mine := map[string]bool{}
	for _, n := range names {
		mine[n] = true
	}
	for n := range p.seen {
		if ok, err := path.Match(pattern, n); err != nil || ok && !mine[n] {
			return ""
		}
	}
	return pattern
}

func stemOf(list []*shape) string {
	s := figures.ReplaceAllString(list[0].file.Stem(), "")
	s = strings.Trim(s, " -_.")
	if s == "" {
		s = list[0].file.Stem()
	}
	return s
}

// perPoint makes one log of files that hold one point each.
func (p *Proposal) perPoint(list []*shape) {
	f := list[0].file
	at := path.Dir(f.Name) + "/"
	name := path.Base(path.Dir(f.Name))
	if name == "." || name == ".." {
		name = "points"
	}
	if a := f.Archive(); a != "" {
		at = f.Name[:strings.Index(f.Name, a)+len(a)]
		name = strings.TrimSuffix(a, path.Ext(a))
	} else {
		ext := path.Ext(f.Base)
		same := ext != ""
		for _, s := range list {
			same = same && path.Ext(s.file.Base) == ext
		}
		if same {
			at += "*" + ext
		}
	}
	if len(list) == 1 {
		at = f.Name
		name = f.Stem()
	}
	for _, s := range list {
		s.log.Layout = site.PerPoint
	}
	p.add(list, at, name)
}

// singles makes a log of each file; members of one archive share one, since a
// path names the whole archive.
func (p *Proposal) singles(list []*shape) {
	archives := map[string][]*shape{}
	for _, s := range list {
		a := s.file.Archive()
		if a == "" {
			p.add([]*shape{s}, s.file.Name, s.file.Stem())
			continue
		}
		at := s.file.Name[:strings.Index(s.file.Name, a)+len(a)]
		archives[at] = append(archives[at], s)
	}
	var ats []string
	for at := range archives {
		ats = append(ats, at)
	}
	sort.Strings(ats)
	for _, at := range ats {
		byLayout := map[site.Layout][]*shape{}
		var layouts []site.Layout
		for _, s := range archives[at] {
			if byLayout[s.log.Layout] == nil {
				layouts = append(layouts, s.log.Layout)
			}
			byLayout[s.log.Layout] = append(byLayout[s.log.Layout], s)
		}
		base := path.Base(at)
		for i, lay := range layouts {
			l := p.add(byLayout[lay], at, strings.TrimSuffix(base, path.Ext(base)))
			l.bySource = len(byLayout[lay]) > 1
			if i > 0 {
				l.Doubts = append(l.Doubts, "the archive holds files of different layouts: unpack it, so that each can be named by its own path")
			}
		}
	}
}

// add makes a log of shapes.
func (p *Proposal) add(list []*shape, at, name string) *Log {
	first := list[0]
	l := &Log{Name: name, Setting: first.log, Charset: first.charset, shapes: list, Files: len(list), Undated: first.undated,
		DateProof: first.proof, DateOpen: first.doubtful, FirstS: first.firstS, LastS: first.lastS, IntervalS: first.intervalS, Notes: first.notes}
	l.Setting.Path, l.Setting.DateOrder = at, first.order
	for _, s := range list[1:] {
		l.FirstS, l.LastS = min(l.FirstS, s.firstS), max(l.LastS, s.lastS)
		if s.proof != "" && !s.doubtful && l.DateOpen || l.Setting.DateOrder == "" && s.order != "" {
			l.DateProof, l.DateOpen, l.Setting.DateOrder = s.proof+" of "+s.file.Base, false, s.order
		}
		l.merge(s)
	}
	for _, s := range list {
		if l.Setting.DateOrder != "" && s.order != l.Setting.DateOrder {
			s.order, s.doubtful = l.Setting.DateOrder, false
		}
		p.Files = append(p.Files, FileNote{Name: s.file.Name, What: s.words(), Log: name})
	}
	p.Logs = append(p.Logs, l)
	return l
}

// merge drops settings that the files of a log do not share: they are found
// by looking at each.
func (l *Log) merge(s *shape) {
	if l.Setting.TimeColumn != s.log.TimeColumn || l.Setting.DateColumn != s.log.DateColumn {
		l.Setting.TimeColumn, l.Setting.DateColumn, l.Setting.ClockColumn = "", "", ""
	}
	if l.Setting.Separator != s.log.Separator {
		l.Setting.Separator = 0
	}
	if l.Setting.Decimal == 0 {
		l.Setting.Decimal = s.log.Decimal
	} else if s.log.Decimal != 0 && l.Setting.Decimal != s.log.Decimal {
		l.Setting.Decimal = 0
	}
	if l.Charset != s.charset {
		l.Charset = ""
	}
}

// words say what a file is, in one line.
func (s *shape) words() string {
	switch {
	case s.undated:
		return "times of day without a date: cannot be placed in time"
	case s.log.Layout == site.Long:
		return fmt.Sprintf("one row per reading, named by %s", strings.Join(s.log.KeyColumns, ", "))
	case s.log.Layout == site.PerPoint:
		return "one point"
	}
	return fmt.Sprintf("one row per instant, %d value columns", len(s.values))
}

// nameMarks would be read as patterns in the points table.
var nameMarks = strings.NewReplacer("*", "_", "?", "_", "[", "(", "]", ")", `\`, "_")

// nameLogs gives every log a name of its own.
func (p *Proposal) nameLogs() {
	used := map[string]int{}
	for _, l := range p.Logs {
		name := strings.TrimSpace(nameMarks.Replace(l.Name))
		if name == "" || name == "." {
			name = "log"
		}
		if l.Setting.Sheet != "" {
			name += " " + l.Setting.Sheet
		}
		if strings.HasPrefix(name, "#") { // such a row of the points table would be a remark
			name = "log " + name
		}
		used[name]++
		if n := used[name]; n > 1 {
			name = fmt.Sprintf("%s (%d)", name, n)
		}
		for i := range p.Files {
			if p.Files[i].Log == l.Name {
				for _, s := range l.shapes {
					if s.file.Name == p.Files[i].Name {
						p.Files[i].Log = name
					}
				}
			}
		}
		l.Name = name
	}
}
