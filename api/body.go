package api

import (
	"errors"
	"fmt"
	"io"
	"mime"
	"net/http"
	"os"
	"strings"
	"sync"
	"time"

	"github.com/labstack/echo/v4"

	"borewright/service/document"
)

// exchange holds the bytes of one request and its answer, used again and again.
type exchange struct{ body, answer []byte }

// keptBytes is the largest buffer that is kept: one huge request must not make
// the process large for ever.
const keptBytes = 64 << 10

var exchanges = sync.Pool{New: func() any { return &exchange{body: make([]byte, 0, 2<<10), answer: make([]byte, 0, 4<<10)} }}

func (x *exchange) release() {
	if cap(x.body) <= keptBytes && cap(x.answer) <= keptBytes {
		exchanges.Put(x)
	}
}

// checkMediaType refuses a body that is not declared as JSON in UTF-8.
func checkMediaType(h http.Header) error {
	if e := h["Content-Encoding"]; len(e) > 0 && !(len(e) == 1 && strings.EqualFold(e[0], "identity")) {
		return &refusal{kind: unsupportedMedia, detail: "send the body as it is, without Content-Encoding"}
	}
	declared := h["Content-Type"]
	if len(declared) == 1 && (declared[0] == "application/json" || isJSON(declared[0])) {
		return nil
	}
	return &refusal{kind: unsupportedMedia, detail: "send Content-Type: application/json, in UTF-8"}
}

func isJSON(declared string) bool {
	media, params, err := mime.ParseMediaType(declared)
	if err != nil || media != "application/json" {
		return false
	}
	for name, value := range params {
		if name != "charset" || !strings.EqualFold(value, "utf-8") {
			return false
		}
	}
	return true
}

// readBody appends the body of r to buf, and refuses one beyond the limit as
// soon as it is known: at once if the length is declared, else while reading.
func readBody(r *http.Request, buf []byte) ([]byte, error) {
	if r.ContentLength > maxBody {
		return buf, tooLarge()
	}
	for {
		if len(buf) == cap(buf) {
			buf = append(buf, 0)[:len(buf)]
		}
		n, err := r.Body.Read(buf[len(buf):cap(buf)])
		buf = buf[:len(buf)+n]
		if len(buf) > maxBody {
			return buf, tooLarge()
		}
		if err == io.EOF {
			return buf, nil
		}
		if err != nil {
			return buf, cutOff(err)
		}
	}
}

func tooLarge() error {
	return &refusal{kind: bodyTooLarge, detail: fmt.Sprintf("a request may have %d bytes", maxBody)}
}

// cutOff words a body that did not arrive whole. The client is to blame, if it
// still listens.
func cutOff(err error) error {
	detail := "the body ended before its declared length"
	if errors.Is(err, os.ErrDeadlineExceeded) {
		detail = fmt.Sprintf("the body did not arrive within %v", readTimeout)
	}
	v := document.Violation{Code: "incomplete_body", Detail: detail}
	return &refusal{kind: malformedBody, detail: detail, violations: []document.Violation{v}}
}

const (
	drainTime  = 2 * time.Second
	drainBytes = 16 << 20
)

// drain takes what a client goes on sending after its answer is out. Many
// clients read only when they have sent all; a connection closed on them would
// take the answer with it. Bounded, for the same reason that there is a limit.
func drain(c echo.Context) {
	r := c.Request()
	if r.Header.Get("Expect") != "" {
		return // such a client has sent nothing and reads first
	}
	control := http.NewResponseController(c.Response().Writer)
	if control.Flush() != nil || control.SetReadDeadline(time.Now().Add(drainTime)) != nil {
		return
	}
	_, _ = io.CopyN(io.Discard, r.Body, drainBytes)
}
