package batch

import (
	"errors"
	"slices"
	"strconv"

	"borewright/service"
	"borewright/service/answer"
	"borewright/service/document"
	"borewright/service/problem"
)

// explain words why a row could not be answered. What is our fault is told without
// its cause, and never stops the other rows.
func explain(err error) (*problem.Kind, []document.Violation) {
	var r *document.Refusal
	switch {
	case errors.As(err, &r) && r.Malformed:
		return problem.MalformedBody, r.Violations
	case errors.As(err, &r):
		return problem.InvalidInput, r.Violations
	}
	return problem.CalculationFailed, []document.Violation{{Code: problem.CalculationFailed.Name, Detail: "this is a fault of the service and not of the row; report it with the row"}}
}

func byNames(violations []document.Violation) []document.Violation {
	var r *document.Refusal
	if errors.As(service.ByNames(&document.Refusal{Violations: violations}), &r) {
		return r.Violations
	}
	return violations
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

// tags are those of a posted document that the batch carries along; a line of CSV
// has a cell for each name, whether or not the document has the tag.
func (o *Options) tags(list []document.Tag) []answer.Carried {
	var carried []answer.Carried
	if o.Out == CSV {
		for _, name := range o.Carry {
			carried = append(carried, answer.Carried{Name: name, Text: tagOf(list, name)})
		}
		return carried
	}
	for _, t := range list {
		if slices.Contains(o.Carry, t.Name) || slices.Contains(o.Carry, carryAll) {
			carried = append(carried, answer.Carried{Name: t.Name, Text: t.Text})
		}
	}
	return carried
}

func tagOf(list []document.Tag, name string) string {
	for _, t := range list {
		if t.Name == name {
			return t.Text
		}
	}
	return ""
}

// pad gives a line of CSV a cell for every carried column.
func (p *pipeline) pad(carried []answer.Carried) []answer.Carried {
	for p.options.Out == CSV && len(carried) < len(p.pass) {
		carried = append(carried, answer.Carried{Name: p.pass[len(carried)]})
	}
	return carried
}

// carryAll carries every column and tag that is no name of ours.
const carryAll = "*"

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
