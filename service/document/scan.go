package document

import (
	"bytes"
	"fmt"
	"strconv"
	"unicode/utf16"
	"unicode/utf8"
)

// maxDepth bounds how deep a document nests; the contract needs six levels.
const maxDepth = 32

// nodeKind is the kind of a JSON value.
type nodeKind uint8

const (
	nullNode nodeKind = iota
	boolNode
	numberNode
	stringNode
	arrayNode
	objectNode
)

// node is one JSON value. Values lie in one flat slice in document order, so
// that reading a request allocates nothing once the slice has grown.
type node struct {
	kind         nodeKind
	escaped      bool  // the text of a string has escapes
	keyEscaped   bool  // the name has escapes
	start, end   int32 // value; for a string, inside its quotes
	key, keyEnd  int32 // name in its object, inside the quotes
	parent       int32
	child, next  int32 // first child, next sibling; 0 for none
	count, index int32 // children; place among the siblings
}

// tree is a scanned document. Node 0 is the document itself.
type tree struct {
	src        []byte
	nodes      []node
	duplicates []int32
	position   int
}

// syntaxError is what makes a document unreadable, with the offset of it.
type syntaxError struct {
	offset int
	text   string
}

// scan reads one JSON document by RFC 8259: valid UTF-8, one value, nothing
// behind it. Duplicate names are kept aside: they are a fault of the request.
func (t *tree) scan(src []byte) *syntaxError {
	t.src, t.nodes, t.duplicates, t.position = src, t.nodes[:0], t.duplicates[:0], 0
	if len(bytes.TrimLeft(src, " \t\r\n")) == 0 {
		return &syntaxError{0, "the body is empty; send one JSON object"}
	}
	if bytes.HasPrefix(src, []byte("\xef\xbb\xbf")) {
		return &syntaxError{0, "the body begins with a byte order mark; send UTF-8 without one"}
	}
	t.blanks()
	if _, err := t.value(0, 0); err != nil {
		return err
	}
	t.blanks()
	if t.position < len(src) {
		return &syntaxError{t.position, "there is more behind the document; send exactly one JSON object"}
	}
	return nil
}

func (t *tree) blanks() {
	for t.position < len(t.src) {
		switch t.src[t.position] {
		case ' ', '\t', '\r', '\n':
			t.position++
		default:
			return
		}
	}
}

func (t *tree) peek() byte {
	if t.position < len(t.src) {
		return t.src[t.position]
	}
	return 0
}

func (t *tree) fail(text string) *syntaxError { return &syntaxError{t.position, text} }

// value scans one value and returns the place of its node.
func (t *tree) value(parent int32, depth int) (int32, *syntaxError) {
	if depth > maxDepth {
		return 0, t.fail("the document nests deeper than " + strconv.Itoa(maxDepth) + " levels")
	}
	at := int32(len(t.nodes))
	t.nodes = append(t.nodes, node{parent: parent, start: int32(t.position)})
	switch c := t.peek(); {
	case c == '{':
		return at, t.object(at, depth)
	case c == '[':
		return at, t.array(at, depth)
	case c == '"':
		start, end, escaped, err := t.text()
		n := &t.nodes[at]
		n.kind, n.start, n.end, n.escaped = stringNode, start, end, escaped
		return at, err
	case c == '-' || c >= '0' && c <= '9':
		return at, t.number(at)
	}
	return at, t.literal(at)
}

func (t *tree) object(at int32, depth int) *syntaxError {
	t.nodes[at].kind = objectNode
	t.position++
	t.blanks()
	if t.peek() == '}' {
		t.position++
		t.nodes[at].end = int32(t.position)
		return nil
	}
	last := int32(0)
	for {
		if t.peek() != '"' {
			return t.fail("a member name in double quotes is expected here")
		}
		key, keyEnd, escaped, err := t.text()
		if err != nil {
			return err
		}
		t.blanks()
		if t.peek() != ':' {
			return t.fail("a colon is expected behind the member name")
		}
		t.position++
		t.blanks()
		child, err := t.value(at, depth+1)
		if err != nil {
			return err
		}
		n := &t.nodes[child]
		n.key, n.keyEnd, n.keyEscaped = key, keyEnd, escaped
		t.adopt(at, last, child)
		last = child
		if done, err := t.more('}'); done || err != nil {
			t.nodes[at].end = int32(t.position)
			if err == nil {
				t.findDuplicates(at)
			}
			return err
		}
	}
}

func (t *tree) array(at int32, depth int) *syntaxError {
	t.nodes[at].kind = arrayNode
	t.position++
	t.blanks()
	if t.peek() == ']' {
		t.position++
		t.nodes[at].end = int32(t.position)
		return nil
	}
	last := int32(0)
	for {
		child, err := t.value(at, depth+1)
		if err != nil {
			return err
		}
		t.adopt(at, last, child)
		last = child
		if done, err := t.more(']'); done || err != nil {
			t.nodes[at].end = int32(t.position)
			return err
		}
	}
}

func (t *tree) adopt(parent, last, child int32) {
	t.nodes[child].index = t.nodes[parent].count
	t.nodes[parent].count++
	if last == 0 {
		t.nodes[parent].child = child
	} else {
		t.nodes[last].next = child
	}
}

// more steps over a comma, or over the closing bracket and is done.
func (t *tree) more(closing byte) (done bool, err *syntaxError) {
	t.blanks()
	switch c := t.peek(); {
	case c == closing:
		t.position++
		return true, nil
	case c == ',':
		t.position++
		t.blanks()
		return false, nil
	case t.position >= len(t.src):
		return true, t.fail("the document ends before it is complete")
	}
	return true, t.fail("a comma or " + string(closing) + " is expected here")
}

// findDuplicates compares names one by one in a small object, by a map in a
// large one, so that no document can make it slow.
func (t *tree) findDuplicates(at int32) {
	if t.nodes[at].count > 24 {
		seen := make(map[string]bool, t.nodes[at].count)
		for c := t.nodes[at].child; c != 0; c = t.nodes[c].next {
			name := t.key(c)
			if seen[name] {
				t.duplicates = append(t.duplicates, c)
			}
			seen[name] = true
		}
		return
	}
	for c := t.nodes[at].child; c != 0; c = t.nodes[c].next {
		for earlier := t.nodes[at].child; earlier != c; earlier = t.nodes[earlier].next {
			if t.sameKey(earlier, c) {
				t.duplicates = append(t.duplicates, c)
				break
			}
		}
	}
}

func (t *tree) sameKey(a, b int32) bool {
	x, y := &t.nodes[a], &t.nodes[b]
	if !x.keyEscaped && !y.keyEscaped {
		return bytes.Equal(t.src[x.key:x.keyEnd], t.src[y.key:y.keyEnd])
	}
	return t.key(a) == t.key(b)
}

// text scans a string and checks its escapes and its UTF-8.
func (t *tree) text() (start, end int32, escaped bool, err *syntaxError) {
	t.position++
	start = int32(t.position)
	for t.position < len(t.src) {
		c := t.src[t.position]
		switch {
		case c == '"':
			end = int32(t.position)
			t.position++
			return start, end, escaped, nil
		case c == '\\':
			escaped = true
			if err := t.escape(); err != nil {
				return 0, 0, false, err
			}
		case c < 0x20:
			return 0, 0, false, t.fail("a control character in a string; write it as an escape")
		case c < utf8.RuneSelf:
			t.position++
		default:
			r, size := utf8.DecodeRune(t.src[t.position:])
			if r == utf8.RuneError && size == 1 {
				return 0, 0, false, t.fail("these bytes are not UTF-8")
			}
			t.position += size
		}
	}
	return 0, 0, false, t.fail("a string is not closed")
}

func (t *tree) escape() *syntaxError {
	if t.position+1 >= len(t.src) {
		return t.fail("a string is not closed")
	}
	switch t.src[t.position+1] {
	case '"', '\\', '/', 'b', 'f', 'n', 'r', 't':
		t.position += 2
		return nil
	case 'u':
		first, ok := t.hex(t.position + 2)
		if !ok {
			return t.fail("\\u takes four hexadecimal digits")
		}
		t.position += 6
		if !utf16.IsSurrogate(first) {
			return nil
		}
		second, ok := rune(0), false
		if bytes.HasPrefix(t.src[t.position:], []byte(`\u`)) {
			second, ok = t.hex(t.position + 2)
		}
		if !ok || utf16.DecodeRune(first, second) == utf8.RuneError {
			return t.fail("half of a surrogate pair")
		}
		t.position += 6
		return nil
	}
	return t.fail("an unknown escape in a string")
}

func (t *tree) hex(at int) (rune, bool) {
	if at+4 > len(t.src) {
		return 0, false
	}
	v, err := strconv.ParseUint(string(t.src[at:at+4]), 16, 16)
	return rune(v), err == nil && t.src[at] != '+'
}

// number scans the longest JSON number.
func (t *tree) number(at int32) *syntaxError {
	n := &t.nodes[at]
	n.kind = numberNode
	if t.peek() == '-' {
		t.position++
		if t.peek() == 'I' || t.peek() == 'N' {
			t.position--
			return t.literal(at)
		}
	}
	switch c := t.peek(); {
	case c == '0':
		t.position++
		if c := t.peek(); c >= '0' && c <= '9' {
			return t.fail("a number has no leading zeros")
		}
	case c >= '1' && c <= '9':
		t.digits()
	default:
		return t.fail("a digit is expected here")
	}
	if t.peek() == '.' {
		t.position++
		if !t.digits() {
			return t.fail("a digit is expected behind the decimal point")
		}
	}
	if c := t.peek(); c == 'e' || c == 'E' {
		t.position++
		if c := t.peek(); c == '+' || c == '-' {
			t.position++
		}
		if !t.digits() {
			return t.fail("a digit is expected in the exponent")
		}
	}
	n.end = int32(t.position)
	return nil
}

func (t *tree) digits() bool {
	start := t.position
	for t.position < len(t.src) && t.src[t.position] >= '0' && t.src[t.position] <= '9' {
		t.position++
	}
	return t.position > start
}

func (t *tree) literal(at int32) *syntaxError {
	rest := t.src[t.position:]
	for _, l := range [...]struct {
		text string
		kind nodeKind
	}{{"true", boolNode}, {"false", boolNode}, {"null", nullNode}} {
		if bytes.HasPrefix(rest, []byte(l.text)) {
			t.position += len(l.text)
			t.nodes[at].kind, t.nodes[at].end = l.kind, int32(t.position)
			return nil
		}
	}
	for _, word := range []string{"NaN", "Infinity", "-Infinity", "-NaN", "nan", "inf"} {
		if bytes.HasPrefix(rest, []byte(word)) {
			return t.fail(word + " is no JSON number; leave the field out, or send the number that was meant")
		}
	}
	if t.position >= len(t.src) {
		return t.fail("the document ends before it is complete")
	}
	return t.fail("a JSON value is expected here")
}

// key is the name of a member.
func (t *tree) key(at int32) string {
	n := &t.nodes[at]
	return t.unescape(n.key, n.keyEnd, n.keyEscaped)
}

// string is the text of a string.
func (t *tree) string(at int32) string {
	n := &t.nodes[at]
	return t.unescape(n.start, n.end, n.escaped)
}

func (t *tree) unescape(start, end int32, escaped bool) string {
	raw := t.src[start:end]
	if !escaped {
		return string(raw)
	}
	out := make([]byte, 0, len(raw))
	for i := 0; i < len(raw); {
		if raw[i] != '\\' {
			out = append(out, raw[i])
			i++
			continue
		}
		switch c := raw[i+1]; c {
		case 'u':
			r, size := unescapeRune(raw[i:])
			out = utf8.AppendRune(out, r)
			i += size
		default:
			out = append(out, plainEscapes[c])
			i += 2
		}
	}
	return string(out)
}

var plainEscapes = [256]byte{'"': '"', '\\': '\\', '/': '/', 'b': '\b', 'f': '\f', 'n': '\n', 'r': '\r', 't': '\t'}

// unescapeRune reads \uXXXX or a pair of them, which scan has checked.
func unescapeRune(raw []byte) (rune, int) {
	first, _ := strconv.ParseUint(string(raw[2:6]), 16, 16)
	if !utf16.IsSurrogate(rune(first)) {
		return rune(first), 6
	}
	second, _ := strconv.ParseUint(string(raw[8:12]), 16, 16)
	return utf16.DecodeRune(rune(first), rune(second)), 12
}

// malformed turns a syntax error into the refusal of the whole document.
func (t *tree) malformed(e *syntaxError) *Refusal {
	offset := min(e.offset, len(t.src))
	line := 1 + bytes.Count(t.src[:offset], []byte("\n"))
	column := 1 + utf8.RuneCount(t.src[1+bytes.LastIndexByte(t.src[:offset], '\n'):offset])
	return &Refusal{Malformed: true, Violations: []Violation{{
		Code: "malformed_body", Detail: fmt.Sprintf("line %d, column %d (byte %d): %s", line, column, offset, e.text),
	}}}
}
