// Package problem names the ways in which a request or a row of a batch can fail:
// one name, one status and one title each, whatever door it came through.
package problem

import (
	"strings"

	"borewright/service/document"
	"borewright/service/jsontext"
)

// Kind is one way to fail. The status is that of RFC 9110; a row of a batch holds it
// too, although its answer as a whole is a success.
type Kind struct {
	Name   string
	Status int
	Title  string
}

// The kinds that a row of a batch can meet as well as a request.
var (
	MalformedBody     = &Kind{"malformed_body", 400, "The body is not one readable document"}
	RowTooLarge       = &Kind{"row_too_large", 413, "The row is too large"}
	InvalidInput      = &Kind{"invalid_input", 422, "The request cannot be answered as it stands"}
	CalculationFailed = &Kind{"calculation_failed", 500, "The calculation failed"}
	SpoolFull         = &Kind{"spool_full", 507, "More answers than can be kept for a client that does not read"}
)

// Type is the stable name of the kind as problem documents carry it.
func (k *Kind) Type() string { return "/problems/" + k.Name }

// AppendJSON appends the problem of a row: type, title, status and every violation.
func AppendJSON(dst []byte, k *Kind, violations []document.Violation) []byte {
	dst = jsontext.AppendString(append(dst, `{"type":`...), k.Type())
	dst = jsontext.AppendString(append(dst, `,"title":`...), k.Title)
	dst = jsontext.AppendNumber(append(dst, `,"status":`...), float64(k.Status))
	dst = append(dst, `,"errors":[`...)
	for i, v := range violations {
		if i > 0 {
			dst = append(dst, ',')
		}
		dst = append(dst, '{')
		if v.Parameter != "" {
			dst = append(jsontext.AppendString(append(dst, `"parameter":`...), v.Parameter), ',')
		} else {
			dst = append(jsontext.AppendString(append(dst, `"pointer":`...), Fragment(v.Pointer)), ',')
		}
		dst = jsontext.AppendString(append(dst, `"code":`...), v.Code)
		dst = jsontext.AppendString(append(dst, `,"detail":`...), v.Detail)
		dst = append(dst, '}')
	}
	return append(dst, ']', '}')
}

const (
	unreserved = "-._~!$&'()*+,;=:@/?" // besides letters and digits: what a fragment may hold as it is (RFC 3986, 3.5)
	hexDigits  = "0123456789ABCDEF"
)

// Fragment writes a JSON pointer as a URI fragment (RFC 6901, section 6).
func Fragment(pointer string) string {
	b := append(make([]byte, 0, len(pointer)+1), '#')
	for i := range len(pointer) {
		c := pointer[i]
		if c|0x20 >= 'a' && c|0x20 <= 'z' || c >= '0' && c <= '9' || strings.IndexByte(unreserved, c) >= 0 {
			b = append(b, c)
		} else {
			b = append(b, '%', hexDigits[c>>4], hexDigits[c&15])
		}
	}
	return string(b)
}
