package batch

import (
	"context"
	"errors"
	"io"
	"sync"

	"borewright/service/answer"
	"borewright/service/document"
)

// pipeline reads chunks, answers several at once and writes them in their order.
type pipeline struct {
	service Desks
	options *Options
	rows    *answer.Rows
	pass    []string // names of the carried columns
}

// queued is how many chunks may wait between two stages for each worker: with the
// size of a chunk it bounds the memory of a batch of any length.
const queued = 4

func (p *pipeline) run(ctx context.Context, source source, sink *sink) (Summary, error) {
	ctx, cancel := context.WithCancelCause(ctx)
	defer cancel(nil)
	n := workers()
	work, order := make(chan *chunk, queued*n), make(chan *chunk, 2*queued*n)
	var answering sync.WaitGroup
	for range n {
		d := p.service.Desk()
		answering.Go(func() {
			for c := range work {
				d = p.answerChunk(d, c)
				close(c.done)
			}
		})
	}
	var readErr error
	var reading sync.WaitGroup
	reading.Go(func() {
		defer close(order)
		defer close(work)
		defer guard(&readErr)
		readErr = p.read(ctx, source, work, order)
	})
	summary, err := p.write(ctx, sink, order)
	if err != nil {
		cancel(err)
		for range order { // let the reader end
		}
	}
	reading.Wait()
	answering.Wait()
	if err == nil {
		err = readErr
	}
	return summary, err
}

// read fills chunks until the source ends. A chunk goes off as soon as the source
// would have to wait for more, so that a client who waits for each answer gets it.
func (p *pipeline) read(ctx context.Context, source source, work, order chan *chunk) error {
	for {
		c := takeChunk()
		err := fill(c, source)
		if len(c.requests) > 0 {
			select {
			case order <- c:
			case <-ctx.Done():
				return context.Cause(ctx)
			}
			work <- c
		}
		switch {
		case errors.Is(err, io.EOF):
			return nil
		case err != nil:
			return err
		case ctx.Err() != nil:
			return context.Cause(ctx)
		}
	}
}

// fill takes rows until the chunk is full, the source would wait, or it ends.
func fill(c *chunk, source source) error {
	for len(c.in) < chunkBytes && len(c.requests) < chunkRows {
		if err := source.next(c); err != nil {
			return err
		}
		if source.wouldWait() {
			return nil
		}
	}
	return nil
}

const (
	chunkBytes = 16 << 10
	chunkRows  = 64
	chunkKept  = 1 << 20 // bytes of a chunk that is used again
)

// chunks are those that wait to be used again, by this batch or another.
var chunks = sync.Pool{New: func() any { return new(chunk) }}

func takeChunk() *chunk {
	c := chunks.Get().(*chunk)
	*c = chunk{requests: c.requests[:0], in: c.in[:0], out: c.out[:0], done: make(chan struct{})}
	return c
}

// giveBack keeps a chunk for the next rows; one that has grown large is let go.
func giveBack(c *chunk) {
	if cap(c.in)+cap(c.out) > chunkKept {
		return
	}
	clear(c.requests)
	chunks.Put(c)
}

// write takes the chunks in the order in which they were read.
func (p *pipeline) write(ctx context.Context, sink *sink, order chan *chunk) (Summary, error) {
	var s Summary
	for c := range order {
		<-c.done
		if err := sink.write(c.out); err != nil {
			return s, err
		}
		s.add(c)
		giveBack(c)
		if ctx.Err() != nil {
			return s, context.Cause(ctx)
		}
	}
	return s, nil
}

// add counts the rows of a chunk.
func (s *Summary) add(c *chunk) {
	s.Total += c.ok + c.failed
	s.OK += c.ok
	s.Failed += c.failed
	s.Faults += c.faults
	if room := maxErrors - len(s.FirstErrors); room > 0 {
		s.FirstErrors = append(s.FirstErrors, c.errors[:min(room, len(c.errors))]...)
	}
}

// refusal of the whole batch.
func refusal(malformed bool, parameter, code, detail string) error {
	return &document.Refusal{Malformed: malformed, Violations: []document.Violation{{Parameter: parameter, Code: code, Detail: detail}}}
}
