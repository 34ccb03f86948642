package api

import (
	"net/http"
	"strconv"

	"github.com/labstack/echo/v4"

	"borewright/service/answer"
	"borewright/service/document"
)

var jsonType = []string{"application/json"}

// calculation answers one posted request document.
func (a *API) calculation(door document.Door) echo.HandlerFunc {
	return func(c echo.Context) error {
		r := c.Request()
		if err := checkMediaType(r.Header); err != nil {
			return err
		}
		var report *answer.Report
		if r.URL.RawQuery != "" {
			q, err := readQuery(r.URL.RawQuery, "report_units")
			if err != nil {
				return err
			}
			if report, err = readReport(q[0]); err != nil {
				return err
			}
		}
		// The exchange goes back only after a success: a refusal may quote the body.
		x := exchanges.Get().(*exchange)
		var err error
		if x.body, err = readBody(r, x.body[:0]); err != nil {
			return err
		}
		if x.answer, err = a.service.AnswerIn(x.answer[:0], x.body, door, report); err != nil {
			return err
		}
		if a.judge != nil {
			if err := a.judged(c, x.body); err != nil {
				return err
			}
		}
		c.Response().Header()["Content-Type"] = jsonType
		err = send(c, http.StatusOK, x.answer)
		x.release()
		return err
	}
}

// send writes the status and the body with its length; to HEAD, the length alone.
func send(c echo.Context, status int, body []byte) error {
	res := c.Response()
	res.Header()["Content-Length"] = []string{strconv.Itoa(len(body))}
	res.WriteHeader(status)
	if c.Request().Method == http.MethodHead {
		return nil
	}
	_, err := res.Write(body)
	return err
}

// fixed answers the same bytes each time.
func fixed(contentType string, body []byte) echo.HandlerFunc {
	return func(c echo.Context) error {
		if _, err := readQuery(c.Request().URL.RawQuery); err != nil {
			return err
		}
		c.Response().Header().Set("Content-Type", contentType)
		return send(c, http.StatusOK, body)
	}
}
