package batch

import (
	"errors"
	"strconv"

	"borewright/service/answer"
	"borewright/service/document"
	"borewright/service/problem"
)

// errRowTooLarge is a row beyond the bound, of which the end was not even read.
var errRowTooLarge = errors.New("the row is too large")

// explain words why a row could not be answered. What is our fault is told without
// its cause, and never stops the other rows.
func explain(err error) (*problem.Kind, []document.Violation) {
	var r *document.Refusal
	switch {
	case errors.Is(err, errRowTooLarge):
		return problem.RowTooLarge, []document.Violation{{Code: problem.RowTooLarge.Name, Detail: "a row has at most 64 kB; send what is larger to /v1/segment by itself"}}
	case errors.As(err, &r) && r.Malformed:
		return problem.MalformedBody, r.Violations
	case errors.As(err, &r):
		return problem.InvalidInput, r.Violations
	}
	return problem.CalculationFailed, []document.Violation{{Code: problem.CalculationFailed.Name, Detail: "this is a fault of the service and not of the row; report it with the row"}}
}

// inBatch points at a row of the batch.
func inBatch(v document.Violation, row int) document.Violation {
	at := strconv.Itoa(row - 1)
	if v.Parameter != "" {
		v.Parameter = "row " + strconv.Itoa(row) + ", " + v.Parameter
		return v
	}
	v.Pointer = "/" + at + v.Pointer
	return v
}

func (p *pipeline) appendAnswer(dst []byte, row *answer.Row, a *answer.Answer) ([]byte, error) {
	var err error
	switch {
	case p.options.Out == CSV:
		return p.rows.AppendCSV(dst, row, a)
	case p.options.Out == Table:
		return p.rows.AppendTable(dst, row, a)
	case p.options.Layout == Columns:
		return p.rows.AppendCells(p.appendRowCells(dst, row, "ok"), a)
	case p.options.Layout == Blocks:
		dst, err = p.rows.AppendBlocks(dst, row, a)
	default:
		dst, err = p.rows.AppendJSON(dst, row, a)
	}
	return append(dst, p.between()), err
}

func (p *pipeline) appendFailed(dst []byte, row *answer.Row, k *problem.Kind, violations []document.Violation) []byte {
	switch {
	case p.options.Out == CSV:
		return p.rows.AppendFailedCSV(dst, row, k, violations)
	case p.options.Out == Table:
		return p.rows.AppendFailedTable(dst, row, k, violations)
	case p.options.Layout == Columns:
		return p.rows.AppendFailedCells(p.appendRowCells(dst, row, "failed"), k, violations)
	}
	return append(p.rows.AppendFailedJSON(dst, row, k, violations), p.between())
}

// between parts two rows: a line of NDJSON ends, a row of a JSON array is followed
// by a comma, of which the sink drops the last.
func (p *pipeline) between() byte {
	if p.options.Out == NDJSON {
		return '\n'
	}
	return ','
}
