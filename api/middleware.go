package api

import (
	"fmt"
	"net/http"
	"runtime/debug"

	"github.com/labstack/echo/v4"
)

// Header values that every answer shares. net/http reads them and changes none.
var (
	nosniff = []string{"nosniff"}
	closing = []string{"close"}
)

// identify names the request, with the caller's name for it where that is
// usable, and sets the headers that every answer carries.
func (a *API) identify(next echo.HandlerFunc) echo.HandlerFunc {
	return func(c echo.Context) error {
		h := c.Response().Header()
		if given := c.Request().Header[requestIDHeader]; len(given) == 1 && usableID(given[0]) {
			h[requestIDHeader] = given
		} else {
			h[requestIDHeader] = []string{a.ids.next()}
		}
		h["X-Content-Type-Options"] = nosniff
		if a.state.Load() == draining {
			h["Connection"] = closing
		}
		return next(c)
	}
}

// panicked is a panic that became an error on its way to the client.
type panicked struct {
	value any
	stack []byte
}

func (p *panicked) Error() string { return fmt.Sprint("panic: ", p.value) }

// recoverPanics turns a panic into an error, so that one bad request ends with a
// problem document and not with a connection cut off.
func (a *API) recoverPanics(next echo.HandlerFunc) echo.HandlerFunc {
	return func(c echo.Context) (err error) {
		defer func() {
			if v := recover(); v != nil {
				if v == http.ErrAbortHandler {
					panic(v)
				}
				err = &panicked{value: v, stack: debug.Stack()}
			}
		}()
		return next(c)
	}
}

func limitURL(next echo.HandlerFunc) echo.HandlerFunc {
	return func(c echo.Context) error {
		if len(c.Request().RequestURI) > maxURL {
			return &refusal{kind: uriTooLong, detail: fmt.Sprintf("the URL may have %d bytes; send a long request as a body by POST", maxURL)}
		}
		return next(c)
	}
}
