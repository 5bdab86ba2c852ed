package guess

import (
	"bytes"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path"
	"path/filepath"
	"sort"
	"strconv"
	"strings"

	"sashlog/ingest/logfile"
)

// find lists the files below the paths, in order of name, and notes what
// cannot be opened.
func (p *Proposal) find() []*logfile.File {
	var out []*logfile.File
	seen := map[string]bool{}
	take := func(file string) {
		abs, err := filepath.Abs(file)
		if err != nil {
			abs = file
		}
		if seen[abs] {
			return
		}
		seen[abs] = true
		rel := p.relative(abs)
		files, bad := logfile.Find(p.Options.Into, rel)
		for _, b := range bad {
			p.note(b.Name, "cannot be read: "+b.Err.Error())
		}
		out = append(out, files...)
	}
	for _, root := range p.Options.Paths {
		st, err := os.Stat(root)
		if err != nil {
			p.note(filepath.ToSlash(root), "cannot be read: "+plainError(err))
			continue
		}
		if !st.IsDir() {
			take(root)
			continue
		}
		var files []string
		filepath.WalkDir(root, func(at string, d fs.DirEntry, err error) error {
			switch {
			case err != nil:
				p.note(filepath.ToSlash(at), "cannot be read: "+plainError(err))
				if d != nil && d.IsDir() {
					return fs.SkipDir
				}
			case at != root && strings.HasPrefix(d.Name(), "."), d.IsDir() && at != root && strings.HasPrefix(d.Name(), "sashlog-"):
				if d.IsDir() {
					return fs.SkipDir
				}
			case !d.IsDir():
				files = append(files, at)
			}
			return nil
		})
		sort.Strings(files)
		for _, f := range files {
			take(f)
		}
	}
	return out
}

func plainError(err error) string {
	if pe, ok := err.(*fs.PathError); ok {
		return pe.Err.Error()
	}
	return err.Error()
}

// relative writes a path as the site file will name it.
func (p *Proposal) relative(abs string) string {
	into, err := filepath.Abs(p.Options.Into)
	if err == nil {
		if r, err := filepath.Rel(into, abs); err == nil {
			return filepath.ToSlash(r)
		}
	}
	return filepath.ToSlash(abs)
}

func (p *Proposal) note(name, what string) {
	p.Files = append(p.Files, FileNote{Name: name, What: what})
}

// special recognises files that are no logs of points: what they are in
// words, empty when they may be a log.
func (p *Proposal) special(f *logfile.File) string {
	switch f.Kind {
	case logfile.Empty:
		return "empty"
	case logfile.Foreign:
		return "not a log: " + f.What
	case logfile.Parquet, logfile.Workbook:
		return ""
	}
	switch strings.ToLower(path.Ext(f.Unpacked())) {
	case ".yaml", ".yml", ".json", ".md", ".html", ".htm", ".xml", ".ttl", ".py", ".r", ".sql":
		return "not a log, by its ending"
	}
	switch strings.ToLower(f.Stem()) {
	case "readme", "license", "licence", "source":
		return "not a log, by its name"
	}
	r, err := f.Open(false)
	if err != nil {
		return "cannot be read: " + err.Error()
	}
	defer r.Close()
	head := make([]byte, 16<<10)
	n, err := io.ReadFull(r, head)
	if err != nil && err != io.EOF && err != io.ErrUnexpectedEOF {
		return "cannot be read: " + err.Error()
	}
	head = head[:n]
	first, _, _ := bytes.Cut(bytes.TrimPrefix(head, []byte("\xef\xbb\xbf")), []byte("\n"))
	line := strings.TrimSpace(string(first))
	switch {
	case strings.HasPrefix(line, "LOCATION,"):
		return p.typical(f, line)
	case strings.HasPrefix(line, "source,column,belongs_to"):
		return "a points table of sashlog"
	case strings.HasPrefix(line, "from,to,zones,kind"):
		return "a diary of sashlog"
	}
	return ""
}

// typical takes the place from the first line of a typical-year file.
func (p *Proposal) typical(f *logfile.File, line string) string {
	c := strings.Split(line, ",")
	if len(c) < 10 {
		return "a typical-year file with a damaged first line"
	}
	num := func(s string) float64 { v, _ := strconv.ParseFloat(strings.TrimSpace(s), 64); return v }
	if p.Typical == nil {
		p.Typical = &TypicalYear{Path: f.Name, Place: strings.TrimSpace(c[1]), LatitudeDeg: num(c[6]), LongitudeDeg: num(c[7]), ElevationM: num(c[9])}
	}
	p.Typical.Count++
	return fmt.Sprintf("typical-year weather (EPW) of %s; never stands in for measured weather", strings.TrimSpace(c[1]))
}
