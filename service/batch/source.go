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
	// next appends one row to the chunk, or says io.EOF.
	next(c *chunk) error
	// wouldWait reports whether the next row may have to be waited for.
	wouldWait() bool
	// carried are the names of the columns that pass through.
	carried() []string
}

func newSource(r io.Reader, o *Options) (source, error) {
	buffered := bufio.NewReaderSize(r, maxRow)
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

func (l *lines) wouldWait() bool { return l.in.Buffered() == 0 }

func (l *lines) next(c *chunk) error {
	for {
		line, err := l.in.ReadSlice('\n')
		if errors.Is(err, bufio.ErrBufferFull) {
			l.row++
			c.requests = append(c.requests, request{number: l.row, tooLarge: true})
			return skipLine(l.in)
		}
		if err != nil && !errors.Is(err, io.EOF) {
			return err
		}
		if line = bytes.TrimSpace(line); len(line) > 0 {
			l.row++
			start := len(c.in)
			c.in = append(c.in, line...)
			c.requests = append(c.requests, request{start: start, end: len(c.in), number: l.row})
			return nil
		}
		if err != nil {
			return io.EOF
		}
	}
}

// skipLine drops the rest of a line that is too long.
func skipLine(r *bufio.Reader) error {
	for {
		_, err := r.ReadSlice('\n')
		switch {
		case errors.Is(err, bufio.ErrBufferFull):
		case errors.Is(err, io.EOF):
			return nil // the next read says so
		default:
			return err
		}
	}
}

// array are the rows of a JSON array, or one lone object, read as a whole before the
// first is answered: a syntax error at the end spoils all of it.
type array struct {
	rows []json.RawMessage
	at   int
}

func newArray(r io.Reader, most int64) (source, error) {
	if most > 0 {
		r = &limited{in: r, left: most}
	}
	body, err := io.ReadAll(r)
	if err != nil {
		return nil, err
	}
	a := &array{}
	switch trimmed := bytes.TrimLeft(body, " \t\r\n"); {
	case len(trimmed) == 0:
		return nil, refusal(true, "", "malformed_body", "the body is empty; send a JSON array of request documents")
	case trimmed[0] == '[':
		if err := json.Unmarshal(body, &a.rows); err != nil {
			return nil, refusal(true, "", "malformed_body", "the array is no JSON: "+err.Error())
		}
	case trimmed[0] == '{' && json.Valid(body):
		a.rows = []json.RawMessage{body}
	case trimmed[0] == '{':
		return nil, refusal(true, "", "malformed_body", "the document is no JSON; a lone object is a batch of one, many are an array, or lines sent as application/x-ndjson")
	default:
		return nil, refusal(false, "", "wrong_type", "a batch is a JSON array of request documents, or one document alone")
	}
	return a, nil
}

func (a *array) carried() []string { return nil }

func (a *array) wouldWait() bool { return false }

func (a *array) next(c *chunk) error {
	if a.at == len(a.rows) {
		return io.EOF
	}
	row := a.rows[a.at]
	a.at++
	if len(row) > maxRow {
		c.requests = append(c.requests, request{number: a.at, tooLarge: true})
		return nil
	}
	start := len(c.in)
	c.in = append(c.in, row...)
	c.requests = append(c.requests, request{start: start, end: len(c.in), number: a.at})
	return nil
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
