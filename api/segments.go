package api

import (
	"context"
	"errors"
	"fmt"
	"io"
	"mime"
	"net/http"
	"strconv"
	"strings"
	"time"

	"github.com/labstack/echo/v4"

	"borewright/service/batch"
	"borewright/service/document"
)

// maxArray is how many bytes a JSON array may have: it is read as a whole.
const maxArray = 64 << 20

const rowsFailed = "X-Rows-Failed"

// The media types of a batch.
var batchTypes = map[string]batch.Format{"application/json": batch.JSON, "application/x-ndjson": batch.NDJSON, "text/csv": batch.CSV}

var batchContentTypes = map[batch.Format]string{batch.JSON: "application/json", batch.NDJSON: "application/x-ndjson", batch.CSV: "text/csv; charset=utf-8"}

// segments answers many segments in one request.
func (a *API) segments(c echo.Context) error {
	o, failing, err := readBatch(c.Request())
	if err != nil {
		return err
	}
	if o.In == batch.JSON && c.Request().ContentLength > maxArray {
		return arrayTooLarge()
	}
	if o.Out == batch.JSON {
		err = a.wholeBatch(c, o, failing)
	} else {
		err = a.streamedBatch(c, o)
	}
	if errors.Is(err, batch.ErrTooLarge) {
		return arrayTooLarge()
	}
	return err
}

func arrayTooLarge() error {
	return &refusal{kind: bodyTooLarge, detail: fmt.Sprintf("a JSON array may have %d bytes; NDJSON and CSV stream without a bound", maxArray)}
}

// wholeBatch answers with one JSON document, which says in its head how many rows
// failed, and so is sent when all is answered.
func (a *API) wholeBatch(c echo.Context, o batch.Options, failing bool) error {
	spool := batch.NewSpool(a.spool)
	defer spool.Close()
	body := a.progress(c)
	summary, err := batch.Run(c.Request().Context(), a.service, body, spool, o)
	if err != nil {
		return a.batchFault(err)
	}
	if failing && summary.Failed > 0 {
		return &refusal{kind: invalidInput, detail: fmt.Sprintf("%d of %d rows cannot be answered", summary.Failed, summary.Total), violations: summary.FirstErrors}
	}
	spool.End(nil)
	c.Response().Header().Set(rowsFailed, strconv.Itoa(summary.Failed))
	return sendSpool(c, o.Out, spool, body)
}

// streamedBatch answers while rows come in. Answers pass through a spool, so that a
// client that reads only when it has sent everything does not wait for itself.
func (a *API) streamedBatch(c echo.Context, o batch.Options) error {
	ctx, cancel := context.WithCancel(c.Request().Context())
	defer cancel()
	spool := batch.NewSpool(a.spool)
	body := a.progress(c)
	if err := body.control.EnableFullDuplex(); err != nil && !errors.Is(err, http.ErrNotSupported) {
		return err
	}
	c.Response().Header().Set("Trailer", rowsFailed)
	var failed int
	done := make(chan struct{})
	go func() {
		defer close(done)
		summary, err := batch.Run(ctx, a.service, body, spool, o)
		failed = summary.Failed
		full := errors.Is(err, batch.ErrSpoolFull)
		if full {
			failed++
			err = spool.WriteLast(batch.LastRow(o, summary))
		}
		spool.End(err)
		if full { // a client that reads only when all is sent must be let go on sending
			_, _ = io.Copy(io.Discard, body)
		}
	}()
	err := sendSpool(c, o.Out, spool, body)
	cancel()
	select {
	case <-done:
	default: // it may be waiting for a client that sends no more
		_ = body.control.SetReadDeadline(time.Now())
		_ = spool.Close()
		<-done
	}
	_ = spool.Close()
	if err != nil {
		return a.batchFault(err)
	}
	c.Response().Header().Set(rowsFailed, strconv.Itoa(failed))
	return nil
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

// batchFault tells a fault of reading from one of ours.
func (a *API) batchFault(err error) error {
	var refused *document.Refusal
	switch {
	case errors.As(err, &refused), errors.Is(err, batch.ErrTooLarge):
		return err
	case errors.Is(err, batch.ErrSpoolFull):
		return &refusal{kind: bodyTooLarge, detail: "the answers are too many for one JSON document; ask for NDJSON or CSV"}
	case errors.Is(err, io.ErrUnexpectedEOF):
		return cutOff(err)
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

func (p *progress) writing() { _ = p.control.SetWriteDeadline(time.Now().Add(writeTimeout)) }

// readBatch reads how a batch comes and how it is wanted.
func readBatch(r *http.Request) (o batch.Options, failing bool, err error) {
	if e := r.Header.Values("Content-Encoding"); len(e) > 0 && !(len(e) == 1 && strings.EqualFold(e[0], "identity")) {
		return o, false, &refusal{kind: unsupportedMedia, detail: "send the body as it is, without Content-Encoding"}
	}
	if o.In, err = batchType(r.Header); err != nil {
		return o, false, err
	}
	o.MaxArray = maxArray
	o.Out = acceptedType(r.Header.Values("Accept"), o.In)
	values, err := readQuery(r.URL.RawQuery, "layout", "carry", "on_error", "dialect", "bom", "report_units")
	if err != nil {
		return o, false, err
	}
	var wrong []document.Violation
	refuse := func(name, detail string) {
		wrong = append(wrong, document.Violation{Parameter: name, Code: "unknown_value", Detail: detail})
	}
	layouts := map[string]batch.Layout{"": batch.FlatRows, "rows": batch.FlatRows, "columns": batch.Columns, "blocks": batch.Blocks}
	var known bool
	if o.Layout, known = layouts[values[0]]; !known {
		refuse("layout", "layout is rows, columns or blocks")
	}
	if values[1] != "" {
		for name := range strings.SplitSeq(values[1], ",") {
			o.Carry = append(o.Carry, strings.TrimSpace(name))
		}
	}
	switch values[2] {
	case "":
	case "fail":
		failing = true
		if o.Out != batch.JSON {
			refuse("on_error", "on_error=fail needs the whole answer at once: ask for application/json")
		}
	default:
		refuse("on_error", "on_error takes fail, to be answered 422 when a row fails; leave it out for a problem in each row")
	}
	if o.Dialect, known = batch.DialectByName(values[3]); !known {
		refuse("dialect", "dialect is one of "+strings.Join(batch.DialectNames(), ", "))
	}
	switch values[4] {
	case "", "false":
	case "true":
		o.BOM = true
	default:
		refuse("bom", "bom is true or false")
	}
	var bad *document.Refusal
	if o.Report, err = readReport(values[5]); errors.As(err, &bad) {
		wrong = append(wrong, bad.Violations...)
	}
	if wrong != nil {
		return o, false, &document.Refusal{Violations: wrong}
	}
	return o, failing, nil
}

// batchType is the form of the body.
func batchType(h http.Header) (batch.Format, error) {
	declared := h.Values("Content-Type")
	if len(declared) == 1 {
		media, params, err := mime.ParseMediaType(declared[0])
		charset, told := params["charset"]
		if form, ok := batchTypes[media]; ok && err == nil && (!told || strings.EqualFold(charset, "utf-8")) {
			return form, nil
		}
	}
	return 0, &refusal{kind: unsupportedMedia, detail: "send Content-Type: application/json, application/x-ndjson or text/csv, in UTF-8"}
}

// acceptedType is the form of the answer: the first that the client names and the
// service has, else the one that came.
func acceptedType(headers []string, in batch.Format) batch.Format {
	for _, h := range headers {
		for one := range strings.SplitSeq(h, ",") {
			media, _, err := mime.ParseMediaType(strings.TrimSpace(one))
			if form, ok := batchTypes[media]; ok && err == nil {
				return form
			}
		}
	}
	return in
}
