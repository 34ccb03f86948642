package api

import (
	"crypto/rand"
	"encoding/hex"
	"strconv"
	"sync/atomic"
)

const (
	requestIDHeader = "X-Request-Id"
	maxRequestID    = 64
)

// requestIDs names requests: a random prefix of the process and a counter, since
// a random id each would cost more than the rest of the middleware.
type requestIDs struct {
	prefix string
	last   atomic.Uint64
}

func newRequestIDs() *requestIDs {
	var b [6]byte
	rand.Read(b[:]) // never fails (crypto/rand)
	return &requestIDs{prefix: hex.EncodeToString(b[:]) + "-"}
}

func (ids *requestIDs) next() string {
	var b [40]byte
	return string(strconv.AppendUint(append(b[:0], ids.prefix...), ids.last.Add(1), 36))
}

// usableID reports whether a caller's id may stand in logs and headers as it is.
func usableID(id string) bool {
	if len(id) == 0 || len(id) > maxRequestID {
		return false
	}
	for i := range len(id) {
		c := id[i]
		letter := c|0x20 >= 'a' && c|0x20 <= 'z'
		if !letter && (c < '0' || c > '9') && c != '.' && c != '_' && c != '-' {
			return false
		}
	}
	return true
}
