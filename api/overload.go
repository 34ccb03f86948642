package api

import (
	"time"

	"github.com/labstack/echo/v4"
)

// DefaultMaxConcurrent is how many requests are answered at the same time: far
// more than cores, since most of a request is waiting for its client.
const DefaultMaxConcurrent = 256

// slotPatience is how long a request waits for its turn before it is turned away.
const slotPatience = 500 * time.Millisecond

// boundConcurrency turns requests away when too many are being answered, with
// the advice to come again: work that piles up would be late for everyone.
func (a *API) boundConcurrency(next echo.HandlerFunc) echo.HandlerFunc {
	return func(c echo.Context) error {
		select {
		case a.slots <- struct{}{}:
		default:
			if err := a.waitForSlot(c); err != nil {
				return err
			}
		}
		defer func() { <-a.slots }()
		return next(c)
	}
}

func (a *API) waitForSlot(c echo.Context) error {
	timer := time.NewTimer(slotPatience)
	defer timer.Stop()
	select {
	case a.slots <- struct{}{}:
		return nil
	case <-timer.C:
	case <-c.Request().Context().Done():
	}
	if a.metrics != nil {
		a.metrics.overloads.Inc()
	}
	return &refusal{kind: overloaded, detail: "too many requests are being answered; ask again in a second"}
}
