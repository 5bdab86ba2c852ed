package configs

import (
	"bytes"
	"errors"
	"io"
	"regexp"
	"strconv"

	"go.yaml.in/yaml/v3"
)

var yamlError = regexp.MustCompile(`^yaml: (?:line (\d+): )?(.*)$`)

// notYAML reports text that is no YAML. The parser names the line a construct
// began on, which may be far above the mistake; the line that counts is the
// one after the longest beginning of the file that still parses.
func notYAML(file string, text []byte, err error) *Problem {
	p := &Problem{File: file, Line: 1, Col: 1, Text: "not valid YAML",
		Hint: "check the indentation (spaces only), colons followed by a space, and closing quotes and brackets around here"}
	m := yamlError.FindStringSubmatch(err.Error())
	if m != nil {
		p.Text += ": " + m[2]
		if n, convErr := strconv.Atoi(m[1]); convErr == nil {
			p.Line = n
		}
	}
	const effort = 20 << 20 // bytes to parse at most
	lines := bytes.SplitAfter(text, []byte("\n"))
	if len(lines)*len(text) > effort {
		return p
	}
	end := len(text)
	for i := len(lines) - 1; i >= 0; i-- {
		end -= len(lines[i])
		if end > 0 && !parses(text[:end]) {
			continue
		}
		p.Line = i + 1
		p.Col = 1 + len(lines[i]) - len(bytes.TrimLeft(lines[i], " "))
		break
	}
	return p
}

func parses(text []byte) bool {
	dec := yaml.NewDecoder(bytes.NewReader(text))
	for {
		var n yaml.Node
		if err := dec.Decode(&n); err != nil {
			return errors.Is(err, io.EOF)
		}
	}
}
