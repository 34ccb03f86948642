package api

import (
	"log/slog"
	"net/http"
	"time"
)

// The limits of one request. Each has its own refusal but the last: a header
// block beyond it is answered by net/http itself.
const (
	maxBody   = 1 << 20  // bytes of a request body
	maxURL    = 8 << 10  // bytes of a request target
	maxHeader = 32 << 10 // bytes of all headers and the request line
)

// A calculation takes microseconds, so whoever needs longer than these is slow
// on the network or not a friend.
const (
	readHeaderTimeout = 5 * time.Second
	readTimeout       = 30 * time.Second
	writeTimeout      = 30 * time.Second
	idleTimeout       = 2 * time.Minute
)

// Server puts the timeouts and the header limit around a handler.
func Server(h http.Handler, log *slog.Logger) *http.Server {
	return &http.Server{
		Handler:           h,
		ReadHeaderTimeout: readHeaderTimeout,
		ReadTimeout:       readTimeout,
		WriteTimeout:      writeTimeout,
		IdleTimeout:       idleTimeout,
		MaxHeaderBytes:    maxHeader,
		ErrorLog:          slog.NewLogLogger(log.Handler(), slog.LevelWarn),
	}
}
