package api

import (
	"context"
	"errors"
	"fmt"
	"io"
	"net/http"
	"strconv"
	"time"

	"github.com/labstack/echo/v4"

	"borewright/service/batch"
	"borewright/service/document"
)

// maxArray is how many bytes a JSON array may have: it is read as a whole.
const maxArray = 64 << 20

const rowsFailed = "X-Rows-Failed"

// batchContentTypes are the media types of the answers.
var batchContentTypes = map[batch.Format]string{batch.JSON: "application/json", batch.NDJSON: "application/x-ndjson", batch.CSV: "text/csv; charset=utf-8"}

// maxColumns is how many bytes a batch laid out in columns may have: they are put
// together in memory.
const maxColumns = 256 << 20

// spoolPatience is how long a full spool waits for a client who reads nothing. It is
// shorter than the time after which a client who cannot send gives up.
const spoolPatience = 10 * time.Second

// segments answers many segments in one request.
func (a *API) segments(c echo.Context) error {
	q, err := readBatch(c.Request())
	if err != nil {
		return err
	}
	if q.In == batch.JSON && c.Request().ContentLength > maxArray {
		return arrayTooLarge()
	}
	q.OnFault = a.rowFault(c)
	if q.Out == batch.JSON {
		err = a.wholeBatch(c, q)
	} else {
		err = a.streamedBatch(c, q)
	}
	return batchFault(err)
}

func arrayTooLarge() error {
	return &refusal{kind: bodyTooLarge, detail: fmt.Sprintf("a JSON array may have %d bytes; NDJSON and CSV stream without a bound", maxArray)}
}

// rowFault logs rows that failed by our fault: the client is told the row, the log
// the cause.
func (a *API) rowFault(c echo.Context) func(int, error) {
	id, route := c.Response().Header().Get(requestIDHeader), c.Path()
	return func(row int, err error) {
		a.log.Error("row failed by our fault", "request_id", id, "route", route, "row", row, "cause", err.Error())
	}
}

// wholeBatch answers with one JSON document, which says in its head how many rows
// failed, and so is sent when all is answered.
func (a *API) wholeBatch(c echo.Context, q *batchQuery) error {
	spool := batch.NewSpool(a.spool, 0)
	defer func() { _ = spool.Close() }() // read to its end, or not worth reading
	body := a.progress(c)
	ctx, cancel := context.WithTimeout(c.Request().Context(), a.deadline)
	defer cancel()
	summary, err := batch.Run(ctx, a.service, body, spool, q.Options)
	a.metrics.countRows(summary.OK, summary.Failed)
	if errors.Is(err, context.DeadlineExceeded) {
		return &refusal{kind: tooSlow, detail: fmt.Sprintf("the batch was not answered within %v; send fewer rows, or NDJSON, which streams", a.deadline), unread: true}
	}
	if err != nil {
		return err
	}
	if q.failing && summary.Failed > 0 {
		return &refusal{kind: invalidInput, detail: fmt.Sprintf("%d of %d rows cannot be answered", summary.Failed, summary.Total), violations: summary.FirstErrors}
	}
	spool.End(nil)
	c.Response().Header().Set(rowsFailed, strconv.Itoa(summary.Failed))
	return sendSpool(c, q.Out, spool, body)
}

// stream is a batch that is answered while its rows come in.
type stream struct {
	query  *batchQuery
	spool  *batch.Spool
	body   *progress
	ok     int
	failed int
	done   chan struct{}
}

// streamedBatch answers while rows come in. Answers pass through a spool, so that a
// client that reads only when it has sent everything does not wait for itself.
func (a *API) streamedBatch(c echo.Context, q *batchQuery) error {
	ctx, cancel := context.WithCancel(c.Request().Context())
	defer cancel()
	s := &stream{query: q, spool: batch.NewSpool(a.spool, a.patience), body: a.progress(c), done: make(chan struct{})}
	if err := s.body.control.EnableFullDuplex(); err != nil && !errors.Is(err, http.ErrNotSupported) {
		return err
	}
	c.Response().Header().Set("Trailer", rowsFailed)
	go s.answer(ctx, a.service)
	err := sendSpool(c, q.Out, s.spool, s.body)
	if err != nil { // the answering may be waiting for a client that neither sends nor reads
		cancel()
		s.body.stop()
		_ = s.spool.Close()
	}
	<-s.done
	a.metrics.countRows(s.ok, s.failed)
	_ = s.spool.Close() // read to its end, or without a reader
	if err != nil {
		c.Response().Header().Del("Trailer")
		return err
	}
	c.Response().Header().Set(rowsFailed, strconv.Itoa(s.failed))
	return nil
}

// answer answers the rows into the spool.
func (s *stream) answer(ctx context.Context, desks batch.Desks) {
	defer close(s.done)
	summary, err := batch.Run(ctx, desks, s.body, s.spool, s.query.Options)
	s.ok, s.failed = summary.OK, summary.Failed
	if !errors.Is(err, batch.ErrSpoolFull) {
		s.spool.End(err)
		return
	}
	s.failed++
	s.spool.WriteLast(batch.LastRow(s.query.Options, summary))
	s.spool.End(nil)
	_, _ = io.Copy(io.Discard, s.body) // a client that reads only when all is sent must be let go on sending
}

// sendSpool sends what the spool gives. Nothing is out before its first bytes, so that a
// batch that cannot be read at all gets the status that it deserves.
func sendSpool(c echo.Context, form batch.Format, spool *batch.Spool, p *progress) error {
	buffer := make([]byte, 64<<10)
	res := c.Response()
	for {
		part, err := spool.Next(buffer)
		if err != nil && !errors.Is(err, io.EOF) {
			return err
		}
		if !res.Committed {
			res.Header().Set("Content-Type", batchContentTypes[form])
			res.WriteHeader(http.StatusOK)
		}
		if err != nil {
			return nil
		}
		p.writing()
		if _, err := res.Write(part); err != nil {
			return err
		}
		if err := p.control.Flush(); err != nil && !errors.Is(err, http.ErrNotSupported) {
			return err
		}
	}
}

// batchFault words what ended a batch. What is refused before all of it has been read
// is read to a bound, so that the refusal reaches a client that is still sending.
func batchFault(err error) error {
	var refused *document.Refusal
	var r *refusal
	switch {
	case errors.Is(err, batch.ErrTooLarge):
		return arrayTooLarge()
	case errors.Is(err, batch.ErrSpoolFull), errors.Is(err, batch.ErrColumnsTooLarge):
		return &refusal{kind: bodyTooLarge, detail: "the answers are too many for one JSON document; ask for NDJSON or CSV"}
	case errors.Is(err, io.ErrUnexpectedEOF):
		return cutOff(err)
	case errors.As(err, &refused), errors.As(err, &r):
		r = explain(err)
		r.unread = true
		return r
	}
	return err
}

// progress moves the deadlines of a long request with what it gets done: a client
// that sends or reads goes on, one that stands still does not.
type progress struct {
	body    io.Reader
	control *http.ResponseController
}

func (a *API) progress(c echo.Context) *progress {
	return &progress{c.Request().Body, http.NewResponseController(c.Response().Writer)}
}

// A writer without deadlines, as in tests, has none to move.
func (p *progress) Read(b []byte) (int, error) {
	_ = p.control.SetReadDeadline(time.Now().Add(readTimeout))
	n, err := p.body.Read(b)
	p.writing()
	return n, err
}

// stop ends a read that may be waiting.
func (p *progress) stop() { _ = p.control.SetReadDeadline(time.Now()) }

func (p *progress) writing() { _ = p.control.SetWriteDeadline(time.Now().Add(writeTimeout)) }
