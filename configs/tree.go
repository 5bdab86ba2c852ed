package configs

import (
	"bytes"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"math"
	"reflect"
	"strconv"
	"strings"

	"sashlog/configs/criteria"

	"go.yaml.in/yaml/v3"
)

// place is where a key and its value stand in the site file.
type place struct{ keyLine, keyCol, line, col int }

// tree is the site file as written: its nodes and where each path of keys is
// found. Paths look like zones[0].area_m2, in lower case.
type tree struct {
	file   string
	root   *yaml.Node
	places map[string]place
	// written holds the text of single values, for messages; kinds says what
	// else stands at a path: a list or a group of keys.
	written, kinds map[string]string
	// void marks empty entries of lists: nothing more is said about them.
	void map[string]bool
	// fromEnv names the environment variable that set a path.
	fromEnv  map[string]string
	problems Problems
}

// parse reads the text of a site file. It returns a problem, not a tree, when
// the text is not YAML at all.
func parse(file string, text []byte) (*tree, *Problem) {
	dec := yaml.NewDecoder(bytes.NewReader(text))
	var doc, second yaml.Node
	if err := dec.Decode(&doc); err != nil {
		if errors.Is(err, io.EOF) {
			return nil, &Problem{File: file, Line: 1, Col: 1, Text: "the site file is empty", Hint: "start from the commented sample"}
		}
		return nil, notYAML(file, text, err)
	}
	t := &tree{file: file, root: &doc, places: map[string]place{},
		written: map[string]string{}, kinds: map[string]string{}, void: map[string]bool{}, fromEnv: map[string]string{}}
	if len(doc.Content) != 1 || doc.Content[0].Kind != yaml.MappingNode {
		return nil, &Problem{File: file, Line: max(doc.Line, 1), Col: max(doc.Column, 1),
			Text: "the site file must be a list of keys with values", Hint: "start from the commented sample"}
	}
	t.root = doc.Content[0]
	if err := dec.Decode(&second); err == nil {
		t.addAt(second.Line, second.Column, "a second document begins here: a site file holds one", "remove the line ---")
	} else if !errors.Is(err, io.EOF) {
		return nil, notYAML(file, text, err)
	}
	return t, nil
}

func (t *tree) addAt(line, col int, text, hint string) {
	t.problems = append(t.problems, Problem{t.file, line, col, text, hint})
}

// at adds a problem at the value of a path; when the path was not written, at
// the nearest part of it that was.
func (t *tree) at(path, hint, format string, args ...any) {
	if t.void[path] {
		return
	}
	t.problems = append(t.problems, t.problem(path, hint, format, args...))
}

func (t *tree) problem(path, hint, format string, args ...any) Problem {
	if name := t.fromEnv[path]; name != "" {
		return Problem{File: "environment variable " + name, Text: fmt.Sprintf(format, args...), Hint: hint}
	}
	line, col := t.where(path)
	return Problem{t.file, line, col, fmt.Sprintf(format, args...), hint}
}

// where returns the line and column of the value at a path.
func (t *tree) where(path string) (line, col int) {
	for p := path; p != ""; p = parent(p) {
		pl, ok := t.places[p]
		if !ok {
			continue
		}
		if p != path && pl.keyLine > 0 {
			return pl.keyLine, pl.keyCol
		}
		return pl.line, pl.col
	}
	return t.root.Line, t.root.Column
}

// has reports whether the path was written.
func (t *tree) has(path string) bool { _, ok := t.places[path]; return ok }

func parent(path string) string {
	if i := strings.LastIndexAny(path, ".["); i > 0 {
		return path[:i]
	}
	return ""
}

// check walks the nodes beside the raw type: it fills the index and reports
// unknown keys, keys written twice (in any case), empty values and references
// to values elsewhere in the file.
func (t *tree) check() { t.walk(t.root, "", reflect.TypeFor[rawSite]()) }

func (t *tree) walk(n *yaml.Node, path string, as reflect.Type) {
	if path != "" {
		p := t.places[path]
		p.line, p.col = n.Line, n.Column
		t.places[path] = p
	}
	switch n.Kind {
	case yaml.MappingNode:
		t.kinds[path] = "a group of keys"
		t.walkMap(n, path, as)
	case yaml.SequenceNode:
		t.kinds[path] = "a list"
		var of reflect.Type
		if as != nil && as.Kind() == reflect.Slice {
			of = as.Elem()
		}
		for i, c := range n.Content {
			t.walk(c, fmt.Sprintf("%s[%d]", path, i), of)
		}
	case yaml.AliasNode:
		t.addAt(n.Line, n.Column, fmt.Sprintf("a reference *%s: references are not supported", n.Value), "write the value out")
	case yaml.ScalarNode:
		t.written[path] = n.Value
		if n.Tag == "!!null" {
			pl := t.places[path]
			if pl.keyLine > 0 {
				t.addAt(pl.keyLine, pl.keyCol, fmt.Sprintf("%q has no value", last(path)), "give a value or remove the line")
			} else {
				t.addAt(n.Line, n.Column, "an empty entry in a list", "give a value or remove it")
				t.void[path] = true
			}
		}
	}
}

func (t *tree) walkMap(n *yaml.Node, path string, as reflect.Type) {
	known := keysOf(as, path)
	seen := map[string]*yaml.Node{}
	for i := 0; i+1 < len(n.Content); i += 2 {
		k, v := n.Content[i], n.Content[i+1]
		low := strings.ToLower(k.Value)
		if k.Kind != yaml.ScalarNode {
			t.addAt(k.Line, k.Column, "a key must be a single word", "")
			continue
		}
		if first := seen[low]; first != nil {
			text := fmt.Sprintf("key %q is written twice, first on line %d", k.Value, first.Line)
			if first.Value != k.Value {
				text = fmt.Sprintf("key %q is written twice, first as %q on line %d", k.Value, first.Value, first.Line)
			}
			t.addAt(k.Line, k.Column, text, "keep one of them")
			continue
		}
		seen[low] = k
		var of reflect.Type
		if known != nil {
			ft, ok := known[low]
			if !ok {
				t.unknownKey(k, path, known)
				continue
			}
			of = ft
		}
		sub := low
		if path != "" {
			sub = path + "." + low
		}
		t.places[sub] = place{keyLine: k.Line, keyCol: k.Column}
		t.walk(v, sub, of)
	}
}

func (t *tree) unknownKey(k *yaml.Node, path string, known map[string]reflect.Type) {
	in := ""
	if path != "" {
		in = " in " + path
	}
	hint := didYouMean(k.Value, order(path, known))
	if k.Value == "<<" {
		hint = "merged keys are not supported; write the values out"
	}
	if secret(k.Value) && strings.HasSuffix(path, ".influx") {
		hint = tokenHint
	}
	t.addAt(k.Line, k.Column, fmt.Sprintf("unknown key %q%s", k.Value, in), hint)
}

// keysOf returns the keys a map at this path may have, nil for any.
func keysOf(as reflect.Type, path string) map[string]reflect.Type {
	if path == "criteria" {
		out := map[string]reflect.Type{"preset": nil}
		for _, k := range criteria.Keys() {
			out[k] = nil
		}
		return out
	}
	if as == nil || as.Kind() != reflect.Struct {
		return nil
	}
	out := map[string]reflect.Type{}
	for i := range as.NumField() {
		if k := as.Field(i).Tag.Get("mapstructure"); !strings.HasPrefix(k, "(") {
			out[k] = as.Field(i).Type
		}
	}
	return out
}

// order lists known keys the way the documentation does.
func order(path string, known map[string]reflect.Type) []string {
	var out []string
	if path == "criteria" {
		return append([]string{"preset"}, criteria.Keys()...)
	}
	for k := range known {
		out = append(out, k)
	}
	sortStrings(out)
	return out
}

func last(path string) string { return path[strings.LastIndexByte(path, '.')+1:] }

// plain turns a node into maps, lists and values with numbers as they were
// written, so that 010 stays a room number and 2025-01-01 stays text.
func plain(n *yaml.Node) any {
	switch n.Kind {
	case yaml.MappingNode:
		m := map[string]any{}
		for i := 0; i+1 < len(n.Content); i += 2 {
			low := strings.ToLower(n.Content[i].Value)
			if _, twice := m[low]; n.Content[i].Kind == yaml.ScalarNode && !twice {
				m[low] = plain(n.Content[i+1])
			}
		}
		return m
	case yaml.SequenceNode:
		l := make([]any, 0, len(n.Content))
		for _, c := range n.Content {
			l = append(l, plain(c))
		}
		return l
	case yaml.ScalarNode:
		return plainScalar(n)
	}
	return nil
}

func plainScalar(n *yaml.Node) any {
	switch n.Tag {
	case "!!null":
		return nil
	case "!!bool":
		var b bool
		if n.Decode(&b) == nil {
			return b
		}
	case "!!int", "!!float":
		if v, err := strconv.ParseFloat(n.Value, 64); err == nil && !math.IsNaN(v) && !math.IsInf(v, 0) {
			return json.Number(n.Value)
		}
		// 1_000 and 0x1F: let YAML say what it means.
		var v float64
		if n.Decode(&v) == nil && !math.IsNaN(v) && !math.IsInf(v, 0) {
			return json.Number(strconv.FormatFloat(v, 'g', -1, 64))
		}
	}
	return n.Value
}
