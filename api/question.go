package api

import (
	"encoding/hex"
	"errors"
	"net/http"
	"net/url"
	"slices"
	"strings"

	"github.com/labstack/echo/v4"

	"borewright/service"
	"borewright/service/answer"
	"borewright/service/document"
	"borewright/service/flat"
)

// options of a question, besides the flat names: how it is to be answered.
var options = []string{"pick", "accept_limits", "on_error", "report_units"}

const textType = "text/plain; charset=utf-8"

// question answers a calculation asked by flat names, so that a cell of a
// spreadsheet and a cache can ask.
func (a *API) question(door document.Door) echo.HandlerFunc {
	return func(c echo.Context) error {
		query, asText, err := readQuestion(c.Request().URL.RawQuery, door)
		var reply service.Reply
		if err == nil {
			reply, err = a.service.Ask(nil, query)
		}
		var refused *document.Refusal
		if errors.As(err, &refused) && asText {
			c.Response().Header().Set("Cache-Control", "no-store")
			return sendAs(c, textType, []byte(service.ErrorText(refused)))
		}
		if err != nil {
			return err
		}
		tag := `"` + hex.EncodeToString(reply.Tag[:16]) + `"`
		h := c.Response().Header()
		h.Set("ETag", tag)
		h.Set("Cache-Control", "private, no-cache") // kept, and asked about each time
		if matches(c.Request().Header.Values("If-None-Match"), tag) {
			return c.NoContent(http.StatusNotModified)
		}
		if reply.Text {
			return sendAs(c, textType, reply.Body)
		}
		return sendAs(c, "application/json", reply.Body)
	}
}

func sendAs(c echo.Context, contentType string, body []byte) error {
	c.Response().Header().Set("Content-Type", contentType)
	return send(c, http.StatusOK, body)
}

// matches reports whether the caller has this answer already (RFC 9110, 13.1.2).
func matches(headers []string, tag string) bool {
	for _, h := range headers {
		for one := range strings.SplitSeq(h, ",") {
			if one = strings.TrimSpace(one); one == "*" || strings.TrimPrefix(one, "W/") == tag {
				return true
			}
		}
	}
	return false
}

// readQuestion parts a query string into options and flat names. Whether faults are
// wanted as text is told even where the rest is wrong.
func readQuestion(raw string, door document.Door) (*service.Query, bool, error) {
	values := make([]string, len(options))
	q := &service.Query{Door: door}
	var wrong []document.Violation
	for part := range strings.SplitSeq(raw, "&") {
		if part == "" {
			continue
		}
		rawName, rawValue, _ := strings.Cut(part, "=")
		name, errName := url.QueryUnescape(rawName)
		value, errValue := url.QueryUnescape(rawValue)
		if errName != nil || errValue != nil || slices.Contains(options, name) || name == "" {
			if v := readParameter(part, options, values); v != nil {
				wrong = append(wrong, *v)
			}
			continue
		}
		q.Pairs = append(q.Pairs, flat.Pair{Name: name, Text: value})
	}
	asText, faults := setOptions(q, values)
	if wrong = append(wrong, faults...); wrong != nil {
		return nil, asText, &document.Refusal{Violations: append(wrong, service.FlatFaults(q.Pairs, door)...)}
	}
	return q, asText, nil
}

// setOptions reads how the question is to be answered.
func setOptions(q *service.Query, values []string) (asText bool, wrong []document.Violation) {
	refuse := func(name, detail string) {
		wrong = append(wrong, document.Violation{Parameter: name, Code: "unknown_value", Detail: detail})
	}
	q.Pick = values[0]
	switch values[1] {
	case "", "false":
	case "true":
		q.AcceptLimits = true
	default:
		refuse("accept_limits", "accept_limits is true or false")
	}
	switch values[2] {
	case "":
	case "text":
		asText = true
	default:
		refuse("on_error", "on_error takes text, to be answered 200 with #ERR and the reason; leave it out for the error status")
	}
	report, err := readReport(values[3])
	var r *document.Refusal
	if errors.As(err, &r) {
		wrong = append(wrong, r.Violations...)
	}
	q.Report = report
	return asText, wrong
}

// readReport reads report_units; nothing is SI.
func readReport(text string) (*answer.Report, error) {
	if text == "" {
		return nil, nil
	}
	r, err := answer.ReportIn(text)
	if err != nil {
		return nil, &document.Refusal{Violations: []document.Violation{{Parameter: "report_units", Code: "unknown_value", Detail: err.Error()}}}
	}
	return r, nil
}
