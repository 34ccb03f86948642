// Package batch answers many segments at once: a JSON array, NDJSON or CSV in, any
// of them out, row by row in their order. A bad row is a problem in its own place.
package batch

import (
	"context"
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
}

// Summary counts the rows.
type Summary struct {
	Total, OK, Failed int
	FirstErrors       []document.Violation // of failed rows, pointers from the batch
}

// maxErrors is how many violations a summary keeps.
const maxErrors = 100

// maxRow is how many bytes a row may have.
const maxRow = 64 << 10

// Desks gives each worker a desk of its own; [service.Service] does.
type Desks interface{ Desk() *service.Desk }

// Run answers the rows of r into w. Its error is a *document.Refusal where the batch
// as a whole cannot be read, or what reading and writing met.
func Run(ctx context.Context, s Desks, r io.Reader, w io.Writer, o Options) (Summary, error) {
	if err := o.check(); err != nil {
		return Summary{}, err
	}
	source, err := newSource(r, &o)
	if err != nil {
		return Summary{}, err
	}
	sink := newSink(w, &o, source)
	if err := sink.begin(); err != nil {
		return Summary{}, err
	}
	p := pipeline{service: s, options: &o, rows: sink.rows, pass: sink.pass}
	summary, err := p.run(ctx, source, sink)
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
	case o.In != CSV && o.Out == CSV && slices.Contains(o.Carry, carryAll):
		return refusal(false, "carry", "unknown_value", "a CSV of posted documents needs the names of the tags to carry: carry=from,to")
	}
	return nil
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
	requests []request
	in       []byte // the documents
	out      []byte // their answers
	ok       int
	failed   int
	errors   []document.Violation
	fault    error
	done     chan struct{}
}

// answerChunk answers the rows of a chunk one after the other.
func (p *pipeline) answerChunk(d *service.Desk, c *chunk) {
	defer func() {
		if v := recover(); v != nil { // one row must not take the process with it
			c.fault = fmt.Errorf("panic in a batch: %v\n%s", v, debug.Stack())
		}
	}()
	for i := range c.requests {
		p.answerRow(d, c, &c.requests[i])
	}
}

func (p *pipeline) answerRow(d *service.Desk, c *chunk, r *request) {
	kind, violations := problem.InvalidInput, r.wrong
	row := answer.Row{Number: r.number, ID: r.id, Carried: r.carried}
	if r.tooLarge {
		kind = problem.RowTooLarge
		violations = []document.Violation{{Code: "row_too_large", Detail: "a row has at most 64 kB; send what is larger to /v1/segment by itself"}}
	}
	row.Carried = p.pad(row.Carried)
	if violations == nil {
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
		if err == nil {
			mark := len(c.out)
			if c.out, err = p.appendAnswer(c.out, &row, a); err == nil {
				c.ok++
				return
			}
			c.out = c.out[:mark]
		}
		if kind, violations = explain(err); r.typed {
			violations = byNames(violations)
		}
	}
	c.out = p.appendFailed(c.out, &row, kind, violations)
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
	row := answer.Row{Number: s.Total + 1}
	if o.Out == CSV {
		p.pass = make([]string, len(o.Carry))
		row.Carried = p.pad(nil)
	}
	return p.appendFailed(nil, &row, problem.SpoolFull, []document.Violation{{Code: problem.SpoolFull.Name, Detail: detail}})
}
