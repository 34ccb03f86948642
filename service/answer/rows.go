package answer

import (
	"encoding/hex"
	"regexp"
	"strconv"
	"strings"

	"borewright/service/document"
	"borewright/service/jsontext"
	"borewright/service/problem"
)

// Carried is a column of the caller's own list that passes through.
type Carried struct{ Name, Text string }

// Row is the place of one answer in a batch.
type Row struct {
	Number  int // from 1
	ID      string
	Carried []Carried // nil where the batch carries nothing
}

// Rows writes the answers of a batch, one row each. Every row has the same keys.
type Rows struct {
	Report *Report
	// Comma parts the cells of CSV; a decimal comma is for those who ask for it.
	Comma        byte
	DecimalComma bool
}

// lastOfRows is the last block of a row: batches answer whole segments.
const lastOfRows = PressureBlock

// appendHead appends what every JSON row begins with.
func (r *Row) appendHead(dst []byte, status string) []byte {
	dst = strconv.AppendInt(append(dst, `{"row":`...), int64(r.Number), 10)
	dst = append(dst, `,"id":`...)
	if r.ID == "" {
		dst = append(dst, "null"...)
	} else {
		dst = jsontext.AppendString(dst, r.ID)
	}
	dst = append(append(append(dst, `,"status":"`...), status...), '"')
	if r.Carried == nil {
		return dst
	}
	dst = append(dst, `,"carried":{`...)
	for i, c := range r.Carried {
		if i > 0 {
			dst = append(dst, ',')
		}
		dst = append(jsontext.AppendString(dst, c.Name), ':')
		dst = jsontext.AppendString(dst, c.Text)
	}
	return append(dst, '}')
}

// AppendJSON appends an answer as one flat object of leaf names.
func (w *Rows) AppendJSON(dst []byte, row *Row, a *Answer) ([]byte, error) {
	dst = row.appendHead(dst, "ok")
	for i := range leaves {
		l := &leaves[i]
		dst = append(append(dst, ','), l.key...)
		var err error
		if dst, err = w.appendLeaf(dst, l, a); err != nil {
			return dst, err
		}
	}
	dst = appendNotes(append(dst, `,"notes":`...), a.Notes)
	dst = hex.AppendEncode(append(dst, `,"fingerprint":"`...), a.Fingerprint[:])
	return append(dst, '"', '}'), nil
}

// AppendBlocks appends an answer as a row that holds the whole answer.
func (w *Rows) AppendBlocks(dst []byte, row *Row, a *Answer) ([]byte, error) {
	dst = append(row.appendHead(dst, "ok"), `,"answer":`...)
	dst, err := AppendJSON(dst, a, w.Report)
	return append(dst, '}'), err
}

// AppendFailedJSON appends a row that could not be answered, its problem in its place.
func (w *Rows) AppendFailedJSON(dst []byte, row *Row, k *problem.Kind, violations []document.Violation) []byte {
	dst = append(row.appendHead(dst, "failed"), `,"problem":`...)
	return append(problem.AppendJSON(dst, k, violations), '}')
}

func (w *Rows) appendLeaf(dst []byte, l *leaf, a *Answer) ([]byte, error) {
	if l.number == nil {
		return l.text.appendJSON(dst, a), nil
	}
	v, valid := l.number.value(a)
	if !valid {
		return append(dst, "null"...), nil
	}
	return w.Report.appendNumber(dst, l.number.Kind, v)
}

// ColumnNames are the keys of the columns of a batch, in order, without those that
// name the row.
func ColumnNames() []string {
	var list []string
	for i := range leaves {
		list = append(list, leaves[i].name())
	}
	return append(list, "notes", "fingerprint", "problem")
}

// AppendCells appends the value of each of those columns, in JSON, each followed by
// a record separator, which JSON text never holds.
func (w *Rows) AppendCells(dst []byte, a *Answer) ([]byte, error) {
	for i := range leaves {
		var err error
		if dst, err = w.appendLeaf(dst, &leaves[i], a); err != nil {
			return dst, err
		}
		dst = append(dst, CellEnd)
	}
	dst = append(appendNotes(dst, a.Notes), CellEnd)
	dst = append(hex.AppendEncode(append(dst, '"'), a.Fingerprint[:]), '"', CellEnd)
	return append(append(dst, "null"...), CellEnd), nil
}

// AppendFailedCells appends the columns of a row that could not be answered.
func (w *Rows) AppendFailedCells(dst []byte, k *problem.Kind, violations []document.Violation) []byte {
	for range leaves {
		dst = append(append(dst, "null"...), CellEnd)
	}
	dst = append(append(dst, "[]"...), CellEnd)
	dst = append(append(dst, "null"...), CellEnd)
	return append(problem.AppendJSON(dst, k, violations), CellEnd)
}

// CellEnd ends a cell of [Rows.AppendCells].
const CellEnd = 0x1e

// AppendUnits appends the units object of a batch.
func (w *Rows) AppendUnits(dst []byte) []byte {
	return append(dst, w.Report.unitsObject(SectionBlock, lastOfRows)...)
}

// CSVNames are the names of the columns of a CSV batch: numbers carry their unit.
func (w *Rows) CSVNames(carried []string) []string {
	list := append([]string{"row", "id", "status"}, carried...)
	for i := range leaves {
		l := &leaves[i]
		name := l.name()
		if l.number != nil {
			if unit := w.Report.ASCII(l.number.Kind); unit != "" {
				name += "_" + unit
			}
		}
		list = append(list, name)
	}
	return append(list, "note_codes", "fingerprint", "error_code", "error_pointer", "error_detail")
}

// AppendCSVHeader appends the line of names.
func (w *Rows) AppendCSVHeader(dst []byte, carried []string) []byte {
	for i, name := range w.CSVNames(carried) {
		if i > 0 {
			dst = append(dst, w.Comma)
		}
		dst = w.appendText(dst, name)
	}
	return append(dst, '\r', '\n')
}

func (w *Rows) appendCSVHead(dst []byte, row *Row, status string) []byte {
	dst = append(strconv.AppendInt(dst, int64(row.Number), 10), w.Comma)
	dst = append(w.appendText(dst, row.ID), w.Comma)
	dst = append(dst, status...)
	for _, c := range row.Carried {
		dst = w.appendText(append(dst, w.Comma), c.Text)
	}
	return dst
}

// AppendCSV appends an answer as one line.
func (w *Rows) AppendCSV(dst []byte, row *Row, a *Answer) ([]byte, error) {
	dst = w.appendCSVHead(dst, row, "ok")
	for i := range leaves {
		l := &leaves[i]
		dst = append(dst, w.Comma)
		if l.number == nil {
			dst = w.appendList(dst, l.text.Values(a))
			continue
		}
		v, valid := l.number.value(a)
		if !valid {
			continue
		}
		v, err := w.Report.In(l.number.Kind, v)
		if err != nil || v-v != 0 {
			return dst, ErrNotFinite
		}
		dst = w.appendNumber(dst, v)
	}
	dst = append(dst, w.Comma)
	for i := range a.Notes {
		if i > 0 {
			dst = append(dst, '|')
		}
		dst = append(dst, a.Notes[i].Code...)
	}
	dst = hex.AppendEncode(append(dst, w.Comma), a.Fingerprint[:])
	return append(dst, w.Comma, w.Comma, w.Comma, '\r', '\n'), nil
}

// AppendFailedCSV appends a row that could not be answered; the first violation
// stands in its cells, and how many more there are.
func (w *Rows) AppendFailedCSV(dst []byte, row *Row, k *problem.Kind, violations []document.Violation) []byte {
	dst = w.appendCSVHead(dst, row, "failed")
	for range len(leaves) + 3 {
		dst = append(dst, w.Comma)
	}
	code, pointer, detail := k.Name, "", k.Title
	if len(violations) > 0 {
		v := violations[0]
		code, pointer, detail = v.Code, v.Parameter, v.Detail
		if pointer == "" {
			pointer = problem.Fragment(v.Pointer)
		}
		if n := len(violations); n > 1 {
			detail += " (and " + strconv.Itoa(n-1) + " more)"
		}
	}
	dst = append(append(dst, code...), w.Comma)
	dst = append(w.appendText(dst, pointer), w.Comma)
	return append(w.appendText(dst, detail), '\r', '\n')
}

func (w *Rows) appendList(dst []byte, values []string) []byte {
	return w.appendText(dst, strings.Join(values, "|"))
}

// appendNumber appends a number with a point or an exponent always, so that no
// reader takes a column of them for integers.
func (w *Rows) appendNumber(dst []byte, v float64) []byte {
	start := len(dst)
	dst = jsontext.AppendNumber(dst, v)
	plain := true
	for i := start; i < len(dst); i++ {
		switch dst[i] {
		case '.':
			plain = false
			if w.DecimalComma {
				dst[i] = ','
			}
		case 'e':
			plain = false
		}
	}
	if plain {
		point := byte('.')
		if w.DecimalComma {
			point = ','
		}
		dst = append(dst, point, '0')
	}
	return dst
}

// appendText appends a cell of text. One that a spreadsheet would take for a
// formula begins with an apostrophe; a number is none, whatever its sign.
func (w *Rows) appendText(dst []byte, s string) []byte {
	escape := s != "" && strings.IndexByte("=+-@\t\r", s[0]) >= 0 && !plainNumber.MatchString(s)
	if !escape && strings.IndexByte(s, w.Comma) < 0 && !strings.ContainsAny(s, "\"\r\n") {
		return append(dst, s...)
	}
	dst = append(dst, '"')
	if escape {
		dst = append(dst, '\'')
	}
	for i := range len(s) {
		if s[i] == '"' {
			dst = append(dst, '"')
		}
		dst = append(dst, s[i])
	}
	return append(dst, '"')
}

// plainNumber is what no spreadsheet takes for a formula although it begins like one.
var plainNumber = regexp.MustCompile(`^[+-]?([0-9]+[.,]?[0-9]*|[.,][0-9]+)([eE][+-]?[0-9]+)?$`)
