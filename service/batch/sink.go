package batch

import (
	"bytes"
	"errors"
	"io"
	"slices"
	"strconv"

	"borewright/service/answer"
	"borewright/service/jsontext"
)

// sink writes what the rows become, and what stands around them.
type sink struct {
	out     io.Writer
	options *Options
	rows    *answer.Rows
	pass    []string
	columns [][]byte // of the columns layout
	held    int64    // bytes of them
	last    []byte   // held back: the comma behind the last row of a JSON array
	table   answer.TableText
}

func newSink(w io.Writer, o *Options, pass []string) *sink {
	return &sink{out: w, options: o, rows: rowsOf(o), pass: pass}
}

func rowsOf(o *Options) *answer.Rows {
	rows := &answer.Rows{Report: o.Report, Comma: o.Dialect.Comma, DecimalComma: o.Dialect.DecimalComma}
	if rows.Comma == 0 {
		rows.Comma = ','
	}
	return rows
}

func (s *sink) put(b []byte) error {
	_, err := s.out.Write(b)
	return err
}

// begin writes what stands before the rows.
func (s *sink) begin() error {
	switch {
	case s.options.Out == CSV:
		var head []byte
		if s.options.BOM {
			head = append(head, ByteOrderMark...)
		}
		return s.put(s.rows.AppendCSVHeader(head, s.pass))
	case s.options.Out == JSON && s.options.Layout == Columns:
		s.columns = make([][]byte, len(s.columnNames()))
		return nil
	case s.options.Out == JSON:
		return s.put([]byte(`{"rows":[`))
	}
	return nil
}

// write takes the answers of a chunk.
func (s *sink) write(b []byte) error {
	switch {
	case len(b) == 0:
		return nil
	case s.options.Out == Table:
		s.table.Add(b)
		return nil
	case s.options.Out == JSON && s.options.Layout == Columns:
		return s.column(b)
	case s.options.Out == JSON:
		if len(s.last) > 0 {
			if err := s.put(s.last); err != nil {
				return err
			}
		}
		s.last = []byte{','}
		return s.put(b[:len(b)-1])
	}
	return s.put(b)
}

// rowColumns name the row in the columns layout.
var rowColumns = []string{"row", "id", "status"}

// columnNames are the keys of the columns layout, in the order of the cells.
func (s *sink) columnNames() []string {
	return slices.Concat(rowColumns, s.pass, answer.ColumnNames())
}

// ErrColumnsTooLarge is more columns than are put together in memory.
var ErrColumnsTooLarge = errors.New("the columns are too large")

// column parts cells and puts each behind its column.
func (s *sink) column(b []byte) error {
	if s.held += int64(len(b)); s.options.MaxHeld > 0 && s.held > s.options.MaxHeld {
		return ErrColumnsTooLarge
	}
	for i := 0; len(b) > 0; i++ {
		cell, rest, _ := bytes.Cut(b, []byte{answer.CellEnd})
		at := &s.columns[i%len(s.columns)]
		if len(*at) > 0 {
			*at = append(*at, ',')
		}
		*at, b = append(*at, cell...), rest
	}
	return nil
}

// appendRowCells appends the cells that name a row.
func (p *pipeline) appendRowCells(dst []byte, row *answer.Row, status string) []byte {
	dst = append(strconv.AppendInt(dst, int64(row.Number), 10), answer.CellEnd)
	if row.ID == "" {
		dst = append(dst, "null"...)
	} else {
		dst = jsontext.AppendString(dst, row.ID)
	}
	dst = append(append(append(append(dst, answer.CellEnd), '"'), status...), '"', answer.CellEnd)
	for _, c := range row.Carried {
		dst = append(jsontext.AppendString(dst, c.Text), answer.CellEnd)
	}
	return dst
}

// end writes what stands behind the rows.
func (s *sink) end(summary *Summary) error {
	switch {
	case s.options.Out == Table:
		return s.table.Write(s.out, s.options.Report)
	case s.options.Out != JSON:
		return nil
	}
	var tail []byte
	if s.options.Layout == Columns {
		tail = append(tail, `{"columns":{`...)
		for i, name := range s.columnNames() {
			if i > 0 {
				tail = append(tail, ',')
			}
			tail = append(jsontext.AppendString(tail, name), `:[`...)
			tail = append(append(tail, s.columns[i]...), ']')
		}
		tail = append(tail, '}')
	} else {
		tail = append(tail, ']')
	}
	tail = s.rows.AppendUnits(append(tail, `,"units":`...))
	tail = strconv.AppendInt(append(tail, `,"summary":{"total":`...), int64(summary.Total), 10)
	tail = strconv.AppendInt(append(tail, `,"ok":`...), int64(summary.OK), 10)
	tail = strconv.AppendInt(append(tail, `,"failed":`...), int64(summary.Failed), 10)
	return s.put(append(tail, '}', '}'))
}
