// Package service answers what callers ask for, with no HTTP in it: documents
// in, answers out. It resolves names, calls calc, and writes notes, units and
// fingerprint.
package service

import "borewright/service/document"

// Service answers requests. It is safe for concurrent use.
type Service struct{}

// New returns a service.
func New() *Service { return &Service{} }

// AnswerJSON reads one JSON request for the door and appends its answer to dst.
// The error is a *document.Refusal where the request is to blame; anything else
// is our fault.
func (s *Service) AnswerJSON(dst, body []byte, door document.Door) ([]byte, error) {
	var req document.Request
	if err := document.Read(body, door, &req); err != nil {
		return dst, err
	}
	return dst, &document.Refusal{}
}
