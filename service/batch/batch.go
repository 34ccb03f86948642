// Package batch answers many segments at once: a JSON array, NDJSON or CSV in, any
// of them out, row by row in their order. A bad row is a problem in its own place.
package batch

import (
	"context"
	"errors"
	"fmt"
	"io"
	"runtime"
	"runtime/debug"
	"slices"

	"borewright/service"
	"borewright/service/answer"
	"borewright/service/document"
	"borewright/service/problem"
)

// Format is a form of rows.
type Format uint8

// The forms. Table is for people and only comes out.
const (
	JSON Format = iota + 1
	NDJSON
	CSV
	Table
)

// Layout is how a JSON batch is laid out.
type Layout uint8

// The layouts.
const (
	FlatRows Layout = iota // leaf names in each row
	Columns                // one array for each leaf
	Blocks                 // the whole answer in each row
)

// Options say how a batch comes and goes.
type Options struct {
	In, Out  Format
	Layout   Layout
	Carry    []string // columns or tags of the list that pass through; "*" for all
	Dialect  Dialect
	BOM      bool // begin CSV with a byte order mark, for a spreadsheet program
	Report   *answer.Report
	MaxArray int64 // bytes of a JSON array; 0: no bound
	MaxHeld  int64 // bytes of columns, which are put together in memory; 0: no bound
	// OnFault is told of rows that failed by our fault and not by their own: the rows
	// do not say why. It is called by several goroutines.
	OnFault func(row int, err error)
}

// Summary counts the rows.
type Summary struct {
	Total, OK, Failed int
	Faults            int                  // of the failed ones: by our fault
	FirstErrors       []document.Violation // of failed rows, pointers from the batch
	carried           []string
}

// maxErrors is how many violations a summary keeps.
const maxErrors = 100

// maxRow is how many bytes a row may have.
const maxRow = 64 << 10

// Desks gives each worker a desk of its own; [service.Service] does.
type Desks interface{ Desk() *service.Desk }

// Run answers the rows of r into w. Its error is a *document.Refusal where the batch
// as a whole cannot be read, or what reading and writing met.
func Run(ctx context.Context, s Desks, r io.Reader, w io.Writer, o Options) (summary Summary, err error) {
	defer guard(&err)
	if err := o.check(); err != nil {
		return Summary{}, err
	}
	source, err := newSource(r, &o)
	if err != nil {
		return Summary{}, err
	}
	pass := o.carriedNames(source)
	if err := o.checkCarried(pass); err != nil {
		return Summary{}, err
	}
	sink := newSink(w, &o, pass)
	if err := sink.begin(); err != nil {
		return Summary{}, err
	}
	p := pipeline{service: s, options: &o, rows: sink.rows, pass: pass}
	summary, err = p.run(ctx, source, sink)
	summary.carried = pass
	if err != nil {
		return summary, err
	}
	return summary, sink.end(&summary)
}

// check refuses options that do not go together.
func (o *Options) check() error {
	switch {
	case o.Layout != FlatRows && o.Out == CSV, o.Layout == Columns && o.Out == NDJSON:
		return refusal(false, "layout", "unknown_value", "CSV has rows; NDJSON has rows or blocks; columns are a layout of JSON")
	case o.In != CSV && o.oneHead() && slices.Contains(o.Carry, carryAll):
		return refusal(false, "carry", "unknown_value", "columns for the tags of posted documents need their names: carry=from,to")
	}
	return nil
}

// guard turns a panic into an error: a batch runs on goroutines of its own, and a
// fault in one of them must not take the process with it.
func guard(err *error) {
	if v := recover(); v != nil {
		*err = fmt.Errorf("panic: %v\n%s", v, debug.Stack())
	}
}

// workers is how many rows are answered at the same time.
func workers() int { return max(1, runtime.GOMAXPROCS(0)) }

// request is one row as it came: a document, or what already stands against it.
type request struct {
	start, end int // of the document in the chunk
	number     int
	id         string
	typed      bool
	carried    []answer.Carried
	tooLarge   bool
	wrong      []document.Violation
}

// chunk is a run of rows that one worker answers.
type chunk struct {
	requests           []request
	in                 []byte // the documents
	out                []byte // their answers
	ok, failed, faults int
	errors             []document.Violation
	done               chan struct{}
}

// answerChunk answers the rows of a chunk one after the other, and gives the desk to
// go on with: one that a row has left in disorder is not used again.
func (p *pipeline) answerChunk(d *service.Desk, c *chunk) *service.Desk {
	for i := range c.requests {
		if !p.answerRow(d, c, &c.requests[i]) {
			d = p.service.Desk()
		}
	}
	return d
}

// answerRow answers one row, and reports whether the desk is still in order: a panic
// costs its row and neither the others nor the process.
func (p *pipeline) answerRow(d *service.Desk, c *chunk, r *request) bool {
	row := answer.Row{Number: r.number, ID: r.id, Carried: p.pad(r.carried)}
	mark := len(c.out)
	inOrder, err := p.tryRow(d, c, r, &row)
	if err != nil {
		c.out = c.out[:mark]
		p.fail(c, r, &row, err)
	} else {
		c.ok++
	}
	return inOrder
}

// tryRow appends the answer of a row, or says why there is none.
func (p *pipeline) tryRow(d *service.Desk, c *chunk, r *request, row *answer.Row) (inOrder bool, err error) {
	defer guard(&err)
	switch {
	case r.tooLarge:
		return true, errRowTooLarge
	case r.start == r.end && r.wrong != nil:
		return true, &document.Refusal{Violations: r.wrong}
	}
	entry := service.Posted
	if r.typed {
		entry = service.Typed
	}
	a, err := d.Answer(c.in[r.start:r.end], document.SegmentDoor, entry)
	if row.ID == "" {
		row.ID = d.ID()
	}
	if p.options.In != CSV {
		row.Carried = p.options.tags(d.Tags())
	}
	if r.typed {
		err = r.allFaults(service.ByNames(err))
	}
	if err == nil {
		c.out, err = p.appendAnswer(c.out, row, a)
	}
	return true, err
}

// allFaults puts what the reader refuses behind what already stands against the row. A
// cell that stands there already is not told twice.
func (r *request) allFaults(err error) error {
	var read *document.Refusal
	if r.wrong == nil || err != nil && !errors.As(err, &read) {
		return err
	}
	all := &document.Refusal{Violations: r.wrong}
	if read != nil {
		for _, v := range read.Violations {
			if !slices.ContainsFunc(r.wrong, func(o document.Violation) bool { return o.Parameter == v.Parameter }) {
				all.Violations = append(all.Violations, v)
			}
		}
	}
	return all
}

// fail writes the problem of a row in its place and counts it.
func (p *pipeline) fail(c *chunk, r *request, row *answer.Row, err error) {
	kind, violations := explain(err)
	if kind == problem.CalculationFailed {
		c.faults++
		if p.options.OnFault != nil {
			p.options.OnFault(r.number, err)
		}
	}
	c.out = p.appendFailed(c.out, row, kind, violations)
	c.failed++
	for _, v := range violations {
		if len(c.errors) < maxErrors {
			c.errors = append(c.errors, inBatch(v, r.number))
		}
	}
}

// LastRow is what a stream ends with when its spool is full.
func LastRow(o Options, s Summary) []byte {
	p := pipeline{options: &o, rows: rowsOf(&o)}
	detail := "the client has not read its answers and no more can be kept for it; read while sending, or send fewer rows at a time"
	p.pass = s.carried
	row := answer.Row{Number: s.Total + 1, Carried: p.pad(nil)}
	return p.appendFailed(nil, &row, problem.SpoolFull, []document.Violation{{Code: problem.SpoolFull.Name, Detail: detail}})
}
