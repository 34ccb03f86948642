package batch

import (
	"bufio"
	"bytes"
	"errors"
	"io"
	"strings"
)

// readRecord reads the bytes of one record of CSV (RFC 4180): up to the end of a line
// outside quotes. One beyond the bound is dropped to the end of its line.
func (t *list) readRecord() error {
	t.record = t.record[:0]
	q := quoting{comma: t.dialect.Comma, start: true}
	for {
		part, err := t.in.ReadSlice('\n')
		t.record = append(t.record, part...)
		switch {
		case errors.Is(err, bufio.ErrBufferFull) || len(bytes.TrimRight(t.record, "\r\n")) > maxRow:
			if err == nil || errors.Is(err, io.EOF) {
				return errRowTooLarge
			}
			if err := skipLine(t.in); err != nil && !errors.Is(err, io.EOF) {
				return err
			}
			return errRowTooLarge
		case err != nil && !errors.Is(err, io.EOF):
			return err
		}
		q.scan(part)
		if errors.Is(err, io.EOF) {
			if len(t.record) == 0 {
				return io.EOF
			}
			return nil // an open quote is told by split
		}
		if !q.open {
			t.record = bytes.TrimSuffix(bytes.TrimSuffix(t.record, []byte("\n")), []byte("\r"))
			return nil
		}
	}
}

// quoting follows whether the end of a line ends a record. Quotes open a cell only at
// its start: one inside a plain cell is a fault of that cell, and hides no line.
type quoting struct {
	comma       byte
	start, open bool
}

func (q *quoting) scan(part []byte) {
	for i := range part {
		switch c := part[i]; {
		case q.open:
			if c == '"' { // the closing one, or the first of two: then the next one opens again
				q.open, q.start = false, true
			}
		case c == '"' && q.start:
			q.open = true
		default:
			q.start = c == q.comma
		}
	}
}

// split parts a record into its cells.
func (t *list) split() error {
	t.cells = t.cells[:0]
	rest := string(bytes.TrimRight(t.record, "\r\n"))
	for {
		var cell string
		var err error
		var more bool
		if cell, rest, more, err = t.cutCell(rest); err != nil {
			return err
		}
		t.cells = append(t.cells, cell)
		if !more {
			return nil
		}
	}
}

// cutCell cuts one cell from the front of a record.
func (t *list) cutCell(text string) (cell, rest string, more bool, err error) {
	if text == "" || text[0] != '"' {
		i := strings.IndexByte(text, t.dialect.Comma)
		if i < 0 {
			cell, rest = text, ""
		} else {
			cell, rest, more = text[:i], text[i+1:], true
		}
		if strings.IndexByte(cell, '"') >= 0 {
			return "", "", false, errors.New(`has a " inside a cell without quotes around it; double it and put quotes around the cell`)
		}
		return cell, rest, more, nil
	}
	var b strings.Builder
	for text = text[1:]; ; {
		i := strings.IndexByte(text, '"')
		if i < 0 {
			return "", "", false, errors.New("has a quote that is not closed")
		}
		b.WriteString(text[:i])
		text = text[i+1:]
		switch {
		case text == "":
			return b.String(), "", false, nil
		case text[0] == '"':
			b.WriteByte('"')
			text = text[1:]
		case text[0] == t.dialect.Comma:
			return b.String(), text[1:], true, nil
		default:
			return "", "", false, errors.New("has text behind a closing quote")
		}
	}
}
