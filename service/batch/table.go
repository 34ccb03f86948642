package batch

import (
	"bufio"
	"bytes"
	"errors"
	"fmt"
	"io"
	"slices"
	"strings"
	"unicode/utf8"

	"borewright/calc/units"
	"borewright/service/answer"
	"borewright/service/document"
	"borewright/service/flat"
)

// Dialect is how a CSV parts its cells and writes its numbers. It is told, never
// guessed: a comma can be both.
type Dialect struct {
	Comma        byte
	DecimalComma bool
}

// dialects by the names that callers give.
var dialects = map[string]Dialect{
	"comma": {Comma: ','}, "semicolon": {Comma: ';'}, "semicolon_decimal_comma": {Comma: ';', DecimalComma: true}, "tab": {Comma: '\t'},
}

// DialectByName finds a dialect; "" is comma.
func DialectByName(name string) (Dialect, bool) {
	if name == "" {
		name = "comma"
	}
	d, ok := dialects[name]
	return d, ok
}

// DialectNames lists them.
func DialectNames() []string { return []string{"comma", "semicolon", "semicolon_decimal_comma", "tab"} }

// column is what one column of a list means.
type column struct {
	name    string // flat name, or of the caller's own
	unit    string // of the header, put behind each number
	number  bool
	carried bool
}

// list is a CSV line list: a header of names, then one segment a record.
type list struct {
	in      *bufio.Reader
	dialect Dialect
	columns []column
	pass    []string // names of the carried columns
	row     int
	record  []byte   // of the current row
	cells   []string // of the current row
	pairs   []flat.Pair
}

func newTable(in *bufio.Reader, o *Options) (source, error) {
	t := &list{in: in, dialect: o.Dialect}
	if t.dialect.Comma == 0 {
		t.dialect = dialects["comma"]
	}
	if start, err := in.Peek(3); err == nil && bytes.Equal(start, []byte("\xef\xbb\xbf")) {
		_, _ = in.Discard(3)
	}
	err := t.readRecord()
	switch {
	case errors.Is(err, io.EOF):
		return nil, refusal(true, "", "malformed_body", "the list is empty; its first line names the columns")
	case errors.Is(err, errRecordTooLarge):
		return nil, refusal(true, "", "malformed_body", "the first line has more than 64 kB; it should name the columns")
	case err != nil:
		return nil, err
	}
	if err := t.split(); err != nil {
		return nil, refusal(true, "", "malformed_body", "the first line names the columns, and it "+err.Error())
	}
	return t, t.header(o.Carry)
}

func (t *list) carried() []string { return t.pass }

func (t *list) wouldWait() bool { return t.in.Buffered() == 0 }

// header reads the names of the columns, and tells all that is wrong with them.
func (t *list) header(carry []string) error {
	var wrong []document.Violation
	refuse := func(name, code, detail string) {
		wrong = append(wrong, document.Violation{Parameter: name, Code: code, Detail: detail})
	}
	all := slices.Contains(carry, carryAll)
	seen := map[string]bool{}
	for i, cell := range t.cells {
		text := strings.TrimSpace(cell)
		c, err := readColumn(text)
		switch {
		case slices.Contains(carry, text):
			c = column{name: text, carried: true}
		case err != nil && all && text != "":
			c = column{name: text, carried: true}
		case text == "":
			refuse(fmt.Sprintf("column %d", i+1), flat.CodeBlank, "a column has no name")
		case err != nil:
			refuse(text, codeOf(err), err.Error())
		}
		if seen[c.name] && c.name != "" {
			refuse(text, flat.CodeRepeated, c.name+" stands in two columns; keep one")
		}
		seen[c.name] = true
		if c.carried {
			t.pass = append(t.pass, c.name)
		}
		t.columns = append(t.columns, c)
	}
	for _, name := range carry {
		if name != carryAll && !seen[name] {
			refuse("carry", "unknown_value", fmt.Sprintf("the list has no column %q to carry", name))
		}
	}
	if wrong != nil {
		return &document.Refusal{Violations: wrong}
	}
	return nil
}

// columnError is a header that means nothing here.
type columnError struct{ code, detail string }

func (e *columnError) Error() string { return e.detail }

func codeOf(err error) string {
	var c *columnError
	var u *units.Error
	switch {
	case errors.As(err, &c):
		return c.code
	case errors.As(err, &u):
		return u.Code
	}
	return flat.CodeUnknownName
}

// readColumn reads a header in its forms: diameter, diameter [mm], diameter_mm.
func readColumn(text string) (column, error) {
	if name, unit, ok := strings.Cut(text, "["); ok && strings.HasSuffix(unit, "]") {
		return withUnit(strings.TrimSpace(name), strings.TrimSpace(strings.TrimSuffix(unit, "]")), units.ParseUnit)
	}
	if leaf, ok := flat.Lookup(text); ok {
		return column{name: text, number: leaf.Number}, nil
	}
	for i := strings.LastIndexByte(text, '_'); i > 0; i = strings.LastIndexByte(text[:i], '_') {
		leaf, ok := flat.Lookup(text[:i])
		if !ok || !leaf.Number {
			continue
		}
		kind := leaf.Field.Kind
		if c, err := withUnit(text[:i], text[i+1:], func(u string) (units.Unit, error) { return units.UnitFromASCII(u, kind) }); err == nil {
			return c, nil
		}
	}
	detail := fmt.Sprintf("%q is no name known here", text)
	if offer := flat.Nearest(text); offer != "" {
		detail += "; did you mean " + offer + "?"
	}
	return column{}, &columnError{flat.CodeUnknownName, detail + " A column of your own passes through when carry names it."}
}

func withUnit(name, text string, read func(string) (units.Unit, error)) (column, error) {
	leaf, ok := flat.Lookup(name)
	switch {
	case !ok:
		detail := fmt.Sprintf("%q is no name known here", name)
		if offer := flat.Nearest(name); offer != "" {
			detail += "; did you mean " + offer + "?"
		}
		return column{}, &columnError{flat.CodeUnknownName, detail}
	case !leaf.Number:
		return column{}, &columnError{"unit_not_used", name + " takes no unit; write the name alone"}
	case text == "" || text == "-" || text == "1":
		return column{name: name, number: true}, nil
	}
	u, err := read(text)
	if err == nil {
		err = u.Measures(leaf.Field.Kind)
	}
	if err != nil {
		return column{}, err
	}
	return column{name: name, unit: u.String(), number: true}, nil
}

// next reads one record and makes the document of it.
func (t *list) next(c *chunk) error {
	for {
		err := t.readRecord()
		if errors.Is(err, errRecordTooLarge) {
			t.row++
			c.requests = append(c.requests, request{number: t.row, tooLarge: true})
			return nil
		}
		if err != nil {
			return err
		}
		if len(bytes.TrimSpace(t.record)) == 0 {
			continue // an empty line is no row
		}
		t.row++
		c.requests = append(c.requests, t.request(c))
		return nil
	}
}

func (t *list) request(c *chunk) request {
	r := request{number: t.row, typed: true, start: len(c.in)}
	refuse := func(code, detail string) {
		r.wrong = append(r.wrong, document.Violation{Parameter: "row", Code: code, Detail: detail})
	}
	if !utf8.Valid(t.record) {
		refuse("not_utf8", "these bytes are not UTF-8; save the list as UTF-8")
		return r
	}
	if err := t.split(); err != nil {
		refuse("malformed_row", "the row "+err.Error())
		return r
	}
	if len(t.cells) > len(t.columns) {
		refuse("malformed_row", fmt.Sprintf("the row has %d cells, the list %d columns; a comma inside a cell needs quotes around it", len(t.cells), len(t.columns)))
		return r
	}
	t.pairs = t.pairs[:0]
	for i := range t.columns {
		text := ""
		if i < len(t.cells) {
			text = t.cells[i]
		}
		t.cell(&r, &t.columns[i], text)
	}
	var wrong []document.Violation
	c.in, wrong = flat.AppendDocument(c.in, t.pairs, document.SegmentDoor)
	r.wrong = append(r.wrong, wrong...)
	r.end = len(c.in)
	return r
}

// cell takes one cell: an empty one is not given.
func (t *list) cell(r *request, c *column, text string) {
	if c.carried {
		r.carried = append(r.carried, answer.Carried{Name: c.name, Text: text})
		return
	}
	if strings.TrimSpace(text) == "" {
		return
	}
	if c.name == "id" {
		r.id = text
	}
	if c.number && t.dialect.DecimalComma {
		text = strings.Replace(text, ",", ".", 1)
	}
	if c.unit != "" {
		number, rest := cutNumber(text)
		switch {
		case rest == "" || strings.HasPrefix(rest, "±") || strings.HasPrefix(rest, "+/-"):
			text = strings.TrimSpace(number + " " + c.unit + " " + rest)
		case rest[0] == ',':
			text += " " + c.unit // a decimal comma, which the reader tells
		case number != "":
			r.wrong = append(r.wrong, document.Violation{Parameter: c.name, Code: "unit_twice",
				Detail: fmt.Sprintf("%q has a unit, and the head of its column gives %s; write the number alone", text, c.unit)})
			return
		}
	}
	t.pairs = append(t.pairs, flat.Pair{Name: c.name, Text: text})
}

// cutNumber cuts the number from the front of a cell.
func cutNumber(text string) (number, rest string) {
	text = strings.TrimSpace(text)
	end := 0
	for end < len(text) && strings.IndexByte("0123456789.+-eE", text[end]) >= 0 {
		if (text[end] == '+' || text[end] == '-') && end > 0 && text[end-1]|0x20 != 'e' {
			break
		}
		end++
	}
	for end > 0 && text[end-1]|0x20 == 'e' { // of a unit such as "eV"
		end--
	}
	return text[:end], strings.TrimSpace(text[end:])
}
