package api

import "github.com/labstack/echo/v4"

// The states of a server. It is born starting, and never leaves draining.
const (
	starting int32 = iota
	ready
	draining
)

// Ready lets /readyz say that requests are welcome.
func (a *API) Ready() { a.state.CompareAndSwap(starting, ready) }

// Drain lets /readyz say that new requests should go elsewhere, and asks every
// client that still comes to open a new connection next time, so that none is
// left on one that is about to close. Requests are answered as before.
func (a *API) Drain() { a.state.Store(draining) }

func (a *API) readiness(c echo.Context) error {
	if a.state.Load() != ready {
		return &refusal{kind: notReady, detail: "this server is starting or stopping; ask another one, or again in a second"}
	}
	return fixed("application/json", []byte(`{"status":"ready"}`))(c)
}
