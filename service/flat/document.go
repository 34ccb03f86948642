package flat

import (
	"encoding/json"
	"fmt"
	"strings"
	"unicode/utf8"

	"borewright/service/document"
	"borewright/service/jsontext"
)

// Pair is a name and what was typed for it.
type Pair struct{ Name, Text string }

// Codes of what is wrong with names, before any value is read.
const (
	CodeUnknownName = "unknown_name"
	CodeRepeated    = "repeated_name"
	CodeBlank       = "blank"
)

// AppendDocument appends the request document of the door that the pairs mean, every
// value as text, for [document.ReadTyped]. What is wrong with the names is told by them; the
// values are the reader's business.
func AppendDocument(dst []byte, pairs []Pair, door document.Door) ([]byte, []document.Violation) {
	good, wrong := sift(pairs, door)
	dst = append(dst, '{')
	start := len(dst)
	for _, block := range blockOrder {
		dst = appendBlock(dst, start, block, good, &wrong)
	}
	return append(dst, '}'), wrong
}

// sift parts the pairs that mean something at the door from the unknown, repeated,
// blank and unused ones.
func sift(pairs []Pair, door document.Door) (good []Pair, wrong []document.Violation) {
	for i := range pairs {
		code, detail := fault(pairs[:i], &pairs[i], door)
		if code == "" {
			if wrong != nil {
				good = append(good, pairs[i])
			}
			continue
		}
		if wrong == nil {
			good = append(good, pairs[:i]...)
		}
		wrong = append(wrong, document.Violation{Parameter: pairs[i].Name, Code: code, Detail: detail})
	}
	if wrong == nil {
		return pairs, nil
	}
	return good, wrong
}

// fault is what is wrong with a pair, before its value is read.
func fault(before []Pair, p *Pair, door document.Door) (code, detail string) {
	switch {
	case entries[p.Name] == nil:
		return CodeUnknownName, unknown(p.Name)
	case repeated(before, p.Name):
		return CodeRepeated, p.Name + " stands twice; give it once"
	case !entries[p.Name].leaf.UsedBy(door):
		return "not_used_here", p.Name + " has no use at this door; leave it out, or ask a larger one"
	case strings.TrimSpace(p.Text) == "":
		return CodeBlank, "a value is missing for " + p.Name + "; leave the name out, or give one"
	case !utf8.ValidString(p.Text):
		return "not_utf8", "these bytes are not UTF-8"
	}
	return "", ""
}

func repeated(before []Pair, name string) bool {
	for i := range before {
		if before[i].Name == name {
			return true
		}
	}
	return false
}

func unknown(name string) string {
	detail := fmt.Sprintf("%q is not known here", name)
	if offer := Nearest(name); offer != "" {
		return detail + "; did you mean " + offer + "?"
	}
	return detail + "; /openapi.yaml lists the names"
}

// appendBlock appends the members that the pairs give to a block.
func appendBlock(dst []byte, start int, block string, pairs []Pair, wrong *[]document.Violation) []byte {
	open := block == ""
	for i := range pairs {
		p := &pairs[i]
		e := entries[p.Name]
		if e.block != block {
			continue
		}
		if !open {
			if hasEnd(pairs, block) {
				*wrong = append(*wrong, document.Violation{Parameter: p.Name, Code: "one_of",
					Detail: "the " + block + " is named already; leave " + block + " out to describe its section"})
				return dst
			}
			dst = append(append(append(comma(dst, start), '"'), block...), `":{`...)
			open, start = true, len(dst)
		}
		dst = append(append(append(comma(dst, start), '"'), e.key...), `":`...)
		dst = appendValue(dst, e, p, wrong)
	}
	if open && block != "" {
		dst = append(dst, '}')
	}
	return dst
}

// hasEnd reports whether an end is given by its name as well.
func hasEnd(pairs []Pair, block string) bool {
	return (block == "inlet" || block == "outlet") && repeated(pairs, block)
}

func comma(dst []byte, start int) []byte {
	if len(dst) > start {
		return append(dst, ',')
	}
	return dst
}

func appendValue(dst []byte, e *entry, p *Pair, wrong *[]document.Violation) []byte {
	switch {
	case e.key == "fittings":
		return appendFittings(dst, p.Text, wrong)
	case e.deep && json.Valid([]byte(p.Text)):
		return append(dst, p.Text...)
	case e.deep:
		*wrong = append(*wrong, document.Violation{Parameter: p.Name, Code: "malformed_json", Detail: p.Name + ` is JSON in one cell, such as [["0 m", "0 m"], ["1 m", "0 m"], ["0 m", "1 m"]]`})
		return append(dst, "null"...)
	}
	return jsontext.AppendString(dst, p.Text)
}
