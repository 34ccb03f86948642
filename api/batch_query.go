package api

import (
	"mime"
	"net/http"
	"strconv"
	"strings"

	"borewright/service/batch"
	"borewright/service/document"
)

// batchQuery is how a batch comes and how it is wanted.
type batchQuery struct {
	batch.Options
	failing bool // on_error=fail: one failed row fails the batch
}

// batchTypes are the media types of a batch.
var batchTypes = map[string]batch.Format{"application/json": batch.JSON, "application/x-ndjson": batch.NDJSON, "text/csv": batch.CSV}

// batchParameters are those of the query. Each takes its text, "" where it is not
// given, or says what it would have taken.
var batchParameters = []struct {
	name string
	read func(*batchQuery, string) string
}{
	{"layout", (*batchQuery).readLayout}, {"carry", (*batchQuery).readCarry}, {"on_error", (*batchQuery).readOnError},
	{"dialect", (*batchQuery).readDialect}, {"bom", (*batchQuery).readBOM}, {"report_units", (*batchQuery).readReport},
}

// readBatch reads how a batch comes by its headers, and how it is wanted by its query.
func readBatch(r *http.Request) (*batchQuery, error) {
	if e := r.Header.Values("Content-Encoding"); len(e) > 0 && !(len(e) == 1 && strings.EqualFold(e[0], "identity")) {
		return nil, &refusal{kind: unsupportedMedia, detail: "send the body as it is, without Content-Encoding"}
	}
	in, err := batchType(r.Header)
	if err != nil {
		return nil, err
	}
	q := &batchQuery{Options: batch.Options{In: in, Out: acceptedType(r.Header.Values("Accept"), in), MaxArray: maxArray, MaxHeld: maxColumns}}
	names := make([]string, len(batchParameters))
	for i := range batchParameters {
		names[i] = batchParameters[i].name
	}
	values, err := readQuery(r.URL.RawQuery, names...)
	if err != nil {
		return nil, err
	}
	var wrong []document.Violation
	for i, p := range batchParameters {
		if detail := p.read(q, values[i]); detail != "" {
			wrong = append(wrong, document.Violation{Parameter: p.name, Code: "unknown_value", Detail: detail})
		}
	}
	if wrong != nil {
		return nil, &document.Refusal{Violations: wrong}
	}
	return q, nil
}

// layouts by the names that callers give; rows is the default.
var layouts = map[string]batch.Layout{"": batch.FlatRows, "rows": batch.FlatRows, "columns": batch.Columns, "blocks": batch.Blocks}

func (q *batchQuery) readLayout(text string) string {
	var known bool
	if q.Layout, known = layouts[text]; !known {
		return "layout is rows, columns or blocks"
	}
	return ""
}

func (q *batchQuery) readCarry(text string) string {
	if text == "" {
		return ""
	}
	for name := range strings.SplitSeq(text, ",") {
		if name = strings.TrimSpace(name); name == "" {
			return "carry is a list of names parted by commas, or *; one of the names is blank"
		}
		q.Carry = append(q.Carry, name)
	}
	return ""
}

func (q *batchQuery) readOnError(text string) string {
	switch {
	case text == "":
		return ""
	case text != "fail":
		return "on_error takes fail, to be answered 422 when a row fails; leave it out for a problem in each row"
	case q.Out != batch.JSON:
		return "on_error=fail needs the whole answer at once: ask for application/json"
	}
	q.failing = true
	return ""
}

func (q *batchQuery) readDialect(text string) string {
	var known bool
	if q.Dialect, known = batch.DialectByName(text); !known {
		return "dialect is one of " + strings.Join(batch.DialectNames(), ", ")
	}
	return ""
}

func (q *batchQuery) readBOM(text string) string {
	if q.BOM = text == "true"; q.BOM || text == "" || text == "false" {
		return ""
	}
	return "bom is true or false"
}

func (q *batchQuery) readReport(text string) string {
	report, err := readReport(text)
	if err != nil {
		return explain(err).detail
	}
	q.Report = report
	return ""
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

// acceptedType is the form of the answer: the one that the client likes best (RFC
// 9110, 12.5.1), of several the first, and the one that came where it has no wish.
func acceptedType(headers []string, in batch.Format) batch.Format {
	best, liking := in, 0.0
	for _, h := range headers {
		for one := range strings.SplitSeq(h, ",") {
			media, params, err := mime.ParseMediaType(strings.TrimSpace(one))
			form, ok := batchTypes[media]
			if media == "*/*" {
				form, ok = in, true
			}
			if q := quality(params); ok && err == nil && q > liking {
				best, liking = form, q
			}
		}
	}
	return best
}

// quality is how much a client likes a media type, 1 unless it says less.
func quality(params map[string]string) float64 {
	text, given := params["q"]
	if !given {
		return 1
	}
	q, err := strconv.ParseFloat(text, 64)
	if err != nil || !(q >= 0 && q <= 1) {
		return 0
	}
	return q
}
