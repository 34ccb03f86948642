// Package jsontext appends JSON values to bytes: the one place where numbers and
// texts become JSON, so that every door writes the same digits.
package jsontext

import (
	"math"
	"strconv"
	"unicode/utf8"
)

// AppendNumber appends the shortest text that reads back as the same number, in
// the form of JSON. Minus zero is written 0: inputs that differ by that sign
// alone have one fingerprint, and so one answer.
func AppendNumber(dst []byte, v float64) []byte {
	v += 0
	if a := math.Abs(v); a != 0 && (a < 1e-6 || a >= 1e21) {
		dst = strconv.AppendFloat(dst, v, 'e', -1, 64)
		if n := len(dst); n >= 4 && dst[n-4] == 'e' && dst[n-2] == '0' { // e-09 becomes e-9
			dst[n-2] = dst[n-1]
			dst = dst[:n-1]
		}
		return dst
	}
	return strconv.AppendFloat(dst, v, 'f', -1, 64)
}

const hexDigits = "0123456789abcdef"

// AppendString appends a JSON string. The text must be UTF-8.
func AppendString(dst []byte, s string) []byte {
	dst = append(dst, '"')
	start := 0
	for i := 0; i < len(s); i++ {
		c := s[i]
		if c >= 0x20 && c != '"' && c != '\\' && c < utf8.RuneSelf || c >= utf8.RuneSelf {
			continue
		}
		dst = append(dst, s[start:i]...)
		switch c {
		case '"', '\\':
			dst = append(dst, '\\', c)
		case '\n':
			dst = append(dst, '\\', 'n')
		case '\t':
			dst = append(dst, '\\', 't')
		case '\r':
			dst = append(dst, '\\', 'r')
		default:
			dst = append(dst, '\\', 'u', '0', '0', hexDigits[c>>4], hexDigits[c&15])
		}
		start = i + 1
	}
	return append(append(dst, s[start:]...), '"')
}
