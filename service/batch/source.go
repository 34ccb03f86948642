package batch

import (
	"bufio"
	"bytes"
	"encoding/json"
	"errors"
	"io"
)

// source gives the rows of a batch one by one.
type source interface {
	// next appends one row to the chunk, or passes over a blank line, or says io.EOF.
	next(c *chunk) error
	// wouldWait reports whether the next row may have to be waited for.
	wouldWait() bool
	// carried are the names of the columns that pass through.
	carried() []string
}

// ByteOrderMark begins what some programs save as UTF-8.
const ByteOrderMark = "\xef\xbb\xbf"

func newSource(r io.Reader, o *Options) (source, error) {
	buffered := bufio.NewReaderSize(r, maxRow+len("\r\n"))
	switch o.In {
	case NDJSON:
		return &lines{in: buffered}, nil
	case CSV:
		return newTable(buffered, o)
	}
	return newArray(buffered, o.MaxArray)
}

// lines are the rows of NDJSON, one document a line; blank lines are none.
type lines struct {
	in  *bufio.Reader
	row int
}

func (l *lines) carried() []string { return nil }

func (l *lines) wouldWait() bool { return !wholeLine(l.in) }

// wholeLine reports whether a line can be read without waiting for its end: half of
// one may be all that a client sends before it waits for its answers.
func wholeLine(in *bufio.Reader) bool {
	here, _ := in.Peek(in.Buffered())
	return bytes.IndexByte(here, '\n') >= 0
}

func (l *lines) next(c *chunk) error {
	line, err := l.in.ReadSlice('\n')
	tooLong := errors.Is(err, bufio.ErrBufferFull)
	if tooLong {
		err = skipLine(l.in)
	}
	if err != nil && !errors.Is(err, io.EOF) {
		return err
	}
	switch line = bytes.TrimSpace(line); {
	case tooLong || len(line) > maxRow:
		l.row++
		c.requests = append(c.requests, request{number: l.row, tooLarge: true})
	case len(line) > 0:
		l.row++
		start := len(c.in)
		c.in = append(c.in, line...)
		c.requests = append(c.requests, request{start: start, end: len(c.in), number: l.row})
	}
	return err
}

// skipLine drops the rest of a line that is too long.
func skipLine(r *bufio.Reader) error {
	for {
		_, err := r.ReadSlice('\n')
		if !errors.Is(err, bufio.ErrBufferFull) {
			return err
		}
	}
}

// array are the rows of a JSON array, or one lone object, read as a whole before the
// first is answered: a syntax error at the end spoils all of it.
type array struct {
	body []byte // known to be JSON
	at   int    // behind the last row
	row  int
}

func newArray(r io.Reader, most int64) (source, error) {
	if most > 0 {
		r = &limited{in: r, left: most}
	}
	body, err := io.ReadAll(r)
	if err != nil {
		return nil, err
	}
	body = bytes.Trim(body, jsonBlanks)
	malformed := func(detail string) (source, error) { return nil, refusal(true, "", "malformed_body", detail) }
	switch {
	case len(body) == 0:
		return malformed("the body is empty; send a JSON array of request documents")
	case bytes.HasPrefix(body, []byte(ByteOrderMark)):
		return malformed("the body begins with a byte order mark; send UTF-8 without one")
	case body[0] == '[' && !json.Valid(body):
		return malformed("the array is no JSON: " + json.Unmarshal(body, new(json.RawMessage)).Error())
	case body[0] == '[':
		return &array{body: body, at: 1}, nil
	case body[0] == '{' && json.Valid(body):
		return &array{body: body}, nil
	case body[0] == '{':
		return malformed("the document is no JSON; a lone object is a batch of one, many are an array, or lines sent as application/x-ndjson")
	}
	return nil, refusal(false, "", "wrong_type", "a batch is a JSON array of request documents, or one document alone")
}

func (a *array) carried() []string { return nil }

func (a *array) wouldWait() bool { return false }

const jsonBlanks = " \t\r\n"

func (a *array) next(c *chunk) error {
	rest := bytes.TrimLeft(a.body[a.at:], jsonBlanks+",")
	if len(rest) == 0 || rest[0] == ']' {
		return io.EOF
	}
	row := rest[:valueLength(rest)]
	a.at = len(a.body) - len(rest) + len(row)
	a.row++
	if len(row) > maxRow {
		c.requests = append(c.requests, request{number: a.row, tooLarge: true})
		return nil
	}
	start := len(c.in)
	c.in = append(c.in, row...)
	c.requests = append(c.requests, request{start: start, end: len(c.in), number: a.row})
	return nil
}

// valueLength is the length of the value that begins a text known to be JSON.
func valueLength(text []byte) int {
	depth := 0
	for i := 0; i < len(text); i++ {
		switch text[i] {
		case '"':
			i += stringLength(text[i:]) - 1
		case '{', '[':
			depth++
		case '}', ']':
			if depth--; depth <= 0 {
				return i + depth + 1 // the bracket is the value's own, or that around it
			}
		case ',', ' ', '\t', '\r', '\n':
			if depth == 0 {
				return i
			}
		}
	}
	return len(text)
}

// stringLength is the length of the JSON string that begins a text, with its quotes.
func stringLength(text []byte) int {
	for i := 1; i < len(text); i++ {
		switch text[i] {
		case '\\':
			i++
		case '"':
			return i + 1
		}
	}
	return len(text)
}

// ErrTooLarge is a JSON array beyond its bound.
var ErrTooLarge = errors.New("the batch is too large")

type limited struct {
	in   io.Reader
	left int64
}

func (l *limited) Read(p []byte) (int, error) {
	n, err := l.in.Read(p)
	if l.left -= int64(n); l.left < 0 {
		return 0, ErrTooLarge
	}
	return n, err
}
