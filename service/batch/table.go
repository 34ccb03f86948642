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
	head    string // as it stands in the list
	name    string // flat name, "" for a column of the caller's own
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
	if start, err := in.Peek(len(ByteOrderMark)); err == nil && string(start) == ByteOrderMark {
		_, _ = in.Discard(len(start)) // just peeked
	}
	malformed := func(detail string) (source, error) { return nil, refusal(true, "", "malformed_body", detail) }
	switch err := t.readRecord(); {
	case errors.Is(err, io.EOF):
		return malformed("the list is empty; its first line names the columns")
	case errors.Is(err, errRowTooLarge):
		return malformed("the first line has more than 64 kB; it should name the columns")
	case err != nil:
		return nil, err
	case !utf8.Valid(t.record):
		return malformed("the first line is not UTF-8; save the list as CSV in UTF-8")
	}
	if err := t.split(); err != nil {
		return malformed("the first line names the columns, and it " + err.Error())
	}
	return t, t.header(o.Carry)
}

func (t *list) carried() []string { return t.pass }

func (t *list) wouldWait() bool { return !wholeLine(t.in) }

// header reads the names of the columns, and tells all that is wrong with them.
func (t *list) header(carry []string) error {
	var wrong []document.Violation
	refuse := func(name, code, detail string) {
		wrong = append(wrong, document.Violation{Parameter: name, Code: code, Detail: detail})
	}
	seen := map[string]bool{}
	for i, cell := range t.cells {
		c := column{head: strings.TrimSpace(cell)}
		if c.head == "" {
			refuse(fmt.Sprintf("column %d", i+1), flat.CodeBlank, "a column has no name")
		} else if err := c.read(carry); err != nil {
			refuse(c.head, codeOf(err), err.Error())
		}
		if c.name != "" && seen[c.name] {
			refuse(c.head, flat.CodeRepeated, c.name+" stands in two columns; keep one")
		}
		seen[c.name] = true
		if c.carried {
			t.pass = append(t.pass, c.head)
		}
		t.columns = append(t.columns, c)
	}
	for _, name := range carry {
		if name != carryAll && !slices.Contains(t.pass, name) {
			refuse("carry", "unknown_value", fmt.Sprintf("the list has no column %q to carry", name))
		}
	}
	if wrong != nil {
		return &document.Refusal{Violations: wrong}
	}
	return nil
}

// read reads the head of a column. One that carry names passes through, and is read as
// well where it is a name of ours: a rise that is carried still counts.
func (c *column) read(carry []string) error {
	known, err := readColumn(c.head)
	if err == nil {
		c.name, c.unit, c.number = known.name, known.unit, known.number
	}
	ownByAll := err != nil && codeOf(err) == flat.CodeUnknownName && slices.Contains(carry, carryAll) && !misspelt(c.head)
	if c.carried = slices.Contains(carry, c.head) || ownByAll; c.carried {
		return nil
	}
	return err
}

// misspelt reports whether a head looks like a quantity of ours with an error in its
// name. It is not carried by "*": a rise that is no rise would silently be none.
func misspelt(head string) bool {
	name, _, unit := strings.Cut(head, "[")
	name = strings.TrimSpace(name)
	return unit && len(name) > 3 && flat.Nearest(name) != "" // the nearest to very short names is chance
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
	unknown := unknownColumn(text)
	for i := strings.LastIndexByte(text, '_'); i > 0; i = strings.LastIndexByte(text[:i], '_') {
		leaf, ok := flat.Lookup(text[:i])
		if !ok || !leaf.Number {
			continue
		}
		c, err := withUnit(text[:i], text[i+1:], func(u string) (units.Unit, error) { return answersUnit(u, leaf.Field.Kind) })
		if err == nil {
			return c, nil
		}
		if codeOf(err) != units.CodeUnknownUnit {
			unknown = err // a quantity of ours in a unit that is not its own
		}
	}
	return column{}, unknown
}

// answersUnit reads the unit of a column as answers write it. Their Pa of a state
// pressure is absolute, and says so to the reader of the cells.
func answersUnit(text string, kind units.Kind) (units.Unit, error) {
	if kind == units.StatePressure && text == units.SI.Unit(kind).ASCII() {
		return units.ParseUnit("Paa")
	}
	return units.UnitFromASCII(text, kind)
}

func unknownColumn(name string) error {
	detail := fmt.Sprintf("%q is no name known here; ", name)
	if offer := flat.Nearest(name); offer != "" {
		detail += "did you mean " + offer + "? "
	}
	return &columnError{flat.CodeUnknownName, detail + "a column of your own passes through when carry names it"}
}

func withUnit(name, text string, read func(string) (units.Unit, error)) (column, error) {
	leaf, ok := flat.Lookup(name)
	switch {
	case !ok:
		return column{}, unknownColumn(name)
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

// next reads one record and makes the document of it; an empty line is no row.
func (t *list) next(c *chunk) error {
	err := t.readRecord()
	switch {
	case errors.Is(err, errRowTooLarge):
		t.row++
		c.requests = append(c.requests, request{number: t.row, tooLarge: true})
		return nil
	case err != nil:
		return err
	case len(bytes.Trim(t.record, " \r\n")) == 0:
		return nil
	}
	t.row++
	c.requests = append(c.requests, t.request(c))
	return nil
}

// request makes the request of a record, with what is wrong with it as a row of a list.
func (t *list) request(c *chunk) request {
	r := request{number: t.row, typed: true, start: len(c.in), end: len(c.in)}
	refuse := func(code, detail string) request {
		r.wrong = append(r.wrong, document.Violation{Parameter: "row", Code: code, Detail: detail})
		return r
	}
	if !utf8.Valid(t.record) {
		return refuse("not_utf8", "these bytes are not UTF-8; save the list as UTF-8")
	}
	if err := t.split(); err != nil {
		return refuse("malformed_row", "the row "+err.Error())
	}
	if len(t.cells) != len(t.columns) {
		return refuse("malformed_row", fmt.Sprintf("the row has %d cells, the list %d columns; a separator inside a cell needs quotes around it, a cell without a value stays empty",
			len(t.cells), len(t.columns)))
	}
	t.pairs = t.pairs[:0]
	for i := range t.columns {
		t.cell(&r, &t.columns[i], t.cells[i])
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
		r.carried = append(r.carried, answer.Carried{Name: c.head, Text: text})
	}
	if c.name == "" || strings.TrimSpace(text) == "" {
		return
	}
	if c.name == "id" {
		r.id = text
	}
	if c.number {
		var wrong *document.Violation
		if text, wrong = t.number(c, text); wrong != nil {
			wrong.Parameter = c.name
			r.wrong = append(r.wrong, *wrong)
		}
	}
	t.pairs = append(t.pairs, flat.Pair{Name: c.name, Text: text})
}

// number gives the text of a number as the reader takes it: with a point, and with the
// unit of its column behind it. What is wrong with it keeps a text that the reader can
// pass over on its way to the faults of other cells.
func (t *list) number(c *column, text string) (string, *document.Violation) {
	if t.dialect.DecimalComma {
		if number, _ := cutNumber(text); strings.Contains(number, ".") {
			return text, &document.Violation{Code: "decimal_point",
				Detail: fmt.Sprintf("%q has a point, which can mean thousands in a list with decimal commas; write 1234,5", text)}
		}
		text = strings.ReplaceAll(text, ",", ".")
	}
	if c.unit == "" {
		return text, nil
	}
	number, rest := cutNumber(text)
	switch {
	case number == "":
		return text, nil // no number at all, which the reader tells
	case rest == "" || strings.HasPrefix(rest, "±") || strings.HasPrefix(rest, "+/-"):
		return strings.TrimSpace(number + " " + c.unit + " " + rest), nil
	case strings.IndexByte("0123456789,.'", rest[0]) >= 0:
		return text + " " + c.unit, nil // a number in a form that the reader tells
	}
	return text, &document.Violation{Code: "unit_twice",
		Detail: fmt.Sprintf("%q has a unit, and the head of its column gives %s; write the number alone", text, c.unit)}
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
