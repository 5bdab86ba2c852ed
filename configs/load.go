// Package configs reads the description of a building: the site file
// (site.yaml), the points table (points.csv) and the diary (events.csv). It
// never reads a log. The steps of Load, in order:
//
//  1. read and decode the site file (toUTF8), parse it (parse);
//  2. index where each key stands; unknown and repeated keys (tree.check);
//  3. decode by viper into the raw types (decode); wrong types;
//  4. turn raw values into a site.Site and hold them against the rules
//     (builder); all problems are collected, none ends the run;
//  5. read the points table (readPoints) and the diary (readDiary).
package configs

import (
	"crypto/sha256"
	"embed"
	"encoding/hex"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"slices"
	"strings"

	"sashlog/configs/criteria"
	"sashlog/configs/site"
)

//go:embed schema.json
var schema []byte

//go:embed sample
var sample embed.FS

// Loaded is a site description that holds together.
type Loaded struct {
	Site     *site.Site
	Criteria criteria.Settings
	// Files are the files read, the site file first.
	Files []FileSum
	// FromEnvironment lists settings the environment replaced, as NAME=value.
	FromEnvironment []string
	// Warnings do not stop an audit but limit what it can say.
	Warnings Problems
}

// FileSum identifies the content of a file that was read. Path is relative to
// the folder of the site file where it was written so.
type FileSum struct {
	Path, SHA256 string
	Bytes        int64
}

// Schema returns the JSON Schema (2020-12) of the site file, for editors. The
// checks of Load are the authority; the schema catches most of them early.
func Schema() []byte { return slices.Clone(schema) }

// Sample returns the commented sample: site.yaml, points.csv and events.csv.
func Sample() fs.FS {
	sub, err := fs.Sub(sample, "sample")
	if err != nil {
		return sample
	}
	return sub
}

// Limits of size: files written by people are far smaller, and a mistaken
// path must not fill the memory.
const (
	siteFileMax  = 4 << 20
	pointsMax    = 64 << 20
	diaryFileMax = 16 << 20
	votesMax     = 64 << 20
)

// Load reads the site file at path with its points table and diary. env looks
// up the environment (nil means none); the few settings it may replace are
// SASHLOG_STEP_MIN, SASHLOG_REJECTED_SHARE and SASHLOG_CRITERIA_PRESET. The error, if any, is of type Problems and holds
// every mistake found.
func Load(path string, env func(string) string) (*Loaded, error) {
	file := filepath.ToSlash(path)
	raw, err := readFile(path, siteFileMax)
	if err != nil {
		return nil, Problems{{File: file, Text: "the site file cannot be read: " + reason(err)}}
	}
	t, p := parse(file, toUTF8(raw).text)
	if p != nil {
		return nil, Problems{*p}
	}
	b := build(t, toUTF8(raw).text, env)
	b.out.Site.Dir, b.out.Site.File = filepath.Dir(path), filepath.Base(path)
	b.sum(b.out.Site.File, raw)
	b.readTables()
	b.checkPresence()
	b.coverage()
	if ps := b.problems(); len(ps) > 0 {
		return nil, ps
	}
	b.out.Warnings = b.out.Warnings.tidy()
	return b.out, nil
}

// build runs steps 2 to 4.
func build(t *tree, text []byte, env func(string) string) *builder {
	t.check()
	b := &builder{tree: t, out: &Loaded{Site: &site.Site{}}, env: env}
	b.raw = decode(t, text, env)
	for _, e := range environment {
		if path := strings.ReplaceAll(e.path, delim, "."); t.fromEnv[path] != "" {
			b.out.FromEnvironment = append(b.out.FromEnvironment, e.name+"="+t.written[path])
		}
	}
	b.head()
	b.occupancy()
	b.zones()
	b.plant()
	b.criteria()
	b.logs()
	return b
}

// readTables reads the points tables, the diary and the votes from beside the
// site file.
func (b *builder) readTables() {
	for i, name := range b.raw.Points {
		where := fmt.Sprintf("points[%d]", i)
		if len(b.raw.Points) == 1 && !b.tree.has(where) {
			where = "points"
		}
		if raw := b.open(where, name, pointsMax); raw != nil {
			b.readPoints(b.shown(name), raw)
		}
	}
	if b.raw.Diary != "" {
		if raw := b.open("diary", b.raw.Diary, diaryFileMax); raw != nil {
			b.readDiary(b.shown(b.raw.Diary), raw)
		}
	}
	if b.raw.Votes != "" {
		if raw := b.open("votes", b.raw.Votes, votesMax); raw != nil {
			b.readVotes(b.shown(b.raw.Votes), raw)
		}
	}
}

// shown is how messages name a file beside the site file.
func (b *builder) shown(name string) string {
	if filepath.IsAbs(name) {
		return filepath.ToSlash(name)
	}
	return filepath.ToSlash(filepath.Join(filepath.Dir(b.tree.file), name))
}

func (b *builder) open(where, name string, most int64) []byte {
	path := name
	if !filepath.IsAbs(path) {
		path = filepath.Join(b.out.Site.Dir, name)
	}
	raw, err := readFile(path, most)
	if err != nil {
		b.tree.at(where, "paths start at the folder of the site file", "file %q cannot be read: %s", name, reason(err))
		return nil
	}
	b.sum(filepath.ToSlash(name), raw)
	return raw
}

func (b *builder) sum(name string, raw []byte) {
	h := sha256.Sum256(raw)
	b.out.Files = append(b.out.Files, FileSum{Path: name, SHA256: hex.EncodeToString(h[:]), Bytes: int64(len(raw))})
}

func readFile(path string, most int64) (_ []byte, err error) {
	f, err := os.Open(path)
	if err != nil {
		return nil, err
	}
	defer func() { err = errors.Join(err, f.Close()) }()
	raw, err := io.ReadAll(io.LimitReader(f, most+1))
	if err != nil {
		return nil, err
	}
	if int64(len(raw)) > most {
		return nil, fmt.Errorf("it is larger than %d MB, which no file of this kind is", most>>20)
	}
	return raw, nil
}

// reason drops the operation and path from an error of the file system.
func reason(err error) string {
	if errors.Is(err, fs.ErrNotExist) {
		return "there is no such file"
	}
	if errors.Is(err, fs.ErrPermission) {
		return "permission denied"
	}
	var pe *fs.PathError
	if errors.As(err, &pe) {
		return pe.Err.Error()
	}
	return err.Error()
}
